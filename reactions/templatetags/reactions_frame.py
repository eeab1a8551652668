"""What the frame needs to draw itself."""

from __future__ import annotations

from dataclasses import dataclass

from django import template
from django.urls import NoReverseMatch, reverse

register = template.Library()

_ENTRIES = (
    ("search", "Reactions", "reactions:search"),
    ("plan", "Plan", "reactions:planner"),
    ("campaigns", "Campaigns", "reactions:campaigns"),
    ("families", "Families", "reactions:families"),
    ("history", "History in", "reactions:history"),
    ("api", "API", "reactions:api-docs"),
)


@dataclass(frozen=True)
class Entry:
    """One entry of the navigation."""

    key: str
    name: str
    address: str


@register.simple_tag
def navigation_entries() -> list[Entry]:
    """Return the entries of the header in their order, those that have an address."""
    entries = []
    for key, name, route in _ENTRIES:
        try:
            entries.append(Entry(key, name, reverse(route)))
        except NoReverseMatch:
            continue
    return entries
