"""Forms of many rows: which rows were posted, and which a button adds or takes away.

Each row is marked by a hidden field ``<prefix>-<place>-row``. A row keeps its place from one
drawing of the form to the next, so a row taken away leaves a gap and moves none of the others.
"""

from __future__ import annotations

import re

from django.http import QueryDict

_MOST_ROWS = 100


def places_in(data: QueryDict, prefix: str) -> list[int]:
    """Return the places of the rows posted under ``prefix``, in order, at most a hundred."""
    mark = re.compile(re.escape(prefix) + r"-(\d{1,4})-row", re.ASCII)
    found = (mark.fullmatch(name) for name in data)
    return sorted(int(match[1]) for match in found if match)[:_MOST_ROWS]


def next_place(places: list[int]) -> int:
    """Return a place that no row has yet."""
    return max(places, default=-1) + 1
