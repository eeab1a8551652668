"""Composition against equivalents: a band for each level, and a line for what is wanted.

At any place the bands stack to the strip of that composition. Coordinates are percentages of
whatever room there is, and text keeps its size; what stands outside the axes hangs over the edge of
the drawing, which ``styles/planner.css`` leaves room for.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString
from numpy.typing import NDArray

from reactions.chemistry.planning import CurveResult
from reactions.pages.drawing.levels import level_name

_LAST_COLOUR = 6
_SCALE = 1000  # of the inner coordinates
_LEAST_LABELLED = 0.07
_TICKS = 5
# Where a label at an end of the axis would be cut off.
_NEAR_AN_END = 0.08


@dataclass(frozen=True)
class Mark:
    """The place on the curve that serves what is wanted: equivalents, share, and levels from–to."""

    equivalents: float
    share: float
    lowest: int
    highest: int


def draw_curve(curve: CurveResult, mark: Mark) -> SafeString:
    """Return the drawing of a curve as SVG, with the mark on it."""
    shares = _shares(curve)
    places = np.array(curve.equivalents) / (curve.equivalents[-1] or 1.0)
    wanted = shares[:, mark.lowest : mark.highest + 1].sum(axis=1)
    at = mark.equivalents / (curve.equivalents[-1] or 1.0)
    return format_html(
        '<svg class="curve" role="img" aria-label="{}">'
        '<svg viewBox="0 0 {} {}" preserveAspectRatio="none" width="100%" height="100%">{}{}</svg>'
        "{}{}{}</svg>",
        _in_words(mark),
        _SCALE,
        _SCALE,
        _bands(places, shares),
        _line(places, wanted),
        _axes(curve.equivalents[-1]),
        _labels(places, shares),
        _marked(at, mark),
    )


def tick_values(highest: float) -> list[float]:
    """Return about five round values from 0 to ``highest``."""
    rough = highest / _TICKS
    power = 10.0 ** np.floor(np.log10(rough))
    step = next(size * power for size in (1.0, 2.0, 2.5, 5.0, 10.0) if size * power >= rough)
    return [float(value) for value in np.arange(0.0, highest + step * 1e-6, step)]


def _shares(curve: CurveResult) -> NDArray[np.float64]:
    """Return the shares of each level shown and, last, of all above."""
    return np.column_stack([np.array(curve.mole_fraction), np.array(curve.higher)])


def _bands(places: NDArray[np.float64], shares: NDArray[np.float64]) -> SafeString:
    edges = np.column_stack([np.zeros(len(shares)), np.cumsum(shares, axis=1)])
    return format_html_join(
        "",
        '<path class="curve-band level-{}" d="{}"/>',
        (
            (
                min(level, _LAST_COLOUR),
                _outline(places, edges[:, level], edges[:, level + 1]),
            )
            for level in range(shares.shape[1])
            if shares[:, level].max() > 1e-4
        ),
    )


def _outline(
    places: NDArray[np.float64], lower: NDArray[np.float64], upper: NDArray[np.float64]
) -> str:
    there = _points(places, upper)
    back = _points(places[::-1], lower[::-1])
    return f"M{there}L{back}Z"


def _line(places: NDArray[np.float64], wanted: NDArray[np.float64]) -> SafeString:
    return format_html('<path class="curve-wanted" d="M{}"/>', _points(places, wanted))


def _points(places: NDArray[np.float64], heights: NDArray[np.float64]) -> str:
    return "L".join(
        f"{_SCALE * place:.1f} {_SCALE * (1 - height):.1f}"
        for place, height in zip(places, np.clip(heights, 0, 1), strict=True)
    )


def _axes(highest: float) -> SafeString:
    across = format_html_join(
        "",
        '<text class="curve-tick" x="{}%" y="100%" dy="1.35em" text-anchor="{}"'
        ' aria-hidden="true">{}</text>',
        (
            (f"{100 * value / highest:.2f}", _anchor(value / highest), f"{value:g}")
            for value in tick_values(highest)
        ),
    )
    up = format_html_join(
        "",
        '<text class="curve-tick" x="0" dx="-0.5em" y="{}%" text-anchor="end"'
        ' dominant-baseline="central" aria-hidden="true">{} %</text>',
        ((100 - percent, percent) for percent in (0, 25, 50, 75, 100)),
    )
    return across + up


def _anchor(place: float) -> str:
    if place < _NEAR_AN_END:
        return "start"
    return "end" if place > 1 - _NEAR_AN_END else "middle"


def _labels(places: NDArray[np.float64], shares: NDArray[np.float64]) -> SafeString:
    """Return the level's number in each band, where the band is widest."""
    edges = np.column_stack([np.zeros(len(shares)), np.cumsum(shares, axis=1)])
    inner = (places > 0.03) & (places < 0.97)
    labels = []
    for level in range(shares.shape[1]):
        widths = np.where(inner, shares[:, level], 0.0)
        widest = int(widths.argmax())
        if widths[widest] < _LEAST_LABELLED:
            continue
        middle = (edges[widest, level] + edges[widest, level + 1]) / 2
        name = f"{level}+" if level == shares.shape[1] - 1 else str(level)
        labels.append((f"{100 * places[widest]:.2f}", f"{100 * (1 - middle):.2f}", name))
    return format_html_join(
        "",
        '<text class="curve-label" x="{}%" y="{}%" text-anchor="middle"'
        ' dominant-baseline="central" aria-hidden="true">{}</text>',
        labels,
    )


def _marked(at: float, mark: Mark) -> SafeString:
    x = f"{100 * at:.2f}%"
    y = f"{100 * (1 - mark.share):.2f}%"
    return format_html(
        '<line class="curve-mark" x1="{}" x2="{}" y1="0" y2="100%"/>'
        '<circle class="curve-dot" cx="{}" cy="{}" r="6"/>'
        '<text class="curve-optimum" x="{}" y="0" dy="-0.6em" text-anchor="{}"'
        ' aria-hidden="true">{} eq</text>',
        x,
        x,
        x,
        y,
        x,
        _anchor(at),
        f"{mark.equivalents:.4g}",
    )


def _in_words(mark: Mark) -> str:
    levels = level_name(mark.lowest)
    if mark.highest != mark.lowest:
        levels = f"{levels} to {level_name(mark.highest)}"
    return (
        "Composition against equivalents; the table below has the values. "
        f"At {mark.equivalents:.4g} equivalents {levels} is {100 * mark.share:.1f} %."
    )


def table_rows(curve: CurveResult, count: int = 11) -> Sequence[tuple[float, list[float]]]:
    """Return evenly spaced points: equivalents, and shares, the last for all levels above."""
    shares = _shares(curve)
    wanted = np.linspace(0, curve.equivalents[-1], count)
    nearest = [int(np.abs(np.array(curve.equivalents) - value).argmin()) for value in wanted]
    return [(curve.equivalents[place], shares[place].tolist()) for place in dict.fromkeys(nearest)]
