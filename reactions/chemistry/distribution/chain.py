"""The sequential model: a chain of additions, each at its own rate.

    dx_k/dτ = r_{k−1} x_{k−1} − r_k x_k,   r_k = (N−k)/N · Π_{j<k} f_j,   x_0(0) = 1

A pure-birth process; the equation and its rates are the project's own model of attenuation, with
the independent-sites law as its case f = 1.

The chain is linear and bidiagonal, so x(τ) is the first row of exp(Aτ). Rates may differ by many
powers of ten and may coincide, which rules out integration in steps and divided differences. Used
here is uniformisation for a short time h followed by squaring: every entry is a sum of products of
positive numbers, so nothing cancels, and each diagonal entry is set to its exact exp(−r_k t) at
every squaring. An entry d places off the diagonal then has a relative error of at most about
d·s·2⁻⁵² after s squarings: below 10⁻¹² for N = 200 (Moler, Van Loan, SIAM Rev. 2003, 45, 3, on
scaling and squaring; Grassmann, Comput. Oper. Res. 1977, 4, 47, on uniformisation; from memory).
The squares are kept, so that any further exposure costs only products of a row with them.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

FloatArray = NDArray[np.float64]

# Probability of more than 8 additions within h is below (2⁻¹⁰)⁹/9!, nothing beside 2⁻⁵³.
_SHORT = 2.0**-10
_TERMS = 8
# The density of arriving at a level is at most r_0 = 1, so a level left at a rate of 10¹⁸ never
# holds more than 10⁻¹⁸; a faster one would only lengthen the computation.
_FASTEST = 1e18


def rates(sites: int, attenuation: float | tuple[float, ...]) -> FloatArray:
    """Return r_0 … r_N for N = ``sites``, in units of the first addition's rate (r_0 = 1, r_N = 0).

    One attenuation is the factor that each addition brings; a list holds the factor of the first,
    second … addition present, and additions beyond its end bring no further factor.
    """
    factors = np.ones(sites)
    if isinstance(attenuation, tuple):
        factors[: len(attenuation)] = attenuation[:sites]
    else:
        factors[:] = attenuation
    with np.errstate(over="ignore", under="ignore"):
        products = np.concatenate(([1.0], np.cumprod(factors)))
        left = (sites - np.arange(sites + 1)) / sites
        return np.where(left > 0, np.minimum(left * np.minimum(products, 1e300), _FASTEST), 0.0)


class BirthChain:
    """The chain of given rates r_0 … r_N (r_N = 0), started with all cages at level 0."""

    def __init__(self, chain_rates: FloatArray) -> None:
        self._rates = chain_rates
        self._short = 2.0 ** math.floor(math.log2(_SHORT / float(chain_rates.max())))
        self._squares = [self._first()]

    def compositions(self, exposures: FloatArray) -> FloatArray:
        """Return x(τ) for each finite exposure τ ≥ 0, one row each, shape (points, N+1)."""
        rows = np.zeros((len(exposures), len(self._rates)))
        rows[:, 0] = 1.0
        whole = np.floor(exposures / self._short)
        counts = [int(count) for count in whole]
        place = 0
        while any(count >> place for count in counts):
            chosen = np.array([bool(count >> place & 1) for count in counts])
            if chosen.any():
                rows[chosen] = rows[chosen] @ self._square(place)
            place += 1
        rest = exposures - whole * self._short
        rows = self._advanced(rows, rest)
        normalised: FloatArray = rows / rows.sum(axis=1, keepdims=True)
        return normalised

    def _first(self) -> FloatArray:
        identity = np.eye(len(self._rates))
        matrix = self._advanced(identity, np.full(len(self._rates), self._short))
        return self._with_exact_diagonal(matrix, self._short)

    def _square(self, place: int) -> FloatArray:
        """Return exp(A·h·2^place)."""
        while len(self._squares) <= place:
            last = self._squares[-1]
            duration = self._short * 2.0 ** len(self._squares)
            self._squares.append(self._with_exact_diagonal(last @ last, duration))
        return self._squares[place]

    def _with_exact_diagonal(self, matrix: FloatArray, duration: float) -> FloatArray:
        np.fill_diagonal(matrix, np.exp(-self._rates * duration))
        return matrix

    def _advanced(self, rows: FloatArray, durations: FloatArray) -> FloatArray:
        """Return each row after a short time (at most h): e^(−Λt) Σ (Λt)^n/n! · row · Pⁿ."""
        fastest = float(self._rates.max())
        stay = 1.0 - self._rates / fastest
        go = self._rates[:-1] / fastest
        scaled = (fastest * durations)[:, np.newaxis]
        power, total = rows, rows.copy()
        weight = np.ones_like(scaled)
        for order in range(1, _TERMS + 1):
            moved = power * stay
            moved[:, 1:] += power[:, :-1] * go
            power = moved
            weight = weight * scaled / order
            total = total + weight * power
        advanced: FloatArray = np.exp(-scaled) * total
        return advanced
