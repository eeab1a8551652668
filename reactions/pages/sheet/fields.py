"""Fields in which quantities are typed with their units."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from django import forms
from django.core.exceptions import ValidationError

from reactions.chemistry import quantities, quantity_text
from reactions.pages.quantity_words import format_molar_mass


class QuantityField(forms.Field):
    """A number typed with its unit, kept in one fixed unit and shown back in a sensible one."""

    def __init__(
        self,
        read: Callable[[str], float],
        show: Callable[[float], str],
        *,
        example: str,
        **kwargs: Any,
    ) -> None:
        kwargs.setdefault("required", False)
        super().__init__(**kwargs)
        self.read = read
        self.show = show
        self.widget.attrs |= {"placeholder": example, "autocomplete": "off", "maxlength": "100"}

    def to_python(self, value: Any) -> Any:
        """Return the number that was typed; raises ``ValidationError`` in the typist's words."""
        text = str(value or "").strip()
        if not text:
            return None
        try:
            return self.read(text)
        except ValueError as error:
            raise ValidationError(str(error)) from error

    def prepare_value(self, value: Any) -> Any:
        """Return a stored number as text with its unit; what was typed as it was typed."""
        return self.show(value) if isinstance(value, int | float) else value


class KeepsStored(forms.Form):
    """A form that stores no rounding: a quantity left as it was shown keeps its full precision."""

    def clean(self) -> dict[str, Any]:
        """Put the stored number back wherever its text was not touched."""
        cleaned = super().clean() or self.cleaned_data
        for name, field in self.fields.items():
            stored = self.get_initial_for_field(field, name)
            if not isinstance(field, QuantityField) or stored is None:
                continue
            typed = self.data.get(self.add_prefix(name), "").strip()
            if name in cleaned and typed == field.prepare_value(stored):
                cleaned[name] = stored
        return cleaned


def mass_field(**kwargs: Any) -> QuantityField:
    """Return a field for a mass, in mg."""
    return QuantityField(quantities.mass_mg, quantity_text.format_mass, example="0.25 g", **kwargs)


def volume_field(**kwargs: Any) -> QuantityField:
    """Return a field for a volume, in mL."""
    return QuantityField(
        quantities.volume_ml, quantity_text.format_volume, example="50 mL", **kwargs
    )


def duration_field(**kwargs: Any) -> QuantityField:
    """Return a field for a time span, in min."""
    return QuantityField(
        quantities.duration_min, quantity_text.format_duration, example="2 h", **kwargs
    )


def temperature_field(**kwargs: Any) -> QuantityField:
    """Return a field for a temperature, in °C."""
    return QuantityField(
        quantities.temperature_c, quantity_text.format_temperature, example="110 °C", **kwargs
    )


def share_field(**kwargs: Any) -> QuantityField:
    """Return a field for a share, 0 to 1: ``97 %`` or ``0.97``."""
    return QuantityField(
        quantities.fraction, quantity_text.format_fraction, example="97 %", **kwargs
    )


def density_field(**kwargs: Any) -> QuantityField:
    """Return a field for a density, in g/mL."""
    return QuantityField(
        quantities.density_g_per_ml, quantity_text.format_density, example="0.87 g/mL", **kwargs
    )


def molarity_field(**kwargs: Any) -> QuantityField:
    """Return a field for the strength of a solution, in mol/L."""
    return QuantityField(
        quantities.molarity_mol_per_l, quantity_text.format_molarity, example="1.6 M", **kwargs
    )


def molar_mass_field(**kwargs: Any) -> QuantityField:
    """Return a field for a molar mass, in g/mol."""
    return QuantityField(read_molar_mass, format_molar_mass, example="239.1 g/mol", **kwargs)


def read_molar_mass(text: str) -> float:
    """Return a molar mass typed in g/mol, kg/mol or Da; raises ``ValueError`` for anything else."""
    number, _, unit = text.strip().partition(" ")
    factors = {"g/mol": 1.0, "Da": 1.0, "kg/mol": 1000.0}
    if unit.strip() not in factors:
        raise ValueError(f"“{text}” is no molar mass; write it like 239.1 g/mol.")
    # Read as a quantity, so that decimal marks mean here what they mean everywhere.
    return quantities.amount_mmol(f"{number} mmol") * factors[unit.strip()]
