"""What stands in the planner's fields: as sent, or filled with what is usual."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from django.http import QueryDict

from reactions.chemistry.families import Family
from reactions.pages.planner.line_forms import MOST_LINES, line_count
from reactions.pages.planner.usual import UsualLine, refilled, usual_conditions, usual_lines

_AT_FIRST = {
    "cage": "C60",
    "basis": "cage",
    "objective": "most_of_level",
    "level": "1",
    "ratio": "5",
    "uptake": "2",
    "band_lowest": "2",
    "band_highest": "3",
    "equivalents": "1",
    "cage_purity": "99 %",
    "expected_yield": "40 %",
}
_LINE_FIELDS = ("role", "name", "smiles", "equivalents", "per", "purity", "density", "molarity")


@dataclass(frozen=True)
class Typed:
    """The fields of the planner by name; ``is_touched`` once a person has sent them."""

    data: QueryDict
    is_touched: bool


def opened(sent: QueryDict, families: Mapping[str, Family]) -> Typed:
    """Return what was sent, with what is usual where nothing is; a new planner has its defaults.

    An address that names a family (``plan/?family=prato``) opens with the family's usual lines.
    """
    is_touched = "basis" in sent
    data = sent.copy()
    if not is_touched:
        for name, value in _AT_FIRST.items():
            data.setdefault(name, value)
        if data.get("family") in families:
            return Typed(with_family(Typed(data, False), families).data, False)
    return Typed(data, is_touched)


def with_family(typed: Typed, families: Mapping[str, Family]) -> Typed:
    """Return the fields filled for the family chosen; what a person changed stays."""
    data = typed.data.copy()
    key = data.get("family", "")
    previous = data.get("filled_for", "")
    if key not in families:
        return Typed(data, typed.is_touched)
    old = usual_conditions(families[previous]) if previous in families else _AT_FIRST
    new = usual_conditions(families[key])
    for name, value in refilled({name: data.get(name, "") for name in new}, new, old).items():
        data[name] = value
    kept = _own_lines(data, families.get(previous))
    _put_lines(data, [*map(_fields_of, usual_lines(families[key])), *kept][:MOST_LINES])
    data["filled_for"] = key
    return Typed(data, typed.is_touched)


def with_line(typed: Typed) -> Typed:
    """Return the fields with one more empty line."""
    data = typed.data.copy()
    rows = _lines(data)
    if len(rows) < MOST_LINES:
        rows.append(dict.fromkeys(_LINE_FIELDS, ""))
    _put_lines(data, rows)
    return Typed(data, typed.is_touched)


def _own_lines(data: QueryDict, previous: Family | None) -> list[dict[str, str]]:
    """Return the lines that a person typed or changed, over and above the last family's usual."""
    usual = [_fields_of(line) for line in usual_lines(previous)] if previous else []
    return [row for row in _lines(data) if row["name"] and row not in usual]


def _fields_of(line: UsualLine) -> dict[str, str]:
    blank = dict.fromkeys(_LINE_FIELDS, "")
    return blank | {name: str(value) for name, value in vars(line).items()} | {"per": "reagent"}


def _lines(data: QueryDict) -> list[dict[str, str]]:
    return [
        {name: data.get(f"lines-{place}-{name}", "") for name in _LINE_FIELDS}
        for place in range(line_count(data))
    ]


def _put_lines(data: QueryDict, rows: list[dict[str, str]]) -> None:
    for name in [name for name in data if name.startswith("lines-")]:
        del data[name]
    for place, row in enumerate(rows):
        for name, value in row.items():
            data[f"lines-{place}-{name}"] = value
