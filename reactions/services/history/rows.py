"""Reading one row of a lab's history."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import date, datetime
from typing import Any

from reactions.chemistry import quantities
from reactions.chemistry.families import Family
from reactions.models import Atmosphere, ReadingMethod
from reactions.services.history.columns import (
    FIELD_BY_KEY,
    HIGHEST_LEVEL_COLUMN,
    ColumnMapping,
)

_BARE_NUMBER = re.compile(r"[-+]?\d*[.,]?\d+(?:[eE][-+]?\d+)?\Z")
_READERS: Mapping[str, Callable[[str], float]] = {
    "mass": quantities.mass_mg,
    "volume": quantities.volume_ml,
    "temperature": quantities.temperature_c,
    "duration": quantities.duration_min,
}
_DATE_FORMATS = ("%Y-%m-%d", "%d.%m.%Y", "%Y/%m/%d")


class RowProblem(ValueError):
    """Why a row can't come in, naming the cell and the remedy."""


@dataclass(frozen=True)
class HistoryRow:
    """One row, read: values by field key in the record's units; absent when the cell is empty."""

    number: int
    values: Mapping[str, Any] = field(default_factory=dict)

    def get(self, key: str, default: Any = None) -> Any:
        """Return the value of a field."""
        return self.values.get(key, default)

    @property
    def mole_fraction_by_level(self) -> dict[int, float]:
        """Return the composition that the row gives; empty without one."""
        return {
            level: self.values[f"level_{level}"]
            for level in range(HIGHEST_LEVEL_COLUMN + 1)
            if f"level_{level}" in self.values
        }


def read_row(
    number: int, cells: Mapping[str, str], mapping: ColumnMapping, families: Mapping[str, Family]
) -> HistoryRow:
    """Return the row's values; raises ``RowProblem`` with every reason why it can't come in."""
    values: dict[str, Any] = {}
    reasons: list[str] = []
    for key, choice in mapping.items():
        spec = FIELD_BY_KEY[key]
        text = (cells.get(choice.column) if choice.column else choice.value) or ""
        text = text.strip()
        if not text:
            if spec.is_required:
                reasons.append(f"{spec.label}: the cell is empty; fill it in.")
            continue
        try:
            values[key] = _read_cell(key, text, choice.unit, families)
        except (quantities.QuantityError, RowProblem) as problem:
            reasons.append(f"{spec.label}: {problem}")
    reasons += _across_cells(values)
    if reasons:
        raise RowProblem(" ".join(reasons))
    return HistoryRow(number, values)


def _read_cell(key: str, text: str, unit: str, families: Mapping[str, Family]) -> Any:
    spec = FIELD_BY_KEY[key]
    if spec.kind in _READERS:
        bare = bool(_BARE_NUMBER.match(text))
        return _READERS[spec.kind](f"{text} {unit}" if bare and unit else text)
    if spec.kind == "share":
        bare = bool(_BARE_NUMBER.match(text))
        return quantities.fraction(f"{text} %" if bare and unit == "%" else text)
    if spec.kind in {"number", "count"}:
        return _number(text, whole=spec.kind == "count")
    if spec.kind == "date":
        return _date(text)
    if key == "family":
        return _family_key(text, families)
    if key == "method":
        return _choice(text, dict(ReadingMethod.choices))
    if key == "atmosphere":
        return _choice(text, {value: label for value, label in Atmosphere.choices if value})
    return text


def _number(text: str, *, whole: bool) -> float | int:
    if not _BARE_NUMBER.match(text):
        raise RowProblem(f"“{text}” is not a number.")
    value = float(text.replace(",", "."))
    if value < 0:
        raise RowProblem(f"{text} is below 0.")
    if whole and (not value.is_integer() or value > 60):
        raise RowProblem(f"“{text}” is not a whole number from 0 to 60.")
    return int(value) if whole else value


def _date(text: str) -> date:
    for pattern in _DATE_FORMATS:
        try:
            return datetime.strptime(text, pattern).date()
        except ValueError:
            continue
    raise RowProblem(f"“{text}” is not a date; write it as 2026-03-31 or 31.03.2026.")


def _family_key(text: str, families: Mapping[str, Family]) -> str:
    if text in families:
        return text
    for key, family in families.items():
        if text.lower() in {key.lower(), family.name.lower()}:
            return key
    raise RowProblem(
        f"“{text}” is no known addition family; write its name as the families page does."
    )


def _choice(text: str, labels: Mapping[str, str]) -> str:
    for value, label in labels.items():
        if text.lower() in {str(value).lower(), str(label).lower()}:
            return str(value)
    raise RowProblem(f"“{text}” is not known; write one of {', '.join(labels.values())}.")


def _across_cells(values: Mapping[str, Any]) -> list[str]:
    """Return what is wrong between cells that are right one by one."""
    reasons = []
    total = sum(values.get(f"level_{level}", 0.0) for level in range(HIGHEST_LEVEL_COLUMN + 1))
    if total > 1.001:
        reasons.append(f"The shares of the levels sum to {100 * total:.1f} %, more than 100 %.")
    if values.get("cage_mass") == 0:
        reasons.append("mass of cage: 0 mg is no charge; give the mass.")
    if "product_mass" in values and not values.get("target_level"):
        reasons.append("A mass of product needs the level wanted, from 1 upward.")
    return reasons
