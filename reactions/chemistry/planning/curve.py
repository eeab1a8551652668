"""The calculator ``curve``: composition against equivalents, for a drawing."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from reactions.chemistry.distribution.models import CompositionModel
from reactions.chemistry.distribution.request import Efficiency, ModelFields, Value

_DEFAULT_HIGHEST_UPTAKE = 3.0
# The last level is neared without end; a curve stops this far short of it, relatively.
_SHORT_OF_THE_END = 1e-6


class CurveRequest(ModelFields):
    """A model, the reagent efficiency, and how far and how finely to draw."""

    reagent_efficiency: Efficiency = 1.0
    highest_equivalents: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)] | None = None
    points: Annotated[int, Field(ge=2, le=1001)] = 121
    highest_level_shown: Annotated[int, Field(ge=1, le=200)] = 6


class CurveResult(Value):
    """At each of the ``equivalents``: x_0 … x_shown, and all levels above as ``higher``.

    ``shown`` is the highest level shown, or the sites if those are fewer. In the sequential model
    points follow each other by steps of exposure, so their equivalents are not evenly spaced.
    """

    equivalents: list[float]
    mole_fraction: list[list[float]]
    higher: list[float]


def curve(request: CurveRequest) -> CurveResult:
    """Return compositions from no reagent up to ``highest_equivalents``.

    Without it, up to an uptake of 3; in either case no further than all levels that can be reached.
    """
    model = request.composition_model
    uptakes, compositions = model.along_uptakes(_highest_uptake(request, model), request.points)
    shown = min(request.highest_level_shown, request.sites) + 1
    return CurveResult(
        equivalents=(uptakes / request.reagent_efficiency).tolist(),
        mole_fraction=compositions[:, :shown].tolist(),
        higher=compositions[:, shown:].sum(axis=1).tolist(),
    )


def _highest_uptake(request: CurveRequest, model: CompositionModel) -> float:
    wanted = (
        _DEFAULT_HIGHEST_UPTAKE
        if request.highest_equivalents is None
        else request.highest_equivalents * request.reagent_efficiency
    )
    return min(wanted, model.highest_level * (1 - _SHORT_OF_THE_END))
