"""The calculator ``curve``: composition against equivalents, for a drawing."""

from __future__ import annotations

from typing import Annotated

import numpy as np
from pydantic import Field, model_validator

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel
from reactions.chemistry.distribution.request import Efficiency, ModelFields, Value

_DEFAULT_HIGHEST_UPTAKE = 3.0


class CurveRequest(ModelFields):
    """A model, the reagent efficiency, and how far and how finely to draw."""

    reagent_efficiency: Efficiency = 1.0
    highest_equivalents: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)] | None = None
    points: Annotated[int, Field(ge=2, le=1001)] = 121
    highest_level_shown: Annotated[int, Field(ge=1, le=200)] = 6

    @model_validator(mode="after")
    def _levels_fit_the_sites(self) -> CurveRequest:
        if self.highest_level_shown > self.sites:
            return self.model_copy(update={"highest_level_shown": self.sites})
        return self


class CurveResult(Value):
    """At each of the ``equivalents``: x_0 … x_shown, and all levels above as ``higher``.

    Points follow each other by equal steps of exposure or uptake, so their equivalents need not be
    evenly spaced.
    """

    equivalents: list[float]
    mole_fraction: list[list[float]]
    higher: list[float]


def curve(request: CurveRequest) -> CurveResult:
    """Return compositions from no reagent up to ``highest_equivalents``.

    Without it, up to an uptake of 3, or the highest level that can be reached if that is less.
    """
    model = request.composition_model
    highest_uptake = _highest_uptake(request, model)
    uptakes, compositions = _points(model, highest_uptake, request.points)
    shown = request.highest_level_shown + 1
    return CurveResult(
        equivalents=(uptakes / request.reagent_efficiency).tolist(),
        mole_fraction=compositions[:, :shown].tolist(),
        higher=compositions[:, shown:].sum(axis=1).tolist(),
    )


def _highest_uptake(request: CurveRequest, model: CompositionModel) -> float:
    reachable = model.highest_level * (1 - 1e-6)
    if request.highest_equivalents is None:
        return min(_DEFAULT_HIGHEST_UPTAKE, reachable)
    uptake = request.highest_equivalents * request.reagent_efficiency
    return uptake if model.name == "poisson" else min(uptake, reachable)


def _points(
    model: CompositionModel, highest_uptake: float, count: int
) -> tuple[FloatArray, FloatArray]:
    """Return uptakes and compositions; in the sequential model parametrised by the exposure.

    Inverting the uptake at every point would cost a root search each; stepping through exposures
    gives points on the same curve.
    """
    if model.name != "sequential":
        uptakes = np.linspace(0.0, highest_uptake, count)
        return uptakes, np.array([model.composition_at_uptake(uptake) for uptake in uptakes])
    last = model.exposure_for_uptake(highest_uptake)
    # Dense where the uptake rises fast, at the start: e^τ-like spacing for long exposures.
    exposures = np.expm1(np.linspace(0.0, np.log1p(last), count))
    exposures[-1] = last
    compositions = model.compositions(exposures)
    levels = np.arange(compositions.shape[1])
    return compositions @ levels, compositions
