"""A family of the lab's own, as typed."""

from __future__ import annotations

from typing import Any

from django import forms
from django.core.exceptions import ValidationError
from django.utils.text import slugify

from reactions.models import ComponentRole
from reactions.pages.planner.numbers import number_field
from reactions.pages.sheet.fields import duration_field, temperature_field

ROLE_LINES, BY_PRODUCT_LINES = 5, 3
_ROLES = [("", "–"), *((role.value, role.label) for role in ComponentRole if role != "cage")]
_MODELS = (
    ("sequential", "sequential: each addition slows the next"),
    ("independent_sites", "independent sites"),
    ("poisson", "Poisson"),
)


def _text(label: str, *, required: bool = True, **options: Any) -> forms.CharField:
    return forms.CharField(
        label=label,
        required=required,
        max_length=400,
        error_messages={"required": "Nothing is given; fill this in."},
        **options,
    )


class FamilyForm(forms.Form):
    """What a family is and where it goes; its roles and by-products stand in lines of their own."""

    name = _text("Name", help_text="As the trade calls it.")
    branch = _text(
        "Branch of the tree",
        widget=forms.TextInput(attrs={"list": "branches"}),
        help_text="One that is there, or a new one.",
    )
    key = _text(
        "Key", required=False, help_text="Lower-case letters, digits and _; blank: from the name."
    )
    attaches = _text("What one addition attaches")
    level_counts = _text("What counts as one level")
    attachment_points = number_field(
        1, 2, example="e.g. 2", whole=True, label="Cage atoms that one addition uses"
    )
    sites_c60 = number_field(1, 200, example="e.g. 30", whole=True, label="Sites on C60")
    sites_c70 = number_field(1, 200, example="e.g. 30", whole=True, label="Sites on C70")
    highest_c60 = number_field(1, 200, example="", whole=True, label="Highest level known, C60")
    highest_c70 = number_field(1, 200, example="", whole=True, label="Highest level known, C70")
    usual_solvents = _text(
        "Usual solvents", required=False, help_text="The usual one first; a semicolon between."
    )
    temperature_lowest = temperature_field(label="Usual temperature, from")
    temperature_highest = temperature_field(label="Usual temperature, to")
    duration_lowest = duration_field(label="Usual time, from")
    duration_highest = duration_field(label="Usual time, to")
    model = forms.ChoiceField(choices=_MODELS, label="Composition model")
    thermally_reversible = forms.BooleanField(required=False, label="Comes off again on heating")
    reversibility = _text("How it comes off", required=False)
    is_forward = forms.BooleanField(
        required=False, initial=True, label="Adds to the cage (takes nothing off)"
    )
    source = _text("Source", help_text="Where this is known from.")

    def clean_attachment_points(self) -> int:
        """Require a number."""
        return int(_given(self.cleaned_data["attachment_points"]))

    def clean(self) -> dict[str, Any]:
        """Take the key from the name where none is typed, and require a cage."""
        cleaned = super().clean() or self.cleaned_data
        if not cleaned.get("key") and cleaned.get("name"):
            cleaned["key"] = slugify(cleaned["name"]).replace("-", "_")[:60].strip("_")
        is_readable = not {"sites_c60", "sites_c70"} & self.errors.keys()
        if is_readable and not (cleaned.get("sites_c60") or cleaned.get("sites_c70")):
            self.add_error("sites_c60", "Give the number of sites on at least one cage.")
        return cleaned

    def definition(self) -> dict[str, Any]:
        """Return the family as the service takes it, without roles and by-products."""
        cleaned = self.cleaned_data
        solvents = [part.strip() for part in cleaned["usual_solvents"].split(";") if part.strip()]
        return {
            **{
                name: cleaned[name]
                for name in (
                    "key", "name", "branch", "attaches", "level_counts", "attachment_points",
                    "model", "thermally_reversible", "is_forward", "source",
                )
            },
            "sites": _by_cage(cleaned, "sites"),
            "highest_level": _by_cage(cleaned, "highest"),
            "usual_solvents": solvents,
            "usual_temperature_c": _pair(cleaned, "temperature"),
            "usual_duration_min": _pair(cleaned, "duration"),
            **({"reversibility": cleaned["reversibility"]} if cleaned["reversibility"] else {}),
        }  # fmt: skip


class RoleForm(forms.Form):
    """A substance's part in one addition."""

    role = forms.ChoiceField(choices=_ROLES, required=False, label="Role")
    name = forms.CharField(required=False, max_length=160, label="Substance, or what kind")
    equivalents_per_addition = number_field(
        0.0001, 1e4, example="", label="Equivalents per addition"
    )


class ByProductForm(forms.Form):
    """What one addition sets free."""

    name = forms.CharField(required=False, max_length=160, label="By-product")
    smiles = forms.CharField(required=False, max_length=400, label="SMILES")
    per_addition = number_field(0.0001, 100, example="", label="Per addition")
    is_gas = forms.BooleanField(required=False, label="A gas")


def _given(value: float | None) -> float:
    if value is None:
        raise ValidationError("Nothing is given; fill this in.")
    return value


def _by_cage(cleaned: dict[str, Any], name: str) -> dict[str, int]:
    return {
        cage: cleaned[f"{name}_{cage.lower()}"]
        for cage in ("C60", "C70")
        if cleaned.get(f"{name}_{cage.lower()}")
    }


def _pair(cleaned: dict[str, Any], name: str) -> list[float] | None:
    """Return the ends of a range; one that is given stands for both."""
    ends = [cleaned.get(f"{name}_lowest"), cleaned.get(f"{name}_highest")]
    given = [end for end in ends if end is not None]
    return [given[0], given[-1]] if given else None
