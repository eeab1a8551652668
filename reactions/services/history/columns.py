"""What a row of a history may hold, and which column of the lab's file holds it.

A mapping gives each field a column of the file or one value for every row. Where cells are bare
numbers the person names the unit once, for the column; a cell's own unit goes before it.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from typing import Annotated

from pydantic import Field

from reactions.services.inputs import Input

HIGHEST_LEVEL_COLUMN = 8


@dataclass(frozen=True)
class HistoryField:
    """A field of the import; ``units`` are the units its bare numbers may be given in."""

    key: str
    label: str
    kind: str  # text, mass, volume, temperature, duration, share, number, count, date, structure
    units: tuple[str, ...] = ()
    is_required: bool = False
    header_words: tuple[str, ...] = ()


_MASS = ("mg", "g", "µg")
_VOLUME = ("mL", "µL", "L")
_SHARE = ("%", "fraction")

FIELDS: tuple[HistoryField, ...] = (
    HistoryField("title", "title", "text", header_words=("title", "name", "experiment", "run")),
    HistoryField("performed_on", "date", "date", header_words=("date", "day")),
    HistoryField("family", "addition family", "text", is_required=True, header_words=("family",)),
    HistoryField("cage", "cage", "text", header_words=("cage", "fullerene")),
    HistoryField(
        "cage_mass",
        "mass of cage",
        "mass",
        _MASS,
        True,
        ("cage mass", "c60 mass", "c70 mass", "fullerene mass", "c60", "c70"),
    ),
    HistoryField("cage_purity", "purity of cage", "share", _SHARE, header_words=("cage purity",)),
    HistoryField("addend", "addend, drawn as SMILES with *", "structure", header_words=("addend",)),
    HistoryField("addend_name", "name of the addend", "text", header_words=("addend name",)),
    HistoryField("target_level", "level wanted", "count", header_words=("target", "level wanted")),
    HistoryField("reagent", "reagent", "text", header_words=("reagent", "reagent name")),
    HistoryField(
        "reagent_smiles", "structure of the reagent", "structure", header_words=("reagent smiles",)
    ),
    HistoryField(
        "reagent_equivalents", "equivalents of reagent", "number", (), False, ("equivalents", "eq")
    ),
    HistoryField("reagent_mass", "mass of reagent", "mass", _MASS, header_words=("reagent mass",)),
    HistoryField("solvent", "solvent", "text", header_words=("solvent",)),
    HistoryField(
        "solvent_volume",
        "volume of solvent",
        "volume",
        _VOLUME,
        False,
        ("volume", "solvent volume"),
    ),
    HistoryField(
        "temperature", "temperature", "temperature", ("°C", "K"), False, ("temperature", "temp")
    ),
    HistoryField("duration", "time", "duration", ("min", "h", "d"), False, ("time", "duration")),
    HistoryField("atmosphere", "atmosphere", "text", header_words=("atmosphere", "gas")),
    HistoryField("method", "method of the reading", "text", header_words=("method", "analysis")),
    *(
        HistoryField(
            f"level_{level}",
            "unreacted cage" if level == 0 else f"share of level {level}",
            "share",
            _SHARE,
            header_words=(f"x{level}", f"level {level}"),
        )
        for level in range(HIGHEST_LEVEL_COLUMN + 1)
    ),
    HistoryField(
        "product_mass", "mass of product isolated", "mass", _MASS, header_words=("product mass",)
    ),
    HistoryField(
        "product_purity", "purity of the product", "share", _SHARE, False, ("product purity",)
    ),
    HistoryField(
        "recovered_cage", "cage recovered", "mass", _MASS, header_words=("recovered cage",)
    ),
    HistoryField("conclusion", "conclusion", "text", header_words=("conclusion", "notes", "note")),
)
FIELD_BY_KEY: Mapping[str, HistoryField] = {field.key: field for field in FIELDS}


class ColumnChoice(Input):
    """Where a field's cells come from: a column of the file, or one value for all rows."""

    column: Annotated[str, Field(max_length=300)] = ""
    value: Annotated[str, Field(max_length=2000)] = ""
    unit: Annotated[str, Field(max_length=10)] = ""


ColumnMapping = dict[str, ColumnChoice]

_UNIT_IN_HEADER = re.compile(
    r"[\[(/,]\s*(mg|g|µg|ug|ml|µl|ul|l|°c|c|k|min|h|d|%)\s*[\])]?\s*\Z", re.I
)


def suggest_mapping(header: Sequence[str]) -> ColumnMapping:
    """Return a mapping read off the header's words, for the person to confirm or correct."""
    plain = {
        _UNIT_IN_HEADER.sub("", name).strip().lower().replace("_", " "): name for name in header
    }
    suggestion: ColumnMapping = {}
    taken: set[str] = set()
    for field in FIELDS:
        words = (field.label.lower(), field.key.replace("_", " "), *field.header_words)
        match = next((plain[word] for word in words if word in plain), None)
        if match is None:
            near = get_close_matches(field.key.replace("_", " "), plain, n=1, cutoff=0.9)
            match = plain[near[0]] if near else None
        if match and match not in taken:
            taken.add(match)
            suggestion[field.key] = ColumnChoice(column=match, unit=_unit_of(match, field))
    return suggestion


def _unit_of(header: str, field: HistoryField) -> str:
    """Return the unit that a header such as ``C60 / mg`` names, spelt as the field spells it."""
    found = _UNIT_IN_HEADER.search(header)
    if not found:
        return ""
    spelt = {unit.lower(): unit for unit in field.units} | {"ug": "µg", "ul": "µL", "c": "°C"}
    unit = spelt.get(found.group(1).lower(), "")
    return unit if unit in field.units else ""
