"""Shares of a whole, such as a purity or a yield: above 0 and up to 1, never in percent."""

from __future__ import annotations

from typing import Annotated

from pydantic import BeforeValidator, Field


def _no_percent(value: object) -> object:
    """Refuse a share that was meant in percent, before a limit refuses it with less to say."""
    if isinstance(value, (int, float)) and 1 < value <= 100:
        raise ValueError(f"{value:g} is more than 1; write {value / 100:g} for {value:g} %.")
    return value


Share = Annotated[float, BeforeValidator(_no_percent), Field(gt=0, le=1, allow_inf_nan=False)]
