"""What the plan refuses, where, and in which words."""

from __future__ import annotations

import pytest
from pydantic import ValidationError

from reactions.chemistry.planning import CurveRequest, PlanRequest
from reactions.errors import field_errors

MONO = {"kind": "most_of_level", "level": 1}


def refusal(request=PlanRequest, **fields):
    fields = {"model": "independent_sites", "sites": 30, **fields}
    with pytest.raises(ValidationError) as raised:
        request(**fields)
    return field_errors(raised.value, fields).messages


@pytest.mark.parametrize(
    "objective",
    [{"kind": "most_of_level", "level": 31}, {"kind": "band", "lowest": 2, "highest": 31}],
)
def test_a_level_above_the_sites(objective):
    assert refusal(objective=objective) == {
        "objective": ["Level 31 is above the 30 sites of this cage; give at most 30."]
    }


def test_an_uptake_above_the_sites():
    assert refusal(objective={"kind": "uptake", "value": 31}) == {
        "objective": ["An uptake of 31 is more than the 30 sites of this cage; give at most 30."]
    }


def test_a_band_the_wrong_way_round():
    assert refusal(objective={"kind": "band", "lowest": 3, "highest": 2}) == {
        "objective": ["A band from 3 to 2 runs backwards; give the lower level first."]
    }


@pytest.mark.parametrize(
    ("objective", "sites", "needed"),
    [
        ({"kind": "most_of_level", "level": 3}, 3, 4),
        ({"kind": "band", "lowest": 1, "highest": 3}, 3, 4),
        ({"kind": "mono_to_multi", "ratio": 5}, 1, 2),
    ],
)
def test_the_last_level_of_poisson_is_no_level_of_its_own(objective, sites, needed):
    assert refusal(model="poisson", sites=sites, objective=objective) == {
        "objective": [
            f"With {sites} sites the Poisson model counts all from {sites} upward as one level; "
            f"give at least {needed} sites, or choose another model."
        ]
    }


@pytest.mark.parametrize(
    ("objective", "path"),
    [
        ({"kind": "mono_to_multi", "ratio": 0}, "objective.ratio"),
        ({"kind": "mono_to_multi", "ratio": float("inf")}, "objective.ratio"),
        ({"kind": "uptake", "value": float("nan")}, "objective.value"),
        ({"kind": "uptake", "value": -1}, "objective.value"),
        ({"kind": "most_of_level", "level": 0}, "objective.level"),
        ({"kind": "most_of_level", "level": 1.5}, "objective.level"),
        ({"kind": "band", "lowest": 1}, "objective.highest"),
        ({"kind": "cheapest"}, "objective"),
        ({}, "objective"),
    ],
)
def test_a_bad_objective_is_told_at_its_field(objective, path):
    assert list(refusal(objective=objective)) == [path]


@pytest.mark.parametrize(
    ("field", "value"),
    [
        ("reagent_efficiency", 0),
        ("reagent_efficiency", 1.2),
        ("cage_mass_mg", 0),
        ("cage_mass_mg", float("inf")),
        ("cage_purity", 99),
        ("addition_mass_g_per_mol", -5),
        ("cage", "graphite"),
        ("cage", "C12"),
    ],
)
def test_a_value_out_of_range_is_told_at_its_field(field, value):
    assert list(refusal(objective=MONO, **{field: value})) == [field]


@pytest.mark.parametrize(
    ("field", "value"),
    [
        ("points", 1),
        ("points", 100_000),
        ("highest_equivalents", 0),
        ("highest_equivalents", float("nan")),
        ("highest_level_shown", 0),
    ],
)
def test_a_curve_is_bounded(field, value):
    assert list(refusal(CurveRequest, **{field: value})) == [field]
