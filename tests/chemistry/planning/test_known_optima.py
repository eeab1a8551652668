"""Optima that can be worked out by hand."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.planning import PlanRequest, plan


def planned(objective, **fields):
    return plan(PlanRequest(**{"model": "independent_sites", **fields}, objective=objective))


def most_of(level):
    return {"kind": "most_of_level", "level": level}


def test_most_mono_of_thirty_equal_sites():
    found = planned(most_of(1), sites=30, reagent_efficiency=0.8)

    # (29/30)^29 at one addition per cage: derived from the binomial law.
    assert found.objective_value == pytest.approx((29 / 30) ** 29, abs=1e-15)
    assert found.uptake == 1.0
    assert found.equivalents == 1.25
    assert found.conversion == pytest.approx(1 - (29 / 30) ** 30, abs=1e-15)


@given(data=st.data(), sites=st.integers(2, 200))
def test_most_of_a_level_lies_at_its_own_uptake(data, sites):
    level = data.draw(st.integers(1, sites - 1))

    # d/dp of p^k (1−p)^(N−k) vanishes at p = k/N: derived.
    assert planned(most_of(level), sites=sites).uptake == level


@given(data=st.data(), sites=st.integers(2, 200))
def test_most_of_a_poisson_level_lies_at_its_own_uptake(data, sites):
    level = data.draw(st.integers(1, sites - 1))

    # d/dm of m^k e^(−m) vanishes at m = k: derived.
    assert planned(most_of(level), model="poisson", sites=sites).uptake == level


def test_a_band_of_poisson_levels():
    # d/dm of (m² + m³/3) e^(−m) is proportional to m (6 − m²): derived.
    found = planned({"kind": "band", "lowest": 2, "highest": 3}, model="poisson")

    assert found.uptake == pytest.approx(math.sqrt(6), rel=1e-14)


def test_a_band_of_equal_sites():
    # Three sites: x_1 + x_2 = 3 p (1−p), most at p = 1/2; four: x_1 + x_2 + x_3 = 1 − p⁴ − (1−p)⁴,
    # also at 1/2, and x_1 + x_2 = 4 p q³ + 6 p² q² where p/q = √(1/3 · 2/2): derived.
    band = {"kind": "band", "lowest": 1, "highest": 2}
    three, four = planned(band, sites=3), planned(band, sites=4)

    assert three.uptake == pytest.approx(1.5, rel=1e-14)
    assert planned({**band, "highest": 3}, sites=4).uptake == pytest.approx(2, rel=1e-14)
    assert four.uptake == pytest.approx(4 / (1 + math.sqrt(3)), rel=1e-14)


def test_most_mono_of_two_sites_with_attenuation():
    # r = 1, f/2, 0: x_1 = (e^(−f τ/2) − e^(−τ)) / (1 − f/2), most at τ = ln(f/2) / (f/2 − 1):
    # consecutive first-order reactions, textbook kinetics.
    second = 0.3 / 2
    found = planned(most_of(1), model="sequential", sites=2, attenuation=0.3)

    exposure = math.log(second) / (second - 1)
    most = (math.exp(-second * exposure) - math.exp(-exposure)) / (1 - second)
    assert found.exposure == pytest.approx(exposure, rel=1e-8)
    assert found.objective_value == pytest.approx(most, abs=1e-14)


def test_mono_to_multi_of_two_sites():
    # x_1 : x_2 = 2 (1−p) : p, so a ratio R is met up to p = 2/(2+R): derived.
    found = planned({"kind": "mono_to_multi", "ratio": 6}, sites=2)

    assert found.uptake / 2 == pytest.approx(2 / 8, rel=1e-12)
    assert found.objective_value >= 6


@pytest.mark.parametrize("model", ["independent_sites", "poisson"])
@pytest.mark.parametrize("value", [1e-6, 0.5, 2.0, 29.5])
def test_an_uptake_is_met_as_asked(model, value):
    found = planned({"kind": "uptake", "value": value}, model=model, reagent_efficiency=0.5)

    assert found.uptake == value
    assert found.equivalents == 2 * value
    assert found.objective_value == value
    assert found.objective_met


def test_the_last_level_is_the_end_of_the_reaction():
    found = planned(most_of(30), sites=30, reagent_efficiency=0.5)

    assert found.mole_fraction[30] == 1.0
    assert found.equivalents == 60.0
    assert found.exposure is None
    assert found.objective_met
    assert "never quite reached" in found.message


def test_mono_is_all_there_can_be_after_a_blocking_addition():
    found = planned({"kind": "mono_to_multi", "ratio": 5}, model="sequential", attenuation=0.0)

    assert found.mole_fraction[1] == 1.0
    assert found.mono_to_multi is None
    assert found.objective_met
    assert "Nothing adds twice" in found.message
