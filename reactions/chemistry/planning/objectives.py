"""What a plan can aim at, and the exposure that serves it best.

With T_k the time at which a cage reaches level k, all three searched objectives have one optimum,
because T_k is a sum of independent exponential times and so has a log-concave density:

    most of levels a…b   P(T_a ≤ τ < T_{b+1}) rises while r_{a−1} x_{a−1} > r_b x_b, then falls
    mono : multi         P(T_2 ≤ τ) / P(T_1 ≤ τ) rises with τ, so the ratio falls with conversion
    uptake               Σ k x_k rises with τ

(Shaked, Shanthikumar, Stochastic Orders, 2007, on likelihood-ratio order; from memory.) Most of
level k is the band from k to k.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Annotated, Literal

from pydantic import Field, model_validator

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel, mono_to_multi, solve
from reactions.chemistry.distribution.request import Value

_SMALLEST_EXPOSURE = 1e-18
_LONGEST_EXPOSURE = 1e300
_Level = Annotated[int, Field(ge=1, le=200)]


class MostOfLevel(Value):
    """As much as can be had of one addition level."""

    kind: Literal["most_of_level"]
    level: _Level


class MonoToMulti(Value):
    """The highest conversion at which mono : multi is still at least ``ratio``."""

    kind: Literal["mono_to_multi"]
    ratio: Annotated[float, Field(gt=0, le=1e9, allow_inf_nan=False)]


class Uptake(Value):
    """A mean number of additions per cage."""

    kind: Literal["uptake"]
    value: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)]


class Band(Value):
    """As much as can be had within levels ``lowest`` to ``highest``, both included."""

    kind: Literal["band"]
    lowest: _Level
    highest: _Level

    @model_validator(mode="after")
    def _in_order(self) -> Band:
        if self.lowest > self.highest:
            raise ValueError(
                f"The band runs from {self.lowest} to {self.highest}; give the lower level first."
            )
        return self


Objective = Annotated[MostOfLevel | MonoToMulti | Uptake | Band, Field(discriminator="kind")]


@dataclass(frozen=True)
class Optimum:
    """The exposure that serves an objective best, and why it falls short where it does."""

    exposure: float
    shortfall: str = ""


def best_exposure(model: CompositionModel, objective: Objective) -> Optimum:
    """Return the exposure τ (0 to infinity) that serves ``objective`` best in ``model``.

    An objective that can't be met gives the best that can be had and says what stands in the way.
    Raises ValueError for a level above the sites.
    """
    if isinstance(objective, MostOfLevel):
        return _most_within(model, objective.level, objective.level)
    if isinstance(objective, Band):
        return _most_within(model, objective.lowest, objective.highest)
    if isinstance(objective, MonoToMulti):
        return _highest_conversion(model, objective.ratio)
    if model.name != "poisson" and objective.value > model.highest_level:
        return Optimum(
            math.inf,
            f"An uptake of {objective.value:g} can't be reached; the most is "
            f"{model.highest_level}, with every level filled as far as it goes.",
        )
    return Optimum(model.exposure_for_uptake(objective.value))


def objective_value(objective: Objective, composition: FloatArray, uptake: float) -> float | None:
    """Return what the objective counts: a mole fraction, the ratio, or the uptake."""
    if isinstance(objective, MostOfLevel):
        return float(composition[objective.level])
    if isinstance(objective, Band):
        return float(composition[objective.lowest : objective.highest + 1].sum())
    if isinstance(objective, MonoToMulti):
        return mono_to_multi(composition)
    return uptake


def _most_within(model: CompositionModel, lowest: int, highest: int) -> Optimum:
    if highest > model.sites:
        raise ValueError(
            f"Level {highest} is above the {model.sites} sites of this cage; give at most "
            f"{model.sites}."
        )
    if lowest > model.highest_level:
        return Optimum(
            0.0,
            f"Level {lowest} can't be reached: the attenuation blocks every addition after "
            f"{model.highest_level}, so the best is 0 % whatever the reagent.",
        )
    if highest >= model.highest_level:
        return Optimum(math.inf)
    entering, leaving = model.chain_rates[lowest - 1], model.chain_rates[highest]

    def still_rising(exposure: float) -> float:
        composition = model.composition(exposure)
        gain = entering * composition[lowest - 1]
        loss = leaving * composition[highest]
        return float((gain - loss) / (gain + loss)) if gain + loss > 0 else -1.0

    return Optimum(_falling_root(still_rising, float(lowest)))


def _highest_conversion(model: CompositionModel, ratio: float) -> Optimum:
    if model.highest_level < 2:
        return Optimum(math.inf)

    def excess(exposure: float) -> float:
        composition = model.composition(exposure)
        multi = float(composition[2:].sum())
        mono = float(composition[1])
        return (mono - ratio * multi) / (mono + ratio * multi) if mono + multi > 0 else 1.0

    return Optimum(_falling_root(excess, 1.0))


def _falling_root(function: Callable[[float], float], start: float) -> float:
    """Return where a function of the exposure, positive at first, turns negative."""
    upper = start
    while function(upper) > 0:
        upper *= 2
        if upper > _LONGEST_EXPOSURE:
            return math.inf
    lower = upper / 2
    while function(lower) < 0:
        lower /= 2
        if lower < _SMALLEST_EXPOSURE:
            return lower
    return solve(function, lower, upper)
