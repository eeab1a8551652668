"""The sequential chain against its exact solution in as many digits as it takes."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from reactions.chemistry.distribution import DistributionRequest, distribution


def composed(**fields):
    return distribution(DistributionRequest(model="sequential", **fields))


# Exposures around 64 lie on either side of where jumps are no longer counted but squared.
EXPOSURES = (0.0, 1e-6, 0.1, 1.0, 5.0, 62.0, 66.0, 300.0, 1e6)


@pytest.mark.parametrize("sites", [1, 2, 30, 45, 200])
@pytest.mark.parametrize("attenuation", [0.0, 1e-3, 0.5, 0.97, 0.999, 1.0, 1.5, 3.0])
def test_one_attenuation(sites, attenuation, exact_chain, furthest):
    for exposure in EXPOSURES:
        found = composed(sites=sites, attenuation=attenuation, exposure=exposure).mole_fraction

        assert furthest(found, exact_chain(sites, attenuation, exposure)) < 1e-13
        assert abs(math.fsum(found) - 1) < 1e-13


@pytest.mark.parametrize("sites", [30, 200])
@pytest.mark.parametrize(
    "attenuation", [[0.5, 2.0, 0.1], [1.5] * 20, [1e-3, 1000.0, 3.0, 1e-3], [3.0, 3.0, 0.0]]
)
def test_a_list_of_attenuations(sites, attenuation, exact_chain, furthest):
    for exposure in EXPOSURES:
        found = composed(sites=sites, attenuation=attenuation, exposure=exposure).mole_fraction

        assert furthest(found, exact_chain(sites, attenuation, exposure)) < 1e-13


@settings(max_examples=40)
@given(
    sites=st.integers(2, 60),
    factors=st.lists(st.floats(1e-3, 3), min_size=1, max_size=10),
    power=st.floats(-4, 6),
)
def test_one_attenuation_for_each_addition(sites, factors, power, exact_chain, furthest):
    attenuation, exposure = factors[:sites], 10.0**power

    found = composed(sites=sites, attenuation=attenuation, exposure=exposure).mole_fraction

    assert furthest(found, exact_chain(sites, attenuation, exposure)) < 1e-13


@pytest.mark.parametrize("exposure", [0.1, 1.0, 10.0, 60.0])
def test_equal_rates_are_no_trouble(exposure, exact_series, furthest):
    # Three sites, each addition doubling the rate per site: r = 1, 4/3, 4/3, 0.
    found = composed(sites=3, attenuation=2.0, exposure=exposure).mole_fraction

    assert furthest(found, exact_series(["1", "4/3", "4/3", "0"], exposure)) < 1e-15


def test_a_list_goes_on_without_further_factor():
    short = composed(sites=30, attenuation=[0.5], exposure=2.0)
    written_out = composed(sites=30, attenuation=[0.5] + [1.0] * 29, exposure=2.0)

    assert short.mole_fraction == pytest.approx(written_out.mole_fraction, abs=1e-15)


def test_a_factor_acts_from_its_addition_on():
    # With the second factor 0, nothing goes beyond level 2.
    found = composed(sites=30, attenuation=[0.5, 0.0], exposure=50.0)

    assert found.mole_fraction[2] > 0.99
    assert found.mole_fraction[3:] == [0.0] * 28


@given(sites=st.integers(1, 200), power=st.floats(-6, 6))
def test_without_attenuation_it_is_the_binomial_law(sites, power):
    exposure = 10.0**power
    independent = distribution(
        DistributionRequest(model="independent_sites", sites=sites, exposure=exposure)
    )

    assert composed(sites=sites, attenuation=1.0, exposure=exposure) == independent
    assert composed(sites=sites, attenuation=[1.0], exposure=exposure) == independent


@settings(max_examples=40)
@given(sites=st.integers(2, 200), power=st.floats(-4, 5), side=st.sampled_from([-1, 1]))
def test_the_chain_itself_comes_to_the_binomial_law(sites, power, side):
    # So near to 1 that the law differs by less than rounding, yet solved as a chain.
    exposure, factor = 10.0**power, 1.0 + side * 2.0**-52
    independent = distribution(
        DistributionRequest(model="independent_sites", sites=sites, exposure=exposure)
    )

    found = composed(sites=sites, attenuation=factor, exposure=exposure)

    assert found.mole_fraction == pytest.approx(independent.mole_fraction, abs=1e-12)


@pytest.mark.parametrize("sites", [1, 30, 200])
@pytest.mark.parametrize("exposure", [0.0, 0.5, 40.0, 1e6])
def test_a_first_addition_that_blocks_all_others(sites, exposure, exact_chain, furthest):
    found = composed(sites=sites, attenuation=0.0, exposure=exposure).mole_fraction

    exact = exact_chain(sites, 0.0, exposure)
    assert furthest(found, exact) < 1e-15


@pytest.mark.parametrize("sites", [2, 30, 100])
@pytest.mark.parametrize("attenuation", [1e-3, 0.5, 0.9, 1.1, 3.0])
@pytest.mark.parametrize("exposure", [1e-3, 0.7, 30.0])
def test_an_uptake_brings_back_the_composition(sites, attenuation, exposure, exact_chain, furthest):
    exact = exact_chain(sites, attenuation, exposure)
    uptake = float(sum(level * share for level, share in enumerate(exact)))

    found = composed(sites=sites, attenuation=attenuation, uptake=uptake)

    assert furthest(found.mole_fraction, exact) < 1e-12


@pytest.mark.parametrize("uptake", [3.5, 15.5, 29.5])
def test_an_uptake_far_along_a_strongly_blocked_chain(uptake):
    # Each addition a thousand times slower than the one before: only two levels are ever there
    # together, up to about 1 in 1000 (derived from the ratio of neighbouring rates).
    below = int(uptake)

    found = composed(sites=30, attenuation=1e-3, uptake=uptake)

    assert sum(found.mole_fraction[below : below + 2]) == pytest.approx(1, abs=5e-3)
    assert found.mole_fraction[below] == pytest.approx(0.5, abs=5e-3)


def test_an_uptake_just_short_of_the_end():
    found = composed(sites=30, attenuation=0.5, uptake=30 - 1e-9)

    assert found.mole_fraction[30] == pytest.approx(1 - 1e-9, abs=1e-13)
    assert found.exposure is not None


@pytest.mark.parametrize("attenuation", [1e-3, 0.7, 1000.0])
def test_exposures_without_end_fill_what_can_be_filled(attenuation):
    found = composed(sites=30, attenuation=attenuation, exposure=1e300)

    assert found.mole_fraction == [0.0] * 30 + [1.0]
