"""What the calculator refuses, where, and in which words."""

from __future__ import annotations

import pytest
from pydantic import ValidationError

from reactions.chemistry.distribution import DistributionRequest, distribution
from reactions.errors import WHOLE, field_errors


def refusal(**fields):
    with pytest.raises(ValidationError) as raised:
        DistributionRequest(**fields)
    return field_errors(raised.value, fields).messages


INDEPENDENT = {"model": "independent_sites", "sites": 30}


def test_an_uptake_above_the_sites():
    assert refusal(**INDEPENDENT, uptake=31) == {
        "uptake": ["An uptake of 31 is more than the 30 sites of this cage; give at most 30."]
    }


def test_an_uptake_above_what_attenuation_allows():
    assert refusal(model="sequential", attenuation=[0.5, 0], uptake=2.5) == {
        "uptake": [
            "An uptake of 2.5 is more than the 2 additions that this attenuation allows; give at "
            "most 2."
        ]
    }


def test_equivalents_that_bring_more_than_the_sites():
    assert refusal(**INDEPENDENT, equivalents=50, reagent_efficiency=0.7) == {
        "equivalents": [
            "An uptake of 35 (50 equivalents at a reagent efficiency of 0.7) is more than the 30 "
            "sites of this cage; give at most 42.8571."
        ]
    }


@pytest.mark.parametrize("efficiency", [0.1, 0.3, 0.7, 0.9])
def test_equivalents_that_fill_all_sites_but_for_rounding(efficiency):
    request = DistributionRequest(
        **INDEPENDENT, equivalents=30 / efficiency * (1 + 1e-15), reagent_efficiency=efficiency
    )

    assert request.known_uptake == pytest.approx(30)


@pytest.mark.parametrize(
    ("given_by", "told"),
    [
        ({}, "none of them is given"),
        ({"uptake": 1, "exposure": 1}, "uptake and exposure are given"),
        (
            {"uptake": 1, "equivalents": 1, "reagent_efficiency": 1},
            "uptake and equivalents are given",
        ),
    ],
)
def test_one_way_of_asking_is_needed(given_by, told):
    assert refusal(**INDEPENDENT, **given_by) == {
        WHOLE: [f"Give one of uptake, exposure or equivalents; {told}."]
    }


@pytest.mark.parametrize("given_by", [{"equivalents": 1}, {"uptake": 1, "reagent_efficiency": 0.8}])
def test_equivalents_and_efficiency_go_together(given_by):
    assert refusal(**INDEPENDENT, **given_by) == {
        WHOLE: ["Equivalents and reagent_efficiency go together: the uptake is their product."]
    }


@pytest.mark.parametrize("number", [float("nan"), float("inf"), float("-inf")])
@pytest.mark.parametrize("field", ["uptake", "exposure", "equivalents", "reagent_efficiency"])
def test_numbers_are_finite(field, number):
    fields = {**INDEPENDENT, field: number}
    if field == "equivalents":
        fields["reagent_efficiency"] = 0.8
    if field == "reagent_efficiency":
        fields["equivalents"] = 1.0

    (message,) = refusal(**fields)[field]
    assert any(words in message for words in ("finite", "below 0", "not above", "above 1"))


@pytest.mark.parametrize(
    ("field", "value"),
    [
        ("uptake", -0.1),
        ("exposure", -1),
        ("sites", 0),
        ("sites", 201),
        ("sites", 2.5),
        ("attenuation", -0.5),
        ("attenuation", 1001),
        ("attenuation", []),
        ("attenuation", float("nan")),
        ("attenuation", [0.5, float("inf")]),
        ("attenuation", [0.5] * 31),
        ("model", "unlikely"),
        ("temperature", 25),
    ],
)
def test_a_value_out_of_range_is_told_at_its_field(field, value):
    fields = {"model": "sequential", "sites": 30, "exposure": 1.0, field: value}
    if field == "uptake":
        del fields["exposure"]

    told = refusal(**fields)

    assert {path.split(".")[0] for path in told} == {field}


def test_attenuation_belongs_to_the_sequential_model():
    assert refusal(model="poisson", attenuation=0.5, uptake=1) == {
        "attenuation": [
            "The model poisson knows no attenuation; choose sequential, or leave it out."
        ]
    }


@pytest.mark.parametrize("neutral", [1.0, [1.0], [1.0] * 30])
def test_an_attenuation_that_attenuates_nothing_suits_any_model(neutral):
    with_it = DistributionRequest(**INDEPENDENT, attenuation=neutral, uptake=1)

    assert distribution(with_it) == distribution(DistributionRequest(**INDEPENDENT, uptake=1))


@pytest.mark.parametrize(
    ("attenuation", "path", "message"),
    [
        (-1, "attenuation", "-1 is below 0; give 0 or more."),
        ("half", "attenuation", "“half” is not a number; write digits, such as 1.5."),
        (None, "attenuation", "None is not a number; write digits, such as 1.5."),
        ([0.5, -1], "attenuation.1", "-1 is below 0; give 0 or more."),
        ([], "attenuation", "The list is too short; it needs at least 1."),
    ],
)
def test_a_bad_attenuation_is_refused_once(attenuation, path, message):
    assert refusal(model="sequential", uptake=1, attenuation=attenuation) == {path: [message]}


def test_an_efficiency_meant_in_percent():
    assert refusal(**INDEPENDENT, equivalents=1, reagent_efficiency=80) == {
        "reagent_efficiency": ["80 is more than 1; write 0.8 for 80 %."]
    }
