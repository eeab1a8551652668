"""A query in words, and what to loosen when nothing answers it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from django.contrib.auth.models import User

from reactions.chemistry.drawings import is_molfile, short
from reactions.chemistry.families import Family
from reactions.chemistry.quantity_text import format_duration, format_temperature
from reactions.models import Addend, Reaction
from reactions.search.language import SearchQuery
from reactions.search.query import find

_BESIDE = ("sort", "substructure_kind")
_WORDS = {
    "cage": "on {}",
    "solvent": "in {}",
    "temperature_c_lowest": "at {} or hotter",
    "temperature_c_highest": "at {} or cooler",
    "duration_min_lowest": "for {} or longer",
    "duration_min_highest": "for {} or shorter",
    "level_lowest": "level {} or higher reached",
    "level_highest": "level {} or lower reached",
    "yield_percent_lowest": "yield {} % or more",
    "yield_percent_highest": "yield {} % or less",
    "campaign": "campaign {}",
    "state": "{}",
    "text": "words “{}”",
    "performed_from": "performed from {}",
    "performed_to": "performed up to {}",
    "substructure": "addend holding {}",
    "addend": "addend {}",
    "family": "by {}",
}


@dataclass(frozen=True)
class Condition:
    """One thing asked, in words, and the address that asks all the rest."""

    words: str
    address_without: str


@dataclass(frozen=True)
class Loosening:
    """A condition, and how many hits there would be without it."""

    condition: Condition
    count: int


def conditions(query: SearchQuery, families: Mapping[str, Family], user: User) -> list[Condition]:
    """Return each thing that the query asks, in the order of the form."""
    return [
        Condition(_in_words(name, value, families, user), rest.to_address())
        for name, value, rest in _parts(query)
    ]


def loosenings(query: SearchQuery, families: Mapping[str, Family], user: User) -> list[Loosening]:
    """Return the conditions without which something is found, the most first."""
    found = [
        Loosening(
            Condition(_in_words(name, value, families, user), rest.to_address()),
            find(rest, user).count(),
        )
        for name, value, rest in _parts(query)
    ]
    return sorted((row for row in found if row.count), key=lambda row: -row.count)


def _parts(query: SearchQuery) -> list[tuple[str, Any, SearchQuery]]:
    """Return each field that asks something, with its value and the query without it."""
    parts = []
    for name, value in query.asked().items():
        if name in _BESIDE:
            continue
        beside = ("substructure_kind",) if name == "substructure" else ()
        parts.append((name, value, query.without(name, *beside)))
    return parts


def _in_words(name: str, value: Any, families: Mapping[str, Family], user: User) -> str:
    return _WORDS[name].format(_shown(name, value, families, user))


def _shown(name: str, value: Any, families: Mapping[str, Family], user: User) -> str:
    if name == "family":
        return " or ".join(families[key].name if key in families else key for key in value)
    if name == "substructure":
        return "the part drawn" if is_molfile(value) else short(value)
    if name == "addend":
        used = Reaction.objects.visible_to(user).values("addend_id")
        return str(Addend.objects.filter(pk=value, pk__in=used).first() or f"number {value}")
    if name.startswith("temperature"):
        return format_temperature(value)
    if name.startswith("duration"):
        return format_duration(value)
    return f"{value:g}" if isinstance(value, float) else str(value)
