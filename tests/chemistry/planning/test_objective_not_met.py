"""An objective that can't be met says what the best is, and where."""

from __future__ import annotations

from reactions.chemistry.planning import PlanRequest, plan

BLOCKED = {"model": "sequential", "sites": 30, "attenuation": [0.5, 0.0]}


def planned(objective):
    return plan(PlanRequest(**BLOCKED, objective=objective, reagent_efficiency=0.5))


def test_an_uptake_above_what_attenuation_allows():
    found = planned({"kind": "uptake", "value": 2.5})

    assert not found.objective_met
    assert found.message == (
        "An uptake of 2.5 can't be reached: the attenuation blocks every addition after 2. The "
        "best is an uptake of 2, at 4 equivalents."
    )
    assert found.uptake == found.objective_value == 2.0
    assert found.equivalents == 4.0
    assert found.mole_fraction[2] == 1.0


def test_a_level_above_what_attenuation_allows():
    found = planned({"kind": "most_of_level", "level": 3})

    assert not found.objective_met
    assert found.message == (
        "Level 3 can't be reached: the attenuation blocks every addition after 2. The best is "
        "0 %, whatever the reagent."
    )
    assert found.objective_value == 0.0
    assert found.equivalents == found.exposure == 0.0


def test_a_band_above_what_attenuation_allows():
    assert not planned({"kind": "band", "lowest": 3, "highest": 5}).objective_met


def test_a_band_that_is_partly_allowed_is_met_by_what_is():
    found = planned({"kind": "band", "lowest": 2, "highest": 5})

    assert found.objective_met
    assert found.objective_value == 1.0
    assert found.equivalents == 4.0


def test_a_plan_that_is_met_needs_no_words():
    found = planned({"kind": "most_of_level", "level": 1})

    assert found.objective_met
    assert found.message == ""
