"""Independent sites against the binomial law in exact fractions (textbook form)."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.distribution import DistributionRequest, distribution


def composed(**fields):
    return distribution(DistributionRequest(model="independent_sites", **fields))


@given(sites=st.integers(1, 200), share=st.floats(0, 1))
def test_from_an_uptake_it_is_the_binomial_law(sites, share, exact_binomial, furthest):
    uptake = min(share * sites, float(sites))

    found = composed(sites=sites, uptake=uptake).mole_fraction

    assert furthest(found, exact_binomial(sites, uptake)) < 1e-13


@pytest.mark.parametrize("sites", [1, 2, 30, 45, 200])
@pytest.mark.parametrize("exposure", [0.0, 1e-9, 0.3, 20.0, 1e3, 1e6])
def test_from_an_exposure_it_is_the_binomial_law(sites, exposure, exact_chain, furthest):
    # r_k = (N−k)/N, so the chain's own exact solution is the law at p = 1 − e^(−τ/N).
    exact = exact_chain(sites, 1.0, exposure)

    assert furthest(composed(sites=sites, exposure=exposure).mole_fraction, exact) < 1e-13


def test_one_addition_per_cage_leaves_most_mono():
    found = composed(sites=30, uptake=1.0)

    # The statistical best of mono-adduct, (29/30)^29: derived from the binomial law.
    assert found.mole_fraction[1] == pytest.approx((29 / 30) ** 29, abs=1e-15)
    assert found.unreacted == pytest.approx((29 / 30) ** 30, abs=1e-15)
    assert found.exposure == pytest.approx(-30 * math.log(29 / 30), rel=1e-15)


def test_equivalents_bring_their_efficient_share():
    assert composed(equivalents=2.5, reagent_efficiency=0.8) == composed(uptake=2.0)


def test_all_sites_filled_is_the_end_without_a_finite_exposure():
    found = composed(sites=30, uptake=30)

    assert found.mole_fraction == [0.0] * 30 + [1.0]
    assert found.exposure is None
    assert found.mono_to_multi == 0.0


def test_no_uptake_is_all_cage():
    found = composed(sites=30, uptake=0)

    assert found.mole_fraction == [1.0] + [0.0] * 30
    assert found.exposure == 0.0
    assert found.mono_to_multi is None


def test_a_cage_of_one_site_has_no_multi():
    assert composed(sites=1, uptake=0.5).mono_to_multi is None


def test_a_trace_of_reagent_keeps_its_ratio():
    # x_1 / x_2 = 2 (1−p) / ((N−1) p): derived; x_3 and above don't count here.
    uptake = 1e-9
    expected = 2 * (1 - uptake / 30) / (29 * uptake / 30)

    assert composed(sites=30, uptake=uptake).mono_to_multi == pytest.approx(expected, rel=1e-8)
