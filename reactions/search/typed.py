"""Values of a search as people type them, with or without their unit.

The name of each field holds its unit, so a plain number is taken in that unit; any other unit is
written behind the number.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Annotated, Any

from pydantic import BeforeValidator

from reactions.chemistry import quantities


def _plain_number(text: str) -> float | None:
    try:
        number = float(text.replace("−", "-"))
    except ValueError:
        return None
    if not math.isfinite(number):
        raise ValueError(f"{text} is not a finite number; give an ordinary number.")
    return number


def _typed(read: Callable[[str], float], example: str) -> BeforeValidator:
    def convert(value: Any) -> Any:
        if not isinstance(value, str):
            return value
        text = value.strip()
        number = _plain_number(text)
        if number is not None:
            return number
        if not any(character.isdigit() for character in text):
            raise ValueError(f"“{text[:60]}” holds no number; write it as {example}.")
        return read(text)

    return BeforeValidator(convert)


def _percent(text: str) -> float:
    number = _plain_number(text.removesuffix("%").strip())
    if number is None:
        raise ValueError(f"“{text[:60]}” is not a percentage; write it as 40 %.")
    return number


TemperatureC = Annotated[float, _typed(quantities.temperature_c, "110 °C")]
DurationMin = Annotated[float, _typed(quantities.duration_min, "2 h")]
Percent = Annotated[float, _typed(_percent, "40 %")]
