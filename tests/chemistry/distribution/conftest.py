"""Exact compositions to hold ours against: in decimal arithmetic of as many digits as it takes."""

from __future__ import annotations

from decimal import Decimal, localcontext
from fractions import Fraction
from functools import lru_cache

import pytest

# Beyond this, e^(−rate·exposure) is below 10^(−40000).
ENDLESS = 100_000


def _exact_rates(sites, attenuation):
    """r_k = (N−k)/N · Π_{j<k} f_j as fractions; a factor is what its floating-point number is."""
    factors = list(attenuation) if isinstance(attenuation, (list, tuple)) else [attenuation] * sites
    factors += [1.0] * (sites - len(factors))
    product, found = Fraction(1), []
    for level in range(sites + 1):
        found.append(Fraction(sites - level, sites) * product)
        if level < sites:
            product *= Fraction(factors[level])
    return found


def _set_apart(rates):
    """Move rates that coincide by 1e-60 of themselves, far less than what is looked at."""
    seen, apart = set(), []
    for rate in rates:
        while rate in seen and rate:
            rate *= 1 + Fraction(1, 10**60)
        seen.add(rate)
        apart.append(rate)
    return tuple(apart)


def _decimal(number):
    number = Fraction(number)
    return Decimal(number.numerator) / Decimal(number.denominator)


@lru_cache(maxsize=8)
def _coefficients(rates, digits):
    """c_ik of x_k = Σ_i c_ik e^(−r_i τ): c_ik = c_i(k−1) r_(k−1)/(r_k − r_i), x_k(0) = 0.

    The textbook solution of a chain of first-order steps (Bateman, Proc. Cambridge Philos. Soc.
    1910, 15, 423; from memory). It cancels nearly all its digits, hence so many of them.
    """
    with localcontext(prec=digits, Emin=-(10**17), Emax=10**17):
        exact = [_decimal(rate) for rate in rates]
        rows = [[Decimal(1)]]
        for level in range(1, len(exact)):
            if exact[level - 1] == 0:
                break
            row = [
                coefficient * exact[level - 1] / (exact[level] - rate)
                for coefficient, rate in zip(rows[-1], exact, strict=False)
            ]
            row.append(-sum(row))
            rows.append(row)
        return exact, rows


def _by_partial_fractions(rates, exposure, digits):
    exact, rows = _coefficients(rates, digits)
    with localcontext(prec=digits, Emin=-(10**17), Emax=10**17):
        steps = [rate * Decimal(exposure) for rate in exact]
        decays = [(-step).exp() if step < ENDLESS else Decimal(0) for step in steps]
        composition = [
            sum(c * decay for c, decay in zip(row, decays, strict=False) if decay) for row in rows
        ]
        composition = [Decimal(share) for share in composition]
        blocked = [Decimal(0)] * (len(rates) - len(composition))
        return composition + blocked, abs(sum(composition) - 1)


@pytest.fixture(scope="session")
def exact_chain():
    """Return x_0 … x_N at an exposure, right to far more digits than a float holds."""

    def solve(sites, attenuation, exposure):
        rates = _set_apart(_exact_rates(sites, attenuation))
        digits = 400
        while True:
            composition, unbalanced = _by_partial_fractions(rates, exposure, digits)
            if unbalanced < Decimal("1e-40"):
                return composition
            digits *= 2
            assert digits < 50_000

    return solve


@pytest.fixture(scope="session")
def exact_series():
    """Return the composition of a chain by its series of jumps; equal rates are welcome.

    Uniformisation in 60 digits: Σ_n e^(−Λτ) (Λτ)^n/n! · e_0 Pⁿ with P = 1 + A/Λ.
    """

    def solve(rates, exposure):
        rates = [Fraction(rate) for rate in rates]
        with localcontext(prec=60):
            fastest = max(rates)
            go = [_decimal(rate / fastest) for rate in rates]
            jumps = _decimal(fastest) * Decimal(exposure)
            row = [Decimal(1)] + [Decimal(0)] * (len(rates) - 1)
            weight, order, total = (-jumps).exp(), 0, [Decimal(0)] * len(rates)
            while order < jumps or weight > Decimal("1e-40"):
                total = [t + weight * x for t, x in zip(total, row, strict=True)]
                row = [
                    x * (1 - g) + (row[k - 1] * go[k - 1] if k else 0)
                    for k, (x, g) in enumerate(zip(row, go, strict=True))
                ]
                order += 1
                weight = weight * jumps / order
            return total

    return solve


@pytest.fixture(scope="session")
def exact_binomial():
    """Return the binomial law of N sites at an uptake, in 60 digits."""

    def solve(sites, uptake):
        found, choices = [], 1
        with localcontext(prec=60):
            share = Decimal(uptake) / sites
            for level in range(sites + 1):
                # Decimal leaves 0⁰ open.
                reacted = share**level if level else 1
                left = (1 - share) ** (sites - level) if level < sites else 1
                found.append(Decimal(choices * reacted * left))
                choices = choices * (sites - level) // (level + 1)
        return found

    return solve


@pytest.fixture(scope="session")
def furthest():
    """Return the largest absolute difference between a composition and its exact counterpart."""

    def distance(found, exact):
        with localcontext(prec=60):
            return max(
                abs(Decimal(float(share)) - truth)
                for share, truth in zip(found, exact, strict=True)
            )

    return distance
