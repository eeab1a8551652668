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


def _typed(read: Callable[[str], float]) -> BeforeValidator:
    def convert(value: Any) -> Any:
        if not isinstance(value, str):
            return value
        number = _plain_number(value.strip())
        return read(value) if number is None else number

    return BeforeValidator(convert)


def _percent(text: str) -> float:
    number = _plain_number(text.strip().removesuffix("%").strip())
    if number is None:
        raise ValueError(f"“{text.strip()[:60]}” is not a percentage; write it as 40 %.")
    return number


TemperatureC = Annotated[float, _typed(quantities.temperature_c)]
DurationMin = Annotated[float, _typed(quantities.duration_min)]
Percent = Annotated[float, _typed(_percent)]
