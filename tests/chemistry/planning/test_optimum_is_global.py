"""No composition anywhere along the reaction serves an objective better than the plan."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from reactions.chemistry.distribution import CompositionModel
from reactions.chemistry.planning import PlanRequest, plan

factors = st.one_of(st.just(0.0), st.floats(0.01, 3.0))


@st.composite
def models(draw):
    kind = draw(st.sampled_from(["independent_sites", "poisson", "sequential", "sequential"]))
    sites = draw(st.integers(3, 60))
    fields = {"model": kind, "sites": sites}
    if kind == "sequential":
        fields["attenuation"] = draw(st.one_of(factors, st.lists(factors, min_size=1, max_size=3)))
    return fields


def model_of(fields):
    attenuation = fields.get("attenuation", 1.0)
    if isinstance(attenuation, list):
        attenuation = tuple(attenuation)
    return CompositionModel(fields["model"], fields["sites"], attenuation)


def everywhere(fields, around):
    """Compositions along the whole reaction, closer and closer around an exposure."""
    exposures = np.logspace(-6, 12, 1500)
    if around:
        near = around * (1 + np.logspace(-7, -0.5, 100))
        exposures = np.concatenate((exposures, near, around * around / near))
    return model_of(fields).compositions(exposures)


def planned(fields, objective):
    return plan(PlanRequest(**fields, objective=objective))


def exposure_of(found):
    return found.uptake if found.exposure is None else found.exposure


@settings(max_examples=60)
@given(fields=models(), data=st.data())
def test_nowhere_is_more_of_a_level(fields, data):
    level = data.draw(st.integers(1, min(8, fields["sites"] - 1)))

    found = planned(fields, {"kind": "most_of_level", "level": level})

    best = everywhere(fields, exposure_of(found))[:, level].max()
    assert found.mole_fraction[level] == found.objective_value
    assert found.objective_value >= best - 1e-13


@settings(max_examples=60)
@given(fields=models(), data=st.data())
def test_nowhere_is_more_within_a_band(fields, data):
    lowest = data.draw(st.integers(1, min(6, fields["sites"] - 1)))
    highest = data.draw(st.integers(lowest, min(lowest + 4, fields["sites"] - 1)))

    found = planned(fields, {"kind": "band", "lowest": lowest, "highest": highest})

    best = everywhere(fields, exposure_of(found))[:, lowest : highest + 1].sum(axis=1).max()
    assert found.objective_value >= best - 1e-13


@settings(max_examples=60)
@given(fields=models(), power=st.floats(-2, 4))
def test_nowhere_does_more_react_at_the_ratio_asked_for(fields, power):
    ratio = 10.0**power

    found = planned(fields, {"kind": "mono_to_multi", "ratio": ratio})

    if found.mono_to_multi is None:
        assert model_of(fields).highest_level < 2
        return
    assert ratio <= found.mono_to_multi <= ratio * (1 + 1e-11)
    rows = everywhere(fields, exposure_of(found))
    keeps = rows[:, 1] >= ratio * rows[:, 2:].sum(axis=1)
    assert found.conversion >= (1 - rows[keeps, 0]).max() - 1e-11


@settings(max_examples=60)
@given(fields=models(), share=st.floats(0.01, 0.99))
def test_an_uptake_is_met(fields, share):
    value = share * model_of(fields).highest_level
    assume(value > 0)

    found = planned(fields, {"kind": "uptake", "value": value})

    mean = sum(level * part for level, part in enumerate(found.mole_fraction))
    assert found.uptake == found.objective_value == value
    if fields["model"] != "poisson":
        assert mean == pytest.approx(value, rel=1e-12)


def test_a_runaway_reaction_has_its_most_mono_early():
    # Each addition making the next three times faster: mono is a small hump before the runaway.
    fields = {"model": "sequential", "sites": 30, "attenuation": 3.0}

    found = planned(fields, {"kind": "most_of_level", "level": 1})

    rows = model_of(fields).compositions(np.linspace(0, 20, 20_001))
    assert found.objective_value == pytest.approx(rows[:, 1].max(), abs=1e-7)
    assert found.objective_value < 0.2


@pytest.mark.parametrize("attenuation", [0.01, 0.5, 3.0])
def test_many_sites_are_planned_as_few(attenuation):
    fields = {"model": "sequential", "sites": 200, "attenuation": attenuation}

    found = planned(fields, {"kind": "most_of_level", "level": 2})

    assert found.objective_value >= everywhere(fields, found.exposure)[:, 2].max() - 1e-13
