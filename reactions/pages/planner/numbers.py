"""Fields for plain numbers, with messages in the words of the other quantities."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from reactions.pages.sheet.fields import QuantityField


def number_field(
    lowest: float,
    highest: float,
    *,
    example: str,
    whole: bool = False,
    slide: str = "",
    **kwargs: Any,
) -> QuantityField:
    """Return a field for a number from ``lowest`` to ``highest``, both included.

    ``slide`` gives it a slider: its least, its most and its step, such as ``1 12 1``.
    """

    def read(text: str) -> float:
        number = _read_number(text)
        if whole and number != int(number):
            raise ValueError(f"{text} is not a whole number; leave out the decimals.")
        if number < lowest:
            raise ValueError(f"{text} is below {lowest:g}; give {lowest:g} or more.")
        if number > highest:
            raise ValueError(f"{text} is above {highest:g}; give {highest:g} or less.")
        return int(number) if whole else number

    field = QuantityField(read, show_number, example=example, **kwargs)
    field.widget.attrs["inputmode"] = "numeric" if whole else "decimal"
    if slide:
        field.widget.attrs["data-slide"] = slide
    return field


def above_zero(field: QuantityField) -> QuantityField:
    """Return the field refusing 0, where nothing would follow from it."""
    read = field.read

    def read_above_zero(text: str) -> float:
        value = read(text)
        if value == 0:
            raise ValueError(f"{text} is nothing; give more than 0.")
        return value

    field.read = read_above_zero
    return field


def factors_field(example: str, **kwargs: Any) -> QuantityField:
    """Return a field for one factor, or several with blanks or semicolons between them."""
    return QuantityField(_factors_reader(1000.0), show_number, example=example, **kwargs)


def show_number(number: float) -> str:
    """Show a number to four figures."""
    return f"{number:.4g}"


def _read_number(text: str) -> float:
    try:
        number = float(text.replace(",", ".").replace("−", "-"))
    except ValueError:
        raise ValueError(f"“{text}” is not a number; write digits, such as 1.5.") from None
    if not math.isfinite(number):
        raise ValueError(f"{text} is not a finite number; give an ordinary number.")
    return number


def _factors_reader(highest: float) -> Callable[[str], Any]:
    def read(text: str) -> Any:
        factors = [_read_number(part) for part in text.replace(";", " ").split()]
        for factor in factors:
            if not 0 <= factor <= highest:
                raise ValueError(f"{factor:g} is no factor; give 0 to {highest:g}.")
        return factors[0] if len(factors) == 1 else factors

    return read
