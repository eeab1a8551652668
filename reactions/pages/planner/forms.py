"""What a person types into the planner, apart from the lines of the weighing list."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from django import forms
from django.contrib.auth.models import User

from reactions.chemistry.addends import usual_addends
from reactions.chemistry.families import Family
from reactions.models import AdditionMode, Atmosphere, Campaign, Light
from reactions.pages.planner.numbers import above_zero, factors_field, number_field
from reactions.pages.sheet.fields import (
    duration_field,
    mass_field,
    share_field,
    temperature_field,
    volume_field,
)

OBJECTIVES = (
    ("most_of_level", "the most of one level"),
    ("mono_to_multi", "mono : multi at least"),
    ("uptake", "additions per cage, on average"),
    ("band", "the most within a band"),
    ("equivalents", "equivalents of my own choice"),
)
_BASES = (("cage", "the cage at hand"), ("product", "the product wanted"))
_MODELS = (
    ("sequential", "sequential: each addition slows the next"),
    ("independent_sites", "independent sites"),
    ("poisson", "Poisson"),
)
CAGES = ("C60", "C70", "C76", "C78", "C84")
# What a blank field stands for, or how to write in it.
_WHEN_BLANK = {
    "cage_mass": "e.g. 0.5 g",
    "cage_purity": "100 %",
    "product_mass": "e.g. 200 mg",
    "expected_yield": "e.g. 40 %",
    "reagent_efficiency": "70 %",
    "attenuation": "1",
    "solvent_volume": "the least",
    "temperature": "e.g. 110 °C",
    "duration": "e.g. 2 h",
}
_PLAIN = {"autocomplete": "off", "spellcheck": "false"}


def _text(maximum: int, **attrs: str) -> forms.CharField:
    return forms.CharField(
        required=False, max_length=maximum, widget=forms.TextInput(attrs=_PLAIN | attrs)
    )


class PlannerForm(forms.Form):
    """The plan as typed. Fields that a family fills are blank until one is chosen."""

    campaign = forms.ChoiceField(
        required=False,
        error_messages={"invalid_choice": "Choose a campaign of which you are an author."},
    )
    title = _text(200)
    family = forms.ChoiceField(
        required=False, error_messages={"invalid_choice": "“%(value)s” is no family; choose one."}
    )
    filled_for = forms.CharField(required=False, max_length=60, widget=forms.HiddenInput)
    cage = _text(40, list="cages")
    addend = forms.CharField(
        required=False,
        max_length=20_000,
        widget=forms.Textarea(attrs=_PLAIN | {"rows": 1, "autocapitalize": "off",
                                              "placeholder": "*C(*)(C(=O)OCC)C(=O)OCC"}),
    )  # fmt: skip
    usual_addend = forms.CharField(required=False, max_length=200, label="Usual ones")
    addend_name = _text(160)

    basis = forms.ChoiceField(choices=_BASES, required=False, widget=forms.RadioSelect)
    cage_mass = above_zero(mass_field(label="Mass of cage"))
    cage_purity = above_zero(share_field(label="Purity of the cage"))
    product_mass = above_zero(mass_field(label="Mass of product wanted"))
    expected_yield = above_zero(share_field(label="Expected yield on the cage charged"))

    objective = forms.ChoiceField(choices=OBJECTIVES, required=False, widget=forms.RadioSelect)
    level = number_field(1, 70, example="1", whole=True, slide="1 12 1", label="Level")
    ratio = number_field(0.01, 1e6, example="5", slide="0.5 30 0.5", label="Ratio, to 1")
    uptake = number_field(0.001, 70, example="2", slide="0.1 12 0.1", label="Additions per cage")
    band_lowest = number_field(1, 70, example="2", whole=True, slide="1 12 1", label="From level")
    band_highest = number_field(1, 70, example="3", whole=True, slide="1 12 1", label="To level")
    equivalents = number_field(0.001, 1e4, example="1.2", slide="0.1 20 0.1", label="Equivalents")
    # The level that was confirmed, so that another one is asked about again.
    is_level_confirmed = forms.CharField(required=False, max_length=10)

    model = forms.ChoiceField(choices=_MODELS, required=False, label="Model")
    sites = number_field(1, 200, example="30", whole=True, label="Sites on the cage")
    attenuation = factors_field("1", label="Attenuation, for each addition present")
    reagent_efficiency = above_zero(share_field(label="Reagent efficiency"))

    solvent = _text(80, list="solvents")
    solvent_volume = above_zero(volume_field(label="Solvent volume"))
    temperature = temperature_field(label="Temperature")
    duration = duration_field(label="Time")
    atmosphere = forms.ChoiceField(choices=Atmosphere, required=False)
    light = forms.ChoiceField(choices=Light, required=False)
    addition_mode = forms.ChoiceField(choices=AdditionMode, required=False, label="Reagent added")

    def __init__(
        self, data: Any, user: User, families: Mapping[str, Family], **kwargs: Any
    ) -> None:
        super().__init__(data, auto_id="plan_%s", **kwargs)
        self.families = families
        campaigns = [
            (row.code, f"{row.code} {row.name}") for row in Campaign.objects.writable_by(user)
        ]
        self.has_campaign = bool(campaigns)
        only = campaigns if len(campaigns) == 1 else [("", "choose"), *campaigns]
        _choices(self.fields["campaign"], only)
        _choices(self.fields["family"], [("", "choose"), *_families_by_branch(families)])
        for name, words in _WHEN_BLANK.items():
            self.fields[name].widget.attrs["placeholder"] = words
        key = self["family"].value()
        self.fields["usual_addend"].widget = forms.Select(
            choices=[("", "choose"), *_addends_of(str(key or ""))]
        )
        if self["cage"].value() and key in families:
            usual = families[str(key)].sites.get(str(self["cage"].value()).strip())
            self.fields["sites"].widget.attrs["placeholder"] = str(usual or 30)

    @property
    def kind(self) -> str:
        """Return the objective chosen, as typed."""
        return str(self["objective"].value() or "most_of_level")


def _choices(field: forms.Field, choices: Any) -> None:
    if isinstance(field, forms.ChoiceField):
        field.choices = choices


def _families_by_branch(families: Mapping[str, Family]) -> list[tuple[str, list[tuple[str, str]]]]:
    branches: dict[str, list[tuple[str, str]]] = {}
    for row in families.values():
        branches.setdefault(row.branch, []).append((row.key, row.name))
    return list(branches.items())


def _addends_of(family_key: str) -> list[tuple[str, str]]:
    return [
        (row.structure.smiles, row.name) for row in usual_addends() if family_key in row.families
    ]
