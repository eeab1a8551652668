"""Poisson: the law itself, its cut at the last level, and its place as the limit of many sites."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.distribution import DistributionRequest, distribution


def composed(**fields):
    return distribution(DistributionRequest(model="poisson", **fields))


@given(sites=st.integers(1, 200), share=st.floats(0, 1))
def test_it_is_the_law_and_its_last_level_stands_for_all_above(
    sites, share, exact_series, furthest
):
    uptake = min(share * sites, float(sites))

    found = composed(sites=sites, uptake=uptake).mole_fraction

    # Arrivals at a steady rate of which the last is never left: exactly the law, cut at N.
    assert furthest(found, exact_series([1] * sites + [0], uptake)) < 1e-13


def test_it_has_no_exposure_of_its_own():
    assert composed(uptake=1.5).exposure is None


def test_an_exposure_is_the_uptake():
    assert composed(exposure=1.5) == composed(uptake=1.5)


@pytest.mark.parametrize("exposure", [600.0, 1e6, 1e300])
def test_a_very_long_exposure_ends_above_the_last_level(exposure):
    found = composed(sites=30, exposure=exposure)

    assert found.mole_fraction[30] == pytest.approx(1.0, abs=1e-15)
    assert found.uptake == exposure


@pytest.mark.parametrize("uptake", [0.1, 1.0, 4.0])
def test_many_sites_come_near_it(uptake):
    poisson = composed(sites=200, uptake=uptake).mole_fraction
    sites = distribution(
        DistributionRequest(model="independent_sites", sites=200, uptake=uptake)
    ).mole_fraction

    # Le Cam's bound: the sum of differences is at most 2 N p² = 2 m²/N (Pacific J. Math. 1960, 10,
    # 1181; from memory).
    apart = sum(abs(a - b) for a, b in zip(poisson, sites, strict=True))
    assert 0 < apart <= 2 * uptake**2 / 200


def test_more_than_the_sites_is_refused():
    with pytest.raises(ValueError, match="An uptake of 31 is more than the 30 sites of this cage"):
        composed(sites=30, uptake=31)


def test_one_addition_per_cage_leaves_a_share_of_one_over_e_unreacted():
    # e^(−1) to 20 digits, as any table of constants has it.
    exact = Fraction("0.36787944117144232160")

    found = composed(sites=30, uptake=1.0)

    assert abs(Fraction(found.unreacted) - exact) < 1e-16
    assert abs(Fraction(found.mole_fraction[1]) - exact) < 1e-16
