"""The weighing list as typed: one row a substance, planned beside actual."""

from __future__ import annotations

from typing import Any

from django import forms
from django.core.exceptions import ValidationError
from django.http import QueryDict

from reactions.errors import FieldErrors
from reactions.models import Component, ComponentRole
from reactions.pages.sheet.charges import Charge, read_amount, read_charge, show_charge
from reactions.pages.sheet.fields import (
    density_field,
    molar_mass_field,
    molarity_field,
    share_field,
)
from reactions.pages.sheet.forms import SheetForm
from reactions.pages.sheet.line_details import details_of

# Where an objection of the service goes whose field has another name in the form.
_PLACES = {
    "equivalents": "charge",
    "planned_mass_mg": "charge",
    "actual_mass_mg": "actual",
    "actual_volume_ml": "actual",
    "actual_mmol": "actual",
}
_WITHIN = (
    "smiles",
    "molar_mass_g_per_mol",
    "purity",
    "density_g_per_ml",
    "molarity_mol_per_l",
    "equivalents_of",
    "batch",
)


class LineForm(SheetForm):
    """One line: what it is, what is planned to go in, and what went in."""

    name = forms.CharField(
        max_length=160,
        label="Substance",
        error_messages={"required": "Name the substance, or remove the line."},
    )
    role = forms.ChoiceField(choices=ComponentRole)
    charge = forms.CharField(required=False, max_length=60, label="Plan")
    actual = forms.CharField(required=False, max_length=60, label="Went in")
    smiles = forms.CharField(required=False, max_length=2000, label="Structure (SMILES)")
    molar_mass_g_per_mol = molar_mass_field(label="Molar mass, where there is no structure")
    purity = share_field(label="Purity")
    density_g_per_ml = density_field(label="Density")
    molarity_mol_per_l = molarity_field(label="Strength of the solution")
    equivalents_of = forms.CharField(
        required=False, max_length=160, label="Equivalents per (blank: the cage)"
    )
    batch = forms.CharField(required=False, max_length=80, label="Batch")

    def __init__(
        self, data: QueryDict | None = None, *, prefix: str, component: Component | None = None
    ) -> None:
        self.component = component
        initial = _initial(component) if component else {"role": ComponentRole.REAGENT}
        super().__init__(data, prefix=prefix, initial=initial)
        self.worked_out: Component | None = component
        for name in ("name", "charge", "actual", "equivalents_of", "batch", "smiles"):
            self.fields[name].widget.attrs["autocomplete"] = "off"
        self.fields["charge"].widget.attrs["placeholder"] = (
            "500 mg" if self.is_cage else "1.1 or 250 mg"
        )

    @property
    def is_cage(self) -> bool:
        """Return whether this is the line of the cage."""
        return bool(self["role"].value() == ComponentRole.CAGE)

    @property
    def is_usable(self) -> bool:
        """Return whether amounts can be worked out, if only the planned or the actual ones."""
        return self.is_bound and set(self.errors) <= {"charge", "actual"}

    @property
    def place(self) -> str:
        """Return the place of the line in the names of its fields."""
        return str(self.prefix).rsplit("-", 1)[-1]

    @property
    def title(self) -> str:
        """Return the name of the substance as typed."""
        return str(self["name"].value() or "")

    @property
    def summary(self) -> str:
        """Return purity, density and the like in a few words, as last worked out."""
        return details_of(self.worked_out) if self.worked_out else ""

    @property
    def is_charged_by_amount(self) -> bool:
        """Return whether an amount was typed whose equivalents are worth saying."""
        charge = getattr(self, "cleaned_data", {}).get("charge")
        return not self.is_cage and isinstance(charge, Charge) and charge.is_amount

    def said_while_typing(self) -> list[tuple[forms.BoundField, list[str]]]:
        """Return every field with its errors, without those that only ask for what is missing."""
        return [
            (field, [str(error) for error in field.errors] if field.value() else [])
            for field in self.visible_fields()
        ]

    @property
    def has_errors_within(self) -> bool:
        """Return whether an error stands at a field that is folded away."""
        return self.is_bound and any(name in self.errors for name in _WITHIN)

    def clean_charge(self) -> Charge | None:
        """Read what is planned; a text left as it was shown keeps the stored number."""
        text = self.cleaned_data["charge"]
        if not text:
            return None
        if self.component and text == self.initial.get("charge"):
            return _stored_charge(self.component)
        return _read(read_amount if self.is_cage else read_charge, text)

    def clean_actual(self) -> Charge | None:
        """Read what went in; a text left as it was shown keeps the stored number."""
        text = self.cleaned_data["actual"]
        if not text:
            return None
        if self.component and text == self.initial.get("actual"):
            return _first_actual(self.component)
        return _read(read_amount, text)

    def clean(self) -> dict[str, Any]:
        """Refuse a volume of cage, which nobody weighs so."""
        cleaned = super().clean()
        charge = cleaned.get("charge")
        if self.is_cage and charge and charge.volume_ml is not None:
            self.add_error("charge", "A cage goes in by mass or mmol; write 500 mg or 0.7 mmol.")
        return cleaned

    def substance(self) -> dict[str, Any]:
        """Return what the line is, as the service takes it, without amounts."""
        values = {name: self.cleaned_data[name] for name in ("name", "role", *_WITHIN)}
        if values["purity"] is None:
            values["purity"] = 1.0
        return values

    def place_errors(self, error: FieldErrors) -> None:
        """Put what a service objected to at the fields of this line."""
        placed: dict[str, list[str]] = {}
        for path, messages in error.messages.items():
            placed.setdefault(_PLACES.get(path, path), []).extend(messages)
        super().place_errors(FieldErrors(placed))


def _read(read: Any, text: str) -> Charge:
    try:
        charge: Charge = read(text)
    except ValueError as error:
        raise ValidationError(str(error)) from error
    return charge


def _initial(component: Component) -> dict[str, Any]:
    initial = {name: getattr(component, name) for name in ("name", "role", *_WITHIN)}
    if component.smiles or component.role == ComponentRole.CAGE:
        initial["molar_mass_g_per_mol"] = None  # it follows from the structure
    charge = _stored_charge(component)
    actual = _stored_actual(component)
    return {
        **initial,
        "charge": show_charge(charge) if charge else "",
        "actual": show_charge(actual) if actual else "",
    }


def _stored_charge(component: Component) -> Charge | None:
    if component.role == ComponentRole.CAGE:
        mass = component.planned_mass_mg
        return None if mass is None else Charge(mass_mg=mass)
    return None if component.equivalents is None else Charge(equivalents=component.equivalents)


def _stored_actual(component: Component) -> Charge | None:
    """Return the actual amount in the measure people would take: liquids by volume."""
    is_liquid = component.density_g_per_ml is not None or component.molarity_mol_per_l is not None
    if is_liquid and component.actual_volume_ml is not None:
        return Charge(volume_ml=component.actual_volume_ml)
    return _first_actual(component)


def _first_actual(component: Component) -> Charge | None:
    """Return the actual amount from which the record works out the others."""
    if component.actual_mass_mg is not None:
        return Charge(mass_mg=component.actual_mass_mg)
    if component.actual_volume_ml is not None:
        return Charge(volume_ml=component.actual_volume_ml)
    return None if component.actual_mmol is None else Charge(mmol=component.actual_mmol)
