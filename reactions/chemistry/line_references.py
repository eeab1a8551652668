"""Equivalents counted by the cage or by another line, followed to an amount of substance.

n(line) = equivalents · n(reference). Definition; common practice of the laboratory, no source.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from reactions.chemistry.line_amounts import AmountsError

_CAGE_WORDS = frozenset({"", "cage", "the cage"})


@dataclass(frozen=True)
class CountedLine:
    """A line with its equivalents and the name of what they count; no name is the cage."""

    name: str
    equivalents: float | None
    equivalents_of: str | None


def references(cage: str, lines: Sequence[CountedLine]) -> list[int | None]:
    """Return for each line the place of the line that its equivalents count; None for the cage.

    A line may name the cage as such (``cage``) or by its formula. Raises AmountsError for a name
    that no line or several lines have, and for lines that count each other in a circle.
    """
    names = [line.name for line in lines]
    found = [_reference(place, line, cage, names) for place, line in enumerate(lines)]
    for place in range(len(lines)):
        _check_circle(place, found, lines)
    return found


def planned_mmol(
    lines: Sequence[CountedLine], referred: Sequence[int | None], cage_mmol: float
) -> list[float | None]:
    """Return the planned amount of each line in mmol; None where no equivalents lead to one.

    ``referred`` is what ``references`` returns.
    """
    return [_mmol(place, lines, referred, cage_mmol) for place in range(len(lines))]


def _mmol(
    place: int, lines: Sequence[CountedLine], referred: Sequence[int | None], cage_mmol: float
) -> float | None:
    amount = cage_mmol
    step: int | None = place
    while step is not None:
        equivalents = lines[step].equivalents
        if equivalents is None:
            return None
        amount *= equivalents
        step = referred[step]
    return amount


def _reference(place: int, line: CountedLine, cage: str, names: list[str]) -> int | None:
    wanted = (line.equivalents_of or "").strip()
    places = [other for other, name in enumerate(names) if name == wanted]
    if len(places) == 1:
        return places[0]
    if len(places) > 1:
        raise AmountsError(
            f"lines.{place}.equivalents_of",
            f"{line.name} counts its equivalents by “{wanted}”, and {len(places)} lines have that "
            "name; give each line a name of its own.",
        )
    if wanted.casefold() in _CAGE_WORDS or wanted == cage:
        return None
    raise AmountsError(
        f"lines.{place}.equivalents_of",
        f"{line.name} counts its equivalents by “{wanted}”, which is no line here; name one of the "
        "lines, or leave it out to count by the cage.",
    )


def _check_circle(start: int, referred: list[int | None], lines: Sequence[CountedLine]) -> None:
    step = referred[start]
    for _ in lines:
        if step is None:
            return
        step = referred[step]
    raise AmountsError(
        f"lines.{start}.equivalents_of",
        f"The equivalents of {lines[start].name} lead round in a circle; let one line count by the "
        "cage.",
    )
