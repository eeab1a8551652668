"""Binomial and Poisson compositions, each term a product of positive numbers, so nothing cancels.

Relative error at most about 2·N·2⁻⁵³, below 5·10⁻¹⁴ for N = 200, before the terms are normalised.
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np
from numpy.typing import NDArray

FloatArray = NDArray[np.float64]


def binomial(sites: int, reacted: FloatArray, unreacted: FloatArray) -> FloatArray:
    """Return x_k = C(N,k) p^k q^(N−k), one row of k = 0…N for each site share p = ``reacted``.

    The composition of N sites that react independently (1 to 200). The share left, q = 1 − p, is
    given beside it, so that neither end of the range loses figures. Textbook form of the binomial
    distribution.
    """
    levels = np.arange(sites + 1)
    with np.errstate(under="ignore"):
        terms = (
            _choices(sites)
            * reacted[:, np.newaxis] ** levels
            * unreacted[:, np.newaxis] ** levels[::-1]
        )
    return normalised(terms)


@cache
def _choices(sites: int) -> FloatArray:
    """Return C(N,k) for k = 0…N; the array is not to be written to."""
    choices = np.array([math.comb(sites, level) for level in range(sites + 1)], dtype=np.float64)
    choices.flags.writeable = False
    return choices


def poisson(sites: int, means: FloatArray) -> FloatArray:
    """Return x_k = m^k e^(−m) / k! for k = 0…N−1 and, as x_N, the share of N or more additions.

    One row for each mean m from 0 to infinity. The limit of many sites. Levels are cut at N, and
    what lies above is counted into x_N, so that the fractions sum to 1.
    """
    # A mean of N + 20 √N + 100 or more leaves less than 10⁻⁵⁰ under level N.
    limit = sites + 20 * math.sqrt(sites) + 100
    rows = np.zeros((len(means), sites + 1))
    counted = means < limit
    rows[~counted, sites] = 1.0
    if counted.any():
        rows[counted] = _cut(sites, means[counted])
    return rows


def _cut(sites: int, means: FloatArray) -> FloatArray:
    """Return the terms up to N, the tail summed term by term into the last."""
    terms = poisson_terms(means, max(sites, poisson_terms_needed(float(means.max()))))
    return normalised(
        np.concatenate((terms[:, :sites], terms[:, sites:].sum(axis=1, keepdims=True)), axis=1)
    )


def poisson_terms_needed(mean: float) -> int:
    """Return up to which k the terms m^k e^(−m) / k! matter: all beyond it is below 10⁻³⁵."""
    return math.ceil(mean + 12 * math.sqrt(mean) + 40)


def poisson_terms(means: FloatArray, highest: int) -> FloatArray:
    """Return m^k e^(−m) / k! for k = 0 … ``highest``, one row for each mean m (0 to 1,000)."""
    # Half of the terms' common factor e^(−m) before and half after, so that neither end overflows.
    half = np.exp(-means / 2)[:, np.newaxis]
    ratios = means[:, np.newaxis] / np.arange(1, highest + 1)
    with np.errstate(under="ignore"):
        terms: FloatArray = half * np.cumprod(np.concatenate((half, ratios), axis=1), axis=1)
    return terms


def normalised(rows: FloatArray) -> FloatArray:
    """Return each row divided by its sum."""
    shares: FloatArray = rows / rows.sum(axis=1, keepdims=True)
    return shares
