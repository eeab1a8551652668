"""The calculator ``plan``: equivalents for an objective, what they give, and what they cost."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import Field, model_validator

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel
from reactions.chemistry.distribution.request import (
    DistributionResult,
    Efficiency,
    ModelFields,
    Value,
    result_of,
)
from reactions.chemistry.masses import cage_molar_mass_g_per_mol
from reactions.chemistry.planning.objectives import (
    Band,
    MonoToMulti,
    MostOfLevel,
    Objective,
    best_exposure,
    objective_value,
)

# How far the reagent is varied to show how sharp an optimum is.
_VARIATION = 0.05
_Mass = Annotated[float, Field(gt=0, le=1e9, allow_inf_nan=False)]


class PlanRequest(ModelFields):
    """A model, an objective and the reagent efficiency ε (share of the reagent that adds).

    For masses give ``cage`` with ``cage_mass_mg`` (as weighed, of purity ``cage_purity``) and
    ``addition_mass_g_per_mol``, the mass that one addition adds to the cage.
    """

    objective: Objective
    reagent_efficiency: Efficiency = 1.0
    cage: Annotated[str, Field(min_length=2, max_length=40)] = "C60"
    cage_mass_mg: _Mass | None = None
    cage_purity: Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)] = 1.0
    addition_mass_g_per_mol: Annotated[float, Field(gt=0, le=1e5, allow_inf_nan=False)] | None = (
        None
    )

    @model_validator(mode="after")
    def _levels_fit_the_sites(self) -> PlanRequest:
        wanted = 0
        if isinstance(self.objective, MostOfLevel):
            wanted = self.objective.level
        elif isinstance(self.objective, Band):
            wanted = self.objective.highest
        if wanted > self.sites:
            raise ValueError(
                f"Level {wanted} is above the {self.sites} sites of this cage; give at most "
                f"{self.sites}."
            )
        if self.model == "poisson" and wanted == self.sites:
            raise ValueError(
                f"With {self.sites} sites the Poisson model counts all from {wanted} upward as one "
                "level; give more sites, or choose a model with a last level."
            )
        return self


class Neighbour(Value):
    """The composition with a little less or more reagent."""

    equivalents: float
    mole_fraction: list[float]


class PlanResult(DistributionResult):
    """The plan.

    ``conversion`` is 1 − x_0. ``level_mass_mg`` is the mass expected of each level, and
    ``unreacted_cage_mg`` that of level 0; both None unless the masses were given. Where the
    objective can't be met, ``objective_met`` is False and ``message`` says what the best is.
    """

    equivalents: float
    conversion: float
    objective_value: float | None
    objective_met: bool
    message: str
    reagent_efficiency: float
    level_mass_mg: list[float] | None
    unreacted_cage_mg: float | None
    sensitivity: list[Neighbour]


def plan(request: PlanRequest) -> PlanResult:
    """Return the equivalents that serve the objective best, with composition, masses and cost.

    Raises ValueError (``StructureError``) for a cage whose mass can't be told.
    """
    model = request.composition_model
    optimum = best_exposure(model, request.objective)
    composition = model.composition(optimum.exposure)
    uptake = _uptake(model, optimum.exposure)
    base = result_of(model, optimum.exposure, composition, uptake)
    equivalents = uptake / request.reagent_efficiency
    masses = _level_masses_mg(request, composition)
    value = objective_value(request.objective, composition, uptake)
    return PlanResult(
        **base.model_dump(),
        equivalents=equivalents,
        conversion=1.0 - base.unreacted,
        objective_value=value,
        objective_met=not optimum.shortfall,
        message=optimum.shortfall or _remark(request, value),
        reagent_efficiency=request.reagent_efficiency,
        level_mass_mg=masses,
        unreacted_cage_mg=None if masses is None else masses[0],
        sensitivity=[
            _neighbour(model, request, equivalents * factor)
            for factor in (1 - _VARIATION, 1 + _VARIATION)
        ],
    )


def _uptake(model: CompositionModel, exposure: float) -> float:
    return float(model.highest_level) if math.isinf(exposure) else model.uptake(exposure)


def _neighbour(model: CompositionModel, request: PlanRequest, equivalents: float) -> Neighbour:
    """Return the composition at other equivalents; beyond the last level nothing more happens."""
    uptake = equivalents * request.reagent_efficiency
    if model.name != "poisson":
        uptake = min(uptake, float(model.highest_level))
    return Neighbour(
        equivalents=equivalents, mole_fraction=model.composition_at_uptake(uptake).tolist()
    )


def _level_masses_mg(request: PlanRequest, composition: FloatArray) -> list[float] | None:
    """Return x_k · n(cage) · (M(cage) + k · M(addition)) for each level, in mg."""
    if request.cage_mass_mg is None or request.addition_mass_g_per_mol is None:
        return None
    cage = cage_molar_mass_g_per_mol(request.cage)
    charged_mmol = request.cage_mass_mg * request.cage_purity / cage
    return [
        share * charged_mmol * (cage + level * request.addition_mass_g_per_mol)
        for level, share in enumerate(composition.tolist())
    ]


def _remark(request: PlanRequest, value: float | None) -> str:
    if isinstance(request.objective, MonoToMulti) and value is None:
        return "Nothing adds twice in this model, so the reagent may run to full conversion."
    return ""
