"""Revisions in words: what each field is called on the sheet, and values with their units."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from reactions.chemistry import quantity_text
from reactions.models import Revision

_SHOWN_BY_UNIT: Mapping[str, Callable[[float], str]] = {
    "_mg": quantity_text.format_mass,
    "_ml": quantity_text.format_volume,
    "_mmol": quantity_text.format_amount,
    "_min": quantity_text.format_duration,
    "_c": quantity_text.format_temperature,
}
_UNIT_SUFFIXES = (*_SHOWN_BY_UNIT, "_g_per_mol", "_g_per_ml", "_mol_per_l")
_NOTHING = "–"


@dataclass(frozen=True)
class DescribedChange:
    """One field before and after, in words."""

    name: str
    before: str
    after: str
    made_by: str


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
        before=_value(field, change.get("before")),
        after=_value(field, change.get("after")),
        made_by=str(change.get("made_by", "")),
    )


def _name(field: str) -> str:
    for suffix in _UNIT_SUFFIXES:
        field = field.removesuffix(suffix)
    return field.replace("_", " ")


def _value(field: str, value: Any) -> str:
    if value is None or value in ("", [], {}):
        return _NOTHING
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float):
        for suffix, show in _SHOWN_BY_UNIT.items():
            if field.endswith(suffix):
                return show(float(value))
        return f"{value:g}"
    if isinstance(value, list):
        return "\n".join(_value("", row) for row in value)
    if isinstance(value, Mapping):
        return "\n".join(
            f"{_name(str(key))}: {_value(str(key), row)}"
            for key, row in value.items()
            if row not in (None, "", [], {})
        )
    return str(value)
