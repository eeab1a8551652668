"""A plan's outcome as the page shows it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from reactions.models import Component, ComponentRole
from reactions.pages.drawing.curves import Mark, draw_curve, table_rows
from reactions.pages.drawing.levels import level_name
from reactions.pages.planner.composing import Composed
from reactions.pages.planner.forms import PlannerForm
from reactions.pages.planner.outcome import Outcome
from reactions.pages.planner.storing import is_confirmed, suggested_title

_LEAST_SHOWN = 0.0005


@dataclass(frozen=True)
class LevelRow:
    """A level of the composition expected: its share, and its mass where that is known."""

    level: int
    name: str
    share: float
    mass_mg: float | None
    is_wanted: bool


def shown(form: PlannerForm, outcome: Outcome) -> dict[str, Any]:
    """Return what the templates show beside the fields."""
    composed = outcome.composed
    values: dict[str, Any] = {
        "title_suggested": suggested_title(form, outcome) if outcome.family else "",
        "weighing": _weighing(outcome),
        "levels": [],
    }
    if composed is None:
        return values
    wanted = sum(composed.mole_fraction[composed.band[0] : composed.band[1] + 1])
    mark = Mark(composed.equivalents, wanted, *composed.band)
    masses = outcome.charged.level_mass_mg if outcome.charged else []
    return values | {
        "curve": draw_curve(composed.curve, mark),
        "curve_levels": _curve_levels(composed),
        "curve_rows": table_rows(composed.curve),
        "is_confirmed": is_confirmed(form, outcome),
        "wanted_share": wanted,
        "wanted_name": _wanted_name(composed),
        "levels": _level_rows(composed, masses),
    }


def _curve_levels(composed: Composed) -> list[str]:
    shown_levels = len(composed.curve.mole_fraction[0])
    return [*(str(level) for level in range(shown_levels)), f"{shown_levels}+"]


def _wanted_name(composed: Composed) -> str:
    lowest, highest = composed.band
    if lowest == highest:
        return level_name(lowest)
    return f"{level_name(lowest)} to {level_name(highest)}"


def _level_rows(composed: Composed, masses: list[float]) -> list[LevelRow]:
    return [
        LevelRow(
            level=level,
            name=level_name(level),
            share=share,
            mass_mg=masses[level] if masses else None,
            is_wanted=composed.band[0] <= level <= composed.band[1],
        )
        for level, share in enumerate(composed.mole_fraction)
        if share >= _LEAST_SHOWN
    ]


@dataclass(frozen=True)
class Weighed:
    """A line of the weighing list as worked out."""

    component: Component
    is_cage: bool
    is_limiting: bool


def _weighing(outcome: Outcome) -> list[Weighed]:
    if outcome.charged is None:
        return []
    lines = outcome.charged.lines
    return [
        Weighed(row, row.role == ComponentRole.CAGE, row.name == lines.limiting)
        for row in lines.components
    ]
