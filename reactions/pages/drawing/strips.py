"""Compositions as strips: one strip a composition, one segment an addition level.

The widths are percentages of whatever room there is and the text keeps its size, so one drawing
serves a telephone, a screen and a sheet of paper. Colours are classes of ``styles/strips.css``.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString

from reactions.pages.drawing.levels import level_name

# Levels above share the last colour; their labels tell them apart.
_LAST_COLOUR = 6
_LEAST_LABELLED = 0.04
_LEAST_WITH_SHARE = 0.12
_LEAST_WITH_SHARE_WHEN_NARROW = 0.24
# What a composition lacks of the whole is drawn from here on; less is rounding.
_LEAST_UNASSIGNED = 0.002


@dataclass(frozen=True)
class Segment:
    """One piece of a strip: its share and where it begins (both 0 to 1), label, name and colour."""

    share: float
    start: float
    label: str
    name: str
    colour: str

    @property
    def reading(self) -> str:
        """Return the segment in words, such as ``mono 61.3 %``."""
        return f"{self.name} {100 * self.share:.1f} %"


def segments(composition: Sequence[float], *, is_higher_lumped: bool = False) -> list[Segment]:
    """Return the segments of a composition (mole fractions from level 0), left to right.

    With ``is_higher_lumped`` the last level stands for itself and all above. What is missing to 1
    becomes a segment of its own, “not assigned”.
    """
    pieces = []
    start = 0.0
    last = len(composition) - 1
    for level, share in enumerate(composition):
        is_lumped = is_higher_lumped and level == last
        if share > 0:
            pieces.append(
                Segment(
                    share=share,
                    start=start,
                    label=f"{level}+" if is_lumped else str(level),
                    name=f"{level_name(level)} and higher" if is_lumped else level_name(level),
                    colour=str(min(level, _LAST_COLOUR)),
                )
            )
            start += share
    if pieces and 1 - start > _LEAST_UNASSIGNED:
        pieces.append(Segment(1 - start, start, "?", "not assigned", "unassigned"))
    return pieces


def in_words(composition: Sequence[float], *, is_higher_lumped: bool = False) -> str:
    """Return a composition in words: ``unreacted 36.2 %, mono 40.1 %, …``."""
    pieces = segments(composition, is_higher_lumped=is_higher_lumped)
    return ", ".join(piece.reading for piece in pieces if round(1000 * piece.share)) or "nothing"


def draw_strip(
    composition: Sequence[float],
    *,
    name: str,
    is_higher_lumped: bool = False,
    is_pale: bool = False,
) -> SafeString:
    """Return the strip of a composition as SVG; ``name`` says what it is, such as ``found``.

    ``is_pale`` is how a composition is drawn that was predicted, not measured.
    """
    words = in_words(composition, is_higher_lumped=is_higher_lumped)
    drawn = format_html_join(
        "",
        '<svg x="{}%" width="{}%" height="100%">'
        '<title>{}</title><rect class="level-{}" width="100%" height="100%"/>{}</svg>',
        (
            (
                f"{100 * piece.start:.3f}",
                f"{100 * piece.share:.3f}",
                piece.reading,
                piece.colour,
                _label(piece),
            )
            for piece in segments(composition, is_higher_lumped=is_higher_lumped)
        ),
    )
    return format_html(
        '<svg class="strip{}" role="img" aria-label="{}: {}">{}'
        '<rect class="strip-ground" width="100%" height="100%"/></svg>',
        " strip-pale" if is_pale else "",
        name,
        words,
        drawn,
    )


def _label(piece: Segment) -> SafeString:
    """Return the text of a segment: its level, and its share where there is room."""
    if piece.share < _LEAST_LABELLED:
        return SafeString("")
    share = SafeString("")
    if piece.share >= _LEAST_WITH_SHARE:
        tight = piece.share < _LEAST_WITH_SHARE_WHEN_NARROW
        share = format_html(
            '<tspan class="strip-share{}" dx="0.4em">{} %</tspan>',
            " strip-share-tight" if tight else "",
            f"{100 * piece.share:.0f}",
        )
    return format_html(
        '<text class="on-level-{}" x="50%" y="50%" text-anchor="middle"'
        ' dominant-baseline="central" aria-hidden="true">{}{}</text>',
        piece.colour,
        piece.label,
        share,
    )


def draw_swatch(level: int) -> SafeString:
    """Return a small square in the colour of an addition level."""
    return format_html(
        '<svg viewBox="0 0 10 10" aria-hidden="true"><rect class="level-{}" width="10"'
        ' height="10"/></svg>',
        min(level, _LAST_COLOUR),
    )
