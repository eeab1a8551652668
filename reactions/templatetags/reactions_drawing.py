"""Tags that draw."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django import template
from django.utils.safestring import SafeString

from reactions.pages.drawing.levels import level_name
from reactions.pages.drawing.strips import draw_strip, draw_swatch, in_words

register = template.Library()
register.filter("level_name", level_name)

PREDICTED = "predicted"
_SHOWN_IN_TABLE = 0.0005


@register.inclusion_tag("reactions/strips.html")
def composition_strip(
    predicted: Sequence[float] | None = None,
    found: Sequence[float] | None = None,
    *,
    higher_lumped: bool = False,
    named: bool = True,
    low: bool = False,
    table: bool = False,
    only_found: bool = False,
    name: str = "found",
) -> dict[str, Any]:
    """Draw the predicted composition above the found one, each a list from level 0 or None.

    ``higher_lumped``: the last level of ``found`` stands for all above it too. ``named``: with the
    names beside the strips. ``low``: for a row of a list. ``table``: with the values beneath.
    ``only_found``: the found one alone, under ``name``.
    """
    rows = [] if only_found else [_row(PREDICTED, predicted, False)]
    rows.append(_row(name, found, higher_lumped))
    highest = max((row["highest"] for row in rows), default=0)
    for row in rows:
        row["shares"] = [
            _share(row["composition"], level) if row["composition"] else ""
            for level in range(highest + 1)
        ]
        if not row["composition"]:
            row["shares"] = []
    return {
        "rows": rows,
        "levels": [level_name(level) for level in range(highest + 1)],
        "is_named": named,
        "is_low": low,
        "has_table": table,
    }


def _row(name: str, composition: Sequence[float] | None, is_lumped: bool) -> dict[str, Any]:
    values = list(composition or ())
    shown = [level for level, share in enumerate(values) if share >= _SHOWN_IN_TABLE]
    return {
        "name": name,
        "composition": values,
        "highest": max(shown, default=0),
        "strip": draw_strip(
            values, name=name, is_higher_lumped=is_lumped, is_pale=name == PREDICTED
        )
        if values
        else "",
    }


def _share(composition: Sequence[float], level: int) -> str:
    return f"{100 * composition[level]:.1f} %" if level < len(composition) else "–"


@register.simple_tag
def composition_words(composition: Sequence[float], higher_lumped: bool = False) -> str:
    """Say a composition in words, such as “unreacted 36.2 %, mono 40.1 %”."""
    return in_words(composition, is_higher_lumped=higher_lumped)


@register.inclusion_tag("reactions/level_key.html")
def level_key(highest: int = 3) -> dict[str, Any]:
    """Name the levels from 0 to ``highest`` beside their colours."""
    return {"levels": [(level, level_name(level)) for level in range(highest + 1)]}


@register.simple_tag
def level_swatch(level: int) -> SafeString:
    """Draw a small square in the colour of an addition level."""
    return draw_swatch(level)
