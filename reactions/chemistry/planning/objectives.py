"""What a plan can aim at: the objectives as typed, and what each of them counts."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import mono_to_multi
from reactions.chemistry.distribution.request import Value

_Level = Annotated[int, Field(ge=1, le=200)]


class MostOfLevel(Value):
    """As much as can be had of one addition level."""

    kind: Literal["most_of_level"]
    level: _Level


class MonoToMulti(Value):
    """The highest conversion at which mono : multi, x_1 / Σ_{k≥2} x_k, is at least ``ratio``."""

    kind: Literal["mono_to_multi"]
    ratio: Annotated[float, Field(gt=0, le=1e9, allow_inf_nan=False)]


class Uptake(Value):
    """A mean number of additions per cage."""

    kind: Literal["uptake"]
    value: Annotated[float, Field(gt=0, le=200, allow_inf_nan=False)]


class Band(Value):
    """As much as can be had within levels ``lowest`` to ``highest``, both included."""

    kind: Literal["band"]
    lowest: _Level
    highest: _Level

    @model_validator(mode="after")
    def _in_order(self) -> Band:
        if self.lowest > self.highest:
            raise ValueError(
                f"A band from {self.lowest} to {self.highest} runs backwards; give the lower level "
                "first."
            )
        return self


Objective = Annotated[MostOfLevel | MonoToMulti | Uptake | Band, Field(discriminator="kind")]


def wanted_levels(objective: Objective) -> tuple[int, int] | None:
    """Return the lowest and highest level wanted; None for a ratio or an uptake."""
    if isinstance(objective, MostOfLevel):
        return objective.level, objective.level
    if isinstance(objective, Band):
        return objective.lowest, objective.highest
    return None


def objective_value(objective: Objective, composition: FloatArray, uptake: float) -> float | None:
    """Return what the objective counts: a mole fraction, the ratio (None: no multi), the uptake."""
    levels = wanted_levels(objective)
    if levels is not None:
        return float(composition[levels[0] : levels[1] + 1].sum())
    return mono_to_multi(composition) if isinstance(objective, MonoToMulti) else uptake
