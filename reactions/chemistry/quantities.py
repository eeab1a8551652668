"""Quantities as people type them: ``0.25 g``, ``1.2 mL``, ``3 mmol``, ``1.6 M``, ``2 h``, ``97 %``.

A number without a unit is never guessed at: the message names the units to choose from. A comma is
read as a decimal mark unless it could separate thousands (``1,250``), which is asked about.
Conversion is exact in decimals, so ``0.07 mL`` and ``70 µL`` are the same value.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from decimal import Decimal
from itertools import pairwise
from typing import Literal

Kind = Literal["mass", "volume", "amount", "molarity", "density", "temperature", "duration"]


class QuantityError(ValueError):
    """A quantity that can't be read; the message names what was typed and the remedy."""


@dataclass(frozen=True)
class Quantity:
    """A value in the record's unit of its kind (mg, mL, mmol, mol/L, g/mL, °C, min)."""

    kind: Kind
    value: float
    unit: str


BASE_UNITS: dict[Kind, str] = {
    "mass": "mg",
    "volume": "mL",
    "amount": "mmol",
    "molarity": "mol/L",
    "density": "g/mL",
    "temperature": "°C",
    "duration": "min",
}

# Each unit as it is shown, and how many of the record's unit one of it is.
_UNITS: dict[Kind, dict[str, str]] = {
    "mass": {"kg": "1e6", "g": "1e3", "mg": "1", "µg": "1e-3"},
    "volume": {"L": "1e3", "mL": "1", "cm3": "1", "dm3": "1e3", "µL": "1e-3"},
    "amount": {"mol": "1e3", "mmol": "1", "µmol": "1e-3"},
    "molarity": {"M": "1", "mol/L": "1", "mmol/mL": "1", "mM": "1e-3", "mmol/L": "1e-3"},
    "density": {"g/mL": "1", "g/cm3": "1", "kg/L": "1", "g/L": "1e-3", "kg/m3": "1e-3"},
    "temperature": {"°C": "1", "K": "1"},
    "duration": {"d": "1440", "h": "60", "min": "1", "s": "0.016666666666666666666666667"},
}
_FACTORS = {
    kind: {unit: Decimal(factor) for unit, factor in units.items()}
    for kind, units in _UNITS.items()
}
_SPELLINGS = {
    "ug": "µg", "μg": "µg", "gram": "g", "grams": "g",
    "l": "L", "ml": "mL", "ul": "µL", "μl": "µL", "µl": "µL", "uL": "µL", "μL": "µL",
    "cm³": "cm3", "cc": "cm3", "dm³": "dm3",
    "umol": "µmol", "μmol": "µmol",
    "mol/l": "mol/L", "mol·L-1": "mol/L", "mol L-1": "mol/L", "mol L⁻¹": "mol/L",
    "mol/dm3": "mol/L", "mol/dm³": "mol/L", "mmol/ml": "mmol/mL", "mmol/l": "mmol/L",
    "g/ml": "g/mL", "g/cm³": "g/cm3", "g/l": "g/L", "kg/l": "kg/L", "kg/m³": "kg/m3",
    "g mL-1": "g/mL", "g mL⁻¹": "g/mL", "g cm-3": "g/cm3", "g cm⁻³": "g/cm3", "g·cm⁻³": "g/cm3",
    "C": "°C", "ºC": "°C", "℃": "°C", "°c": "°C", "deg C": "°C", "degC": "°C", "oC": "°C",
    "days": "d", "day": "d", "hours": "h", "hour": "h", "hr": "h", "hrs": "h",
    "minutes": "min", "minute": "min", "mins": "min", "seconds": "s", "second": "s", "sec": "s",
}  # fmt: skip
# What a bare number could have meant, and a quantity written right.
_CHOICES: dict[Kind, tuple[str, str]] = {
    "mass": ("mg", "g"),
    "volume": ("mL", "µL"),
    "amount": ("mmol", "mol"),
    "molarity": ("M", "mM"),
    "density": ("g/mL", "g/L"),
    "temperature": ("°C", "K"),
    "duration": ("min", "h"),
}
_EXAMPLES: dict[Kind, str] = {
    "mass": "250 mg",
    "volume": "1.2 mL",
    "amount": "3 mmol",
    "molarity": "1.6 M",
    "density": "0.87 g/mL",
    "temperature": "110 °C",
    "duration": "16 h",
}
_NAMES: dict[Kind, str] = {
    "mass": "a mass",
    "volume": "a volume",
    "amount": "an amount of substance",
    "molarity": "a concentration",
    "density": "a density",
    "temperature": "a temperature",
    "duration": "a time",
}

_NUMBER = r"[-+−]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][-+−]?\d+)?"
_VALUE = re.compile(rf"\s*({_NUMBER})\s*(.*?)\s*\Z", re.DOTALL)
_SECOND_NUMBER = re.compile(r"[-+−–±.,:]?\s*\d")
_DURATION_PART = re.compile(rf"({_NUMBER})\s*([a-zA-Z]+)")
_CLOCK = re.compile(r"\d+:\d+(?::\d+)?")
_MAY_BE_THOUSANDS = re.compile(r"[-+−]?[1-9]\d{0,2},\d{3}\Z")
_ZERO_CELSIUS_K = Decimal("273.15")
_LONGEST = 100


def mass_mg(text: str) -> float:
    """Return a mass in mg (0 or more), such as ``0.25 g``. Raises QuantityError."""
    return _of_kind(text, "mass")


def volume_ml(text: str) -> float:
    """Return a volume in mL (0 or more), such as ``500 µL``. Raises QuantityError."""
    return _of_kind(text, "volume")


def amount_mmol(text: str) -> float:
    """Return an amount in mmol (0 or more), such as ``3 mmol``. Raises QuantityError."""
    return _of_kind(text, "amount")


def molarity_mol_per_l(text: str) -> float:
    """Return a concentration in mol/L (0 or more), such as ``1.6 M``. Raises QuantityError."""
    return _of_kind(text, "molarity")


def density_g_per_ml(text: str) -> float:
    """Return a density in g/mL (0 or more), such as ``0.867 g/mL``. Raises QuantityError."""
    return _of_kind(text, "density")


def temperature_c(text: str) -> float:
    """Return a temperature in °C, such as ``383 K``. Raises QuantityError."""
    return _of_kind(text, "temperature")


def duration_min(text: str) -> float:
    """Return a time in minutes (0 or more), such as ``1 h 30 min``. Raises QuantityError."""
    shown = _checked(text)
    if _CLOCK.fullmatch(shown):
        raise QuantityError(f"“{shown}” can be read two ways; write it like 1 h 30 min.")
    if not any(sign.isdigit() for sign in shown):
        raise QuantityError(
            f"“{shown}” is no length of time; write it in min, h or d, such as 16 h."
        )
    parts = _DURATION_PART.findall(shown)
    if len(parts) < 2 or _DURATION_PART.sub("", shown).strip():
        return _of_kind(shown, "duration")
    minutes = [_exact(f"{number} {unit}", "duration") for number, unit in parts]
    lengths = [_FACTORS["duration"][_spelt(unit)] for _, unit in parts]
    if any(later >= earlier for earlier, later in pairwise(lengths)):
        raise QuantityError(f"“{shown}” is no one time; write it like 1 d 6 h 30 min.")
    return _as_float(sum(minutes, Decimal(0)), shown)


def fraction(text: str) -> float:
    """Return a share from 0 to 1, typed as ``97 %`` or ``0.97``. Raises QuantityError.

    A bare number is a share of 1, so a bare ``97`` is refused and a bare ``1`` is all of it.
    """
    shown = _checked(text)
    value, unit = _split(shown, "97 % or 0.97")
    if unit in {"%", "percent"}:
        value /= 100
    elif unit:
        raise QuantityError(f"“{shown}” is no share; write 97 % or 0.97.")
    elif value > 1:
        raise QuantityError(f"{shown} is more than 1; write {shown} % or {float(value / 100):g}.")
    if not 0 <= value <= 1:
        raise QuantityError(f"{shown} is outside 0 to 100 %; give a share within it.")
    return _as_float(value, shown)


def quantity(text: str) -> Quantity:
    """Return a mass, volume, amount of substance or concentration, told by its unit.

    Raises QuantityError.
    """
    shown = _checked(text)
    _, unit = _split(shown, "250 mg, 1.2 mL or 3 mmol")
    if not unit:
        raise QuantityError(
            f"{shown} has no unit; write {shown} mg, {shown} mL, {shown} mmol or {shown} M."
        )
    for kind in ("mass", "volume", "amount", "molarity"):
        if _spelt(unit) in _FACTORS[kind]:
            return Quantity(kind, _of_kind(shown, kind), BASE_UNITS[kind])
    raise QuantityError(f"“{unit}” is no unit known here; use mg, g, mL, µL, mmol, mol, M or mM.")


def _checked(text: str) -> str:
    shown = text.strip()
    if not shown:
        raise QuantityError("Nothing is typed; give a number with its unit.")
    if len(shown) > _LONGEST:
        raise QuantityError(
            f"{len(shown)} characters are too long for a quantity; write only a number and its "
            "unit."
        )
    return shown


def _split(shown: str, example: str) -> tuple[Decimal, str]:
    """Return the number and the unit as typed."""
    found = _VALUE.match(shown)
    if not found:
        raise QuantityError(f"“{shown}” is not a number with a unit; write it like {example}.")
    digits, unit = found.groups()
    if _MAY_BE_THOUSANDS.match(digits):
        raise QuantityError(
            f"“{shown}” can be read two ways; write {shown.replace(',', '')} or "
            f"{shown.replace(',', '.')}."
        )
    if _SECOND_NUMBER.match(unit):
        raise QuantityError(f"“{shown}” holds two numbers; write one, like {example}.")
    plain = digits.replace(",", ".").replace("−", "-")
    if not math.isfinite(float(plain)):
        raise QuantityError(f"“{shown}” is beyond any quantity; correct the number.")
    return Decimal(plain), unit


def _spelt(unit: str) -> str:
    return _SPELLINGS.get(unit, unit)


def _of_kind(text: str, kind: Kind) -> float:
    return _as_float(_exact(text, kind), text.strip())


def _exact(text: str, kind: Kind) -> Decimal:
    """Return the value in the record's unit, before it is rounded to a binary number."""
    shown = _checked(text)
    value, unit = _split(shown, _EXAMPLES[kind])
    first, second = _CHOICES[kind]
    if not unit:
        raise QuantityError(f"{shown} has no unit; write {shown} {first} or {shown} {second}.")
    factor = _FACTORS[kind].get(_spelt(unit))
    if factor is None:
        units = ", ".join(_FACTORS[kind])
        raise QuantityError(f"“{unit}” is no unit of {_NAMES[kind]}; use {units}.")
    if kind == "temperature":
        return _in_celsius(value, _spelt(unit), shown)
    if value < 0:
        raise QuantityError(f"{shown} is below 0; give 0 or more.")
    return value * factor


def _in_celsius(value: Decimal, unit: str, shown: str) -> Decimal:
    celsius = value - _ZERO_CELSIUS_K if unit == "K" else value
    if celsius < -_ZERO_CELSIUS_K:
        raise QuantityError(f"{shown} lies below absolute zero; give at least −273.15 °C.")
    return celsius


def _as_float(value: Decimal, shown: str) -> float:
    number = float(value) + 0.0  # so that −0 is 0
    if not math.isfinite(number):
        raise QuantityError(f"“{shown}” is beyond any quantity; correct the number.")
    return number
