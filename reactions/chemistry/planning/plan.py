"""The calculator ``plan``: equivalents for an objective, what they give, and what they cost."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import Field, ValidationInfo, field_validator

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
    MonoToMulti,
    Objective,
    Uptake,
    objective_value,
    wanted_levels,
)
from reactions.chemistry.planning.optimum import Optimum, best_of
from reactions.chemistry.shares import Share

# How far the reagent is varied to show how sharp an optimum is.
_VARIATION = 0.05
_Mass = Annotated[float, Field(gt=0, le=1e9, allow_inf_nan=False)]


class PlanRequest(ModelFields):
    """A model, an objective and the reagent efficiency ε (share of the reagent that adds).

    For masses give ``cage_mass_mg`` (as weighed, of purity ``cage_purity``), ``cage`` (C60, C70,
    C84, Sc3N@C80 and the like) and ``addition_mass_g_per_mol``, the mass that one addition adds to
    the cage.
    """

    objective: Objective
    reagent_efficiency: Efficiency = 1.0
    cage: Annotated[str, Field(min_length=2, max_length=40)] = "C60"
    cage_mass_mg: _Mass | None = None
    cage_purity: Share = 1.0
    addition_mass_g_per_mol: Annotated[float, Field(gt=0, le=1e5, allow_inf_nan=False)] | None = (
        None
    )

    @field_validator("objective")
    @classmethod
    def _objective_fits(cls, objective: Objective, info: ValidationInfo) -> Objective:
        sites, model = info.data.get("sites"), info.data.get("model")
        if sites is not None:
            _check_levels(objective, sites)
            if model == "poisson":
                _check_poisson(objective, sites)
        return objective

    @field_validator("cage")
    @classmethod
    def _cage_has_a_mass(cls, cage: str) -> str:
        cage_molar_mass_g_per_mol(cage)
        return cage


class Neighbour(Value):
    """The composition with a little less or more reagent."""

    equivalents: float
    mole_fraction: list[float]


class PlanResult(DistributionResult):
    """The plan.

    ``conversion`` is 1 − x_0. ``objective_value`` is what the objective counts: a mole fraction,
    the ratio mono : multi (None where nothing adds twice), or the uptake. ``level_mass_mg`` is the
    mass expected of each level 0 … N, None unless the masses were given; ``unreacted_cage_mg`` is
    that of level 0 and needs the cage's mass only. Where the objective can't be met,
    ``objective_met`` is False and ``message`` says what the best is. ``sensitivity`` holds the plan
    with 5 % less and with 5 % more reagent.
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
    """Return the equivalents that serve the objective best, with composition, masses and cost."""
    model = request.composition_model
    optimum = best_of(model, request.objective)
    composition = (
        model.composition_at_uptake(optimum.uptake)
        if model.has_equal_sites
        else model.composition(optimum.exposure)
    )
    base = result_of(model, optimum.exposure, composition, optimum.uptake)
    equivalents = optimum.uptake / request.reagent_efficiency
    value = objective_value(request.objective, composition, optimum.uptake)
    charged_mg = (
        None if request.cage_mass_mg is None else request.cage_mass_mg * request.cage_purity
    )
    return PlanResult(
        **base.model_dump(),
        equivalents=equivalents,
        conversion=float(composition[1:].sum()),
        objective_value=value,
        objective_met=not optimum.shortfall,
        message=_message(request, optimum, value, equivalents),
        reagent_efficiency=request.reagent_efficiency,
        level_mass_mg=_level_masses_mg(request, charged_mg, composition),
        unreacted_cage_mg=None if charged_mg is None else base.unreacted * charged_mg,
        sensitivity=[
            _neighbour(model, request, equivalents * factor)
            for factor in (1 - _VARIATION, 1 + _VARIATION)
        ],
    )


def _check_levels(objective: Objective, sites: int) -> None:
    levels = wanted_levels(objective)
    if levels is not None and levels[1] > sites:
        raise ValueError(
            f"Level {levels[1]} is above the {sites} sites of this cage; give at most {sites}."
        )
    if isinstance(objective, Uptake) and objective.value > sites:
        raise ValueError(
            f"An uptake of {objective.value:g} is more than the {sites} sites of this cage; give "
            f"at most {sites}."
        )


def _check_poisson(objective: Objective, sites: int) -> None:
    """Refuse what the last level of the Poisson model, which stands for all above, can't answer."""
    levels = wanted_levels(objective)
    last = 2 if isinstance(objective, MonoToMulti) else levels[1] + 1 if levels else 0
    if last > sites:
        raise ValueError(
            f"With {sites} sites the Poisson model counts all from {sites} upward as one level; "
            f"give at least {last} sites, or choose another model."
        )


def _neighbour(model: CompositionModel, request: PlanRequest, equivalents: float) -> Neighbour:
    """Return the composition at other equivalents; beyond the last level nothing more happens."""
    uptake = equivalents * request.reagent_efficiency
    if model.name != "poisson":
        uptake = min(uptake, float(model.highest_level))
    return Neighbour(
        equivalents=equivalents, mole_fraction=model.composition_at_uptake(uptake).tolist()
    )


def _level_masses_mg(
    request: PlanRequest, charged_mg: float | None, composition: FloatArray
) -> list[float] | None:
    """Return x_k · n(cage) · (M(cage) + k · M(addition)) for each level, in mg."""
    if charged_mg is None or request.addition_mass_g_per_mol is None:
        return None
    cage = cage_molar_mass_g_per_mol(request.cage)
    charged_mmol = charged_mg / cage
    return [
        share * charged_mmol * (cage + level * request.addition_mass_g_per_mol)
        for level, share in enumerate(composition.tolist())
    ]


def _message(
    request: PlanRequest, optimum: Optimum, value: float | None, equivalents: float
) -> str:
    """Return what the person has to know beside the numbers; empty where they say it all."""
    if optimum.shortfall:
        best = f"an uptake of {value:g}" if isinstance(request.objective, Uptake) else "0 %"
        where = f"at {equivalents:.4g} equivalents" if equivalents else "whatever the reagent"
        return f"{optimum.shortfall} The best is {best}, {where}."
    if math.isinf(optimum.exposure):
        end = "all the cages end at the last level that can be reached"
        if isinstance(request.objective, MonoToMulti):
            return f"Nothing adds twice in this model, so the reagent may run on: {end}."
        return f"This is the end of the reaction, neared but never quite reached: {end}."
    return ""
