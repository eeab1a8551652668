"""Reading JSON that anyone may have written, for the API and the command.

What JSON or Python would let pass but no record can hold is refused at its field: numbers that are
not finite, the character NUL, halves of characters, a field given twice, nesting without end.
"""

from __future__ import annotations

import json
import math
from collections.abc import Iterator
from typing import Any

from reactions.errors import WHOLE, FieldErrors

DEEPEST = 40
_MOST_DIGITS = 18  # a whole number of so many still fits a column of the database
_HALF_CHARACTERS = range(0xD800, 0xE000)


def read_json(text: str) -> Any:
    """Return what ``text`` says; raises ``FieldErrors`` with paths such as ``lines.2.name``."""
    try:
        data = json.loads(text, parse_int=_whole_number, object_pairs_hook=_object)
    except RecursionError as error:
        raise _too_deep() from error
    except ValueError as error:
        raise FieldErrors.at(WHOLE, f"This is not JSON: {error}.") from error
    for path, depth, value in _walk(data):
        if depth > DEEPEST:
            raise _too_deep()
        if fault := _fault(value):
            raise FieldErrors.at(path or WHOLE, fault)
    return data


def _too_deep() -> FieldErrors:
    return FieldErrors.at(WHOLE, f"This is nested more than {DEEPEST} deep; send it flatter.")


def _whole_number(digits: str) -> int | float:
    """Return a whole number; JSON makes no difference between a long one and a decimal."""
    return int(digits) if len(digits) <= _MOST_DIGITS else float(digits)


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    fields = dict(pairs)
    if len(fields) < len(pairs):
        names = [name for name, _ in pairs]
        twice = next(name for name in names if names.count(name) > 1)
        raise ValueError(f"the field {json.dumps(twice[:60])} stands in it twice")
    return fields


def _walk(data: Any) -> Iterator[tuple[str, int, Any]]:
    """Yield each value, and each name of a field at the path of its object, with its depth.

    Without recursion, because the nesting is whatever somebody sent.
    """
    waiting: list[tuple[str, int, Any]] = [("", 0, data)]
    while waiting:
        path, depth, value = waiting.pop()
        yield path, depth, value
        before = f"{path}." if path else ""
        if isinstance(value, dict):
            for name, inner in value.items():
                yield path, depth, name
                waiting.append((f"{before}{name}", depth + 1, inner))
        elif isinstance(value, list):
            waiting.extend((f"{before}{i}", depth + 1, inner) for i, inner in enumerate(value))


def _fault(value: Any) -> str:
    """Return what is wrong with a number or a text; empty when nothing is."""
    if isinstance(value, float) and not math.isfinite(value):
        return f"{value:g} is not a finite number; give an ordinary number."
    if isinstance(value, str):
        if "\x00" in value:
            return "The text holds the character NUL; take it out."
        if not value.isascii() and any(ord(sign) in _HALF_CHARACTERS for sign in value):
            return "The text holds half a character (a lone surrogate); type it again."
    return ""
