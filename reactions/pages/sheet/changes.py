"""Revisions in words: what each field is called on the sheet, and values with their units."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from reactions.chemistry import quantity_text
from reactions.models import Revision
from reactions.pages.quantity_words import format_molar_mass

# By the unit at the end of a field's name, the longer ends first.
_SHOWN_BY_UNIT: Mapping[str, Callable[[float], str]] = {
    "_g_per_ml": quantity_text.format_density,
    "_mol_per_l": quantity_text.format_molarity,
    "_g_per_mol": format_molar_mass,
    "_mg": quantity_text.format_mass,
    "_ml": quantity_text.format_volume,
    "_mmol": quantity_text.format_amount,
    "_min": quantity_text.format_duration,
    "_c": quantity_text.format_temperature,
}
_NOTHING = "–"


@dataclass(frozen=True)
class DescribedChange:
    """One field before and after, in words."""

    name: str
    before: str
    after: str
    made_by: str

    @property
    def is_addition(self) -> bool:
        """Return whether nothing stood there before."""
        return self.before == _NOTHING


@dataclass(frozen=True)
class DescribedRevision:
    """A revision with its changes in words."""

    revision: Revision
    changes: list[DescribedChange]


def described(revision: Revision) -> DescribedRevision:
    """Return a revision with its changes in the words of the sheet."""
    made_by = str(revision.made_by)
    return DescribedRevision(
        revision, [describe_change({**row, "made_by": made_by}) for row in revision.changes]
    )


def describe_change(change: Mapping[str, Any]) -> DescribedChange:
    """Return one change in the words of the sheet."""
    field = str(change.get("field", ""))
    return DescribedChange(
        name=_name(field),
        before=_side(field, change.get("before")),
        after=_side(field, change.get("after")),
        made_by=str(change.get("made_by", "")),
    )


def _side(field: str, value: Any) -> str:
    """Return one side of a change; what has many fields gets a line for each."""
    return _pairs(value, "\n") if isinstance(value, Mapping) else _value(field, value)


def _name(field: str) -> str:
    for suffix in _SHOWN_BY_UNIT:
        if field.endswith(suffix):
            return field.removesuffix(suffix).replace("_", " ")
    return field.replace("_", " ")


def _value(field: str, value: Any) -> str:
    if _is_nothing(value):
        return _NOTHING
    if value is True:
        return "yes"
    if isinstance(value, int | float):
        for suffix, show in _SHOWN_BY_UNIT.items():
            if field.endswith(suffix):
                return show(float(value))
        return f"{value:g}"
    if isinstance(value, list):
        are_short = all(isinstance(row, int | float) for row in value)
        return (", " if are_short else "\n").join(_value("", row) for row in value)
    if isinstance(value, Mapping):
        return _pairs(value, ", ")
    return str(value)


def _pairs(values: Mapping[str, Any], between: str) -> str:
    return between.join(
        f"{_name(str(name))} {_value(str(name), value)}"
        for name, value in values.items()
        if not _is_nothing(value)
    )


def _is_nothing(value: Any) -> bool:
    return value is None or value is False or value in ("", [], {})
