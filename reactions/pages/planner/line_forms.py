"""The lines of the weighing list beside the cage, as typed into the planner."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from django import forms

from reactions.chemistry.substances import find_substance
from reactions.models import Component, ComponentRole
from reactions.pages.planner.numbers import above_zero, number_field
from reactions.pages.sheet.fields import density_field, molarity_field, share_field

MOST_LINES = 16
PER_REAGENT, PER_CAGE = "reagent", "cage"
_ROLES = [(role.value, role.label) for role in ComponentRole if role != ComponentRole.CAGE]
# What a blank field stands for, or how to write in it.
_WHEN_BLANK = {
    "equivalents": "",
    "purity": "100 %",
    "density": "e.g. 0.87 g/mL",
    "molarity": "e.g. 1.6 M",
}
_PLAIN = {"autocomplete": "off", "spellcheck": "false"}


class PlannedLineForm(forms.Form):
    """One line. The first is the reagent, whose equivalents the plan sets."""

    role = forms.ChoiceField(choices=_ROLES, required=False, initial=ComponentRole.REAGENT)
    name = forms.CharField(
        required=False, max_length=160, label="Substance", widget=forms.TextInput(attrs=_PLAIN)
    )
    smiles = forms.CharField(
        required=False, max_length=2000, label="Structure, as SMILES",
        widget=forms.TextInput(attrs=_PLAIN | {"autocapitalize": "off"}),
    )  # fmt: skip
    equivalents = number_field(0.0001, 1e6, example="2", label="Equivalents")
    per = forms.ChoiceField(
        choices=((PER_REAGENT, "per reagent"), (PER_CAGE, "per cage")), required=False
    )
    purity = above_zero(share_field(label="Purity"))
    density = above_zero(density_field(label="Density, of a liquid"))
    molarity = above_zero(molarity_field(label="Strength, of a solution"))

    component: Component | None = None

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        kwargs.setdefault("auto_id", "plan_%s")
        super().__init__(*args, **kwargs)
        for name, words in _WHEN_BLANK.items():
            self.fields[name].widget.attrs["placeholder"] = words

    @property
    def place(self) -> int:
        """Return the place of the line, from 0."""
        return int(str(self.prefix).rsplit("-", 1)[-1])

    @property
    def is_leading(self) -> bool:
        """Return whether the plan sets this line's equivalents."""
        return self.place == 0

    @property
    def is_blank(self) -> bool:
        """Return whether nothing names a substance."""
        return not (self.cleaned_data.get("name") or self.cleaned_data.get("smiles"))

    def clean(self) -> dict[str, Any]:
        """Take structure and density of a listed substance from the table where none is typed."""
        cleaned = super().clean() or self.cleaned_data
        if not cleaned.get("name") and not cleaned.get("smiles"):
            if cleaned.get("equivalents"):
                self.add_error("name", "Name the substance, or leave the line empty.")
            return cleaned
        known = find_substance(cleaned.get("name")) if not cleaned.get("smiles") else None
        if known is not None:
            cleaned["smiles"] = known.smiles or ""
            if cleaned.get("density") is None and cleaned.get("molarity") is None:
                cleaned["density"] = known.density_g_per_ml
        cleaned["name"] = cleaned.get("name") or cleaned["smiles"][:160]
        return cleaned


class LineForms:
    """All lines together; ``data`` names their fields ``lines-0-name`` and so on."""

    def __init__(self, data: Any) -> None:
        self.forms = [
            PlannedLineForm(data, prefix=_prefix(place)) for place in range(line_count(data))
        ]

    def __iter__(self) -> Iterator[PlannedLineForm]:
        return iter(self.forms)

    def __len__(self) -> int:
        return len(self.forms)

    def is_valid(self) -> bool:
        """Return whether every line can be read; reads all, so that all errors show at once."""
        return not [form for form in self.forms if not form.is_valid()]

    @property
    def filled(self) -> list[PlannedLineForm]:
        """Return the lines that name a substance; only after ``is_valid``."""
        return [form for form in self.forms if not form.is_blank]


def _prefix(place: int) -> str:
    return f"lines-{place}"


def line_count(data: Any) -> int:
    """Return how many lines were sent, one at least."""
    count = 1
    while count < MOST_LINES and f"{_prefix(count)}-name" in data:
        count += 1
    return count
