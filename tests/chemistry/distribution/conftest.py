"""Exact compositions to hold ours against: in decimal arithmetic of as many digits as it takes."""

from __future__ import annotations

from decimal import Decimal, localcontext
from fractions import Fraction

import pytest


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


def _decimal(number):
    return Decimal(number.numerator) / Decimal(number.denominator)


def _by_partial_fractions(rates, exposure, digits):
    """x_k = Σ_i c_ik e^(−r_i τ) with c_ik = c_i(k−1) r_(k−1)/(r_k − r_i); rates must differ.

    The textbook solution of a chain of first-order steps (Bateman, Proc. Cambridge Philos. Soc.
    1910, 15, 423; from memory). It cancels nearly all its digits, hence so many of them.
    """
    with localcontext() as context:
        context.prec = digits
        context.Emin, context.Emax = -(10**17), 10**17
        exact = [_decimal(rate) for rate in rates]
        decays = [(-rate * Decimal(exposure)).exp() for rate in exact]
        coefficients, composition = [Decimal(1)], [decays[0]]
        for level in range(1, len(exact)):
            if exact[level - 1] == 0:
                composition.append(Decimal(0))
                continue
            coefficients = [
                coefficient * exact[level - 1] / (exact[level] - rate)
                for coefficient, rate in zip(coefficients, exact, strict=False)
            ]
            coefficients.append(-sum(coefficients))
            composition.append(
                sum(c * decay for c, decay in zip(coefficients, decays, strict=False))
            )
        return composition, abs(sum(composition) - 1)


@pytest.fixture(scope="session")
def exact_chain():
    """Return x_0 … x_N at an exposure, right to far more digits than a float holds."""

    def solve(sites, attenuation, exposure):
        rates = _exact_rates(sites, attenuation)
        digits = 200
        while True:
            composition, unbalanced = _by_partial_fractions(rates, exposure, digits)
            if unbalanced < Decimal("1e-40"):
                return composition
            digits *= 2
            assert digits < 20_000, "two rates are equal"

    return solve


@pytest.fixture(scope="session")
def exact_series():
    """Return the composition of a chain by its series of jumps; equal rates are welcome.

    Uniformisation in 60 digits: Σ_n e^(−Λτ) (Λτ)^n/n! · e_0 Pⁿ with P = 1 + A/Λ.
    """

    def solve(rates, exposure):
        rates = [Fraction(rate) for rate in rates]
        with localcontext() as context:
            context.prec = 60
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
    """Return the binomial law of N sites, of which the share p (a Fraction) has reacted."""

    def solve(sites, share):
        found, choices = [], 1
        for level in range(sites + 1):
            found.append(choices * share**level * (1 - share) ** (sites - level))
            choices = choices * (sites - level) // (level + 1)
        return found

    return solve
