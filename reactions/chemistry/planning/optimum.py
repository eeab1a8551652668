"""The exposure and uptake that serve an objective best.

With T_k the time at which a cage reaches level k, each objective has one optimum, whatever the
attenuation, because T_k is a sum of independent exponential times and so has a log-concave density:

    most of levels a…b   P(T_a ≤ τ < T_{b+1}) rises while r_{a−1} x_{a−1} > r_b x_b, then falls
    mono : multi         P(T_2 ≤ τ) / P(T_1 ≤ τ) rises with τ, so the ratio falls with conversion
    uptake               Σ k x_k rises with τ

(Shaked, Shanthikumar, Stochastic Orders, 2007, on likelihood-ratio order; from memory.) Most of
level k is the band from k to k.

Where levels a…b peak, r_{a−1} x_{a−1} = r_b x_b. For independent sites that is

    p / (1−p) = geometric mean of i / (N−i) over i = a…b, so p = k/N for level k alone,

and for Poisson m = geometric mean of a…b (both derived from the laws).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel, multi_share
from reactions.chemistry.planning.objectives import (
    MonoToMulti,
    Objective,
    Uptake,
    wanted_levels,
)

# Kept above the ratio asked for, so that rounding never takes the plan below it.
_RATIO_MARGIN = 1e-13


@dataclass(frozen=True)
class Optimum:
    """The exposure τ (0 to infinity) and the uptake at it.

    ``shortfall`` says why an objective can't be met; it is empty for one that is.
    """

    exposure: float
    uptake: float
    shortfall: str = ""


def best_of(model: CompositionModel, objective: Objective) -> Optimum:
    """Return what serves ``objective`` best in ``model``.

    An objective that can't be met gives the best that can be had and says what stands in the way.
    Levels and uptakes are within the model's sites.
    """
    levels = wanted_levels(objective)
    if levels is not None:
        return _most_within(model, *levels)
    if isinstance(objective, MonoToMulti):
        return _highest_conversion(model, objective.ratio)
    if isinstance(objective, Uptake):
        return _at_uptake(model, objective.value)
    raise AssertionError(objective)


def _at_uptake(model: CompositionModel, uptake: float) -> Optimum:
    if uptake <= model.highest_level:
        return Optimum(model.exposure_for_uptake(uptake), uptake)
    return Optimum(
        math.inf,
        float(model.highest_level),
        f"An uptake of {uptake:g} can't be reached: the attenuation blocks every addition after "
        f"{model.highest_level}.",
    )


def _most_within(model: CompositionModel, lowest: int, highest: int) -> Optimum:
    if lowest > model.highest_level:
        return Optimum(
            0.0,
            0.0,
            f"Level {lowest} can't be reached: the attenuation blocks every addition after "
            f"{model.highest_level}.",
        )
    if highest >= model.highest_level:
        return Optimum(math.inf, float(model.highest_level))
    if model.has_equal_sites or model.name == "poisson":
        return _at_uptake(model, _peak_uptake(model, lowest, highest))
    return _at(model, model.crossing(_still_rising(model, lowest, highest)))


def _peak_uptake(model: CompositionModel, lowest: int, highest: int) -> float:
    """Return the uptake at which equal sites, or Poisson, hold most within two levels."""
    if lowest == highest:
        return float(lowest)
    levels = range(lowest, highest + 1)
    if model.name == "poisson":
        return math.exp(math.fsum(math.log(i) for i in levels) / len(levels))
    sites = model.sites
    odds = math.exp(math.fsum(math.log(i / (sites - i)) for i in levels) / len(levels))
    return sites * odds / (1 + odds)


def _still_rising(
    model: CompositionModel, lowest: int, highest: int
) -> Callable[[FloatArray], float]:
    """Return the share of levels lowest…highest as it changes: positive while it rises."""
    entering, leaving = model.chain_rates[lowest - 1], model.chain_rates[highest]

    def change(composition: FloatArray) -> float:
        gain = entering * composition[lowest - 1]
        loss = leaving * composition[highest]
        if gain + loss > 0:
            return float((gain - loss) / (gain + loss))
        # Neither can be told from nothing: all cages are still below, or already above.
        return 1.0 if composition[:lowest].sum() > composition[highest:].sum() else -1.0

    return change


def _highest_conversion(model: CompositionModel, ratio: float) -> Optimum:
    if model.highest_level < 2:
        return Optimum(math.inf, float(model.highest_level))
    asked = ratio * (1 + _RATIO_MARGIN)

    def excess(composition: FloatArray) -> float:
        mono, multi = float(composition[1]), asked * multi_share(composition)
        return (mono - multi) / (mono + multi) if mono + multi > 0 else 1.0

    return _at(model, model.crossing(excess))


def _at(model: CompositionModel, exposure: float) -> Optimum:
    uptake = float(model.highest_level) if math.isinf(exposure) else model.uptake(exposure)
    return Optimum(exposure, uptake)
