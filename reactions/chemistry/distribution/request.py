"""The calculator ``distribution``: composition over addition levels from what is known."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import (
    BaseModel,
    ConfigDict,
    Discriminator,
    Field,
    Tag,
    ValidationInfo,
    field_validator,
    model_validator,
)

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel, ModelName, mono_to_multi
from reactions.chemistry.shares import Share

_Factor = Annotated[float, Field(ge=0, le=1e3, allow_inf_nan=False)]
_NotNegative = Annotated[float, Field(ge=0, allow_inf_nan=False)]
_Factors = Annotated[list[_Factor], Field(min_length=1, max_length=200)]


def _kind_of_attenuation(value: object) -> str:
    return "factors" if isinstance(value, (list, tuple)) else "factor"


# Told apart before it is looked at, so that a bad factor is not also refused as a bad list.
_Attenuation = Annotated[
    Annotated[_Factor, Tag("factor")] | Annotated[_Factors, Tag("factors")],
    Discriminator(_kind_of_attenuation),
]
Efficiency = Share  # of the reagent charged, what ends on cages
# Equivalents worked out from an uptake may bring it back this much too large, relatively.
_ROUNDING = 1e-12


class Value(BaseModel):
    """A frozen value that refuses what it doesn't know."""

    model_config = ConfigDict(frozen=True, extra="forbid")


class ModelFields(Value):
    """Which composition model.

    ``sites`` is N (1 to 200). ``attenuation`` belongs to the sequential model: one factor (0 to
    1000) that each addition present brings to the rate of the next, or a list with the factor that
    the first, second … addition brings. A list has N factors at most; additions beyond its end
    bring no further factor.
    """

    model: ModelName
    sites: Annotated[int, Field(ge=1, le=200)] = 30
    attenuation: _Attenuation = 1.0

    @field_validator("attenuation")
    @classmethod
    def _attenuation_fits(
        cls, attenuation: float | list[float], info: ValidationInfo
    ) -> float | list[float]:
        model, sites = info.data.get("model"), info.data.get("sites")
        factors = attenuation if isinstance(attenuation, list) else [attenuation]
        if model not in (None, "sequential") and any(factor != 1.0 for factor in factors):
            raise ValueError(
                f"The model {model} knows no attenuation; choose sequential, or leave it out."
            )
        if isinstance(attenuation, list) and sites is not None and len(attenuation) > sites:
            raise ValueError(
                f"{len(attenuation)} attenuations are more than the {sites} sites; give at most "
                f"{sites}."
            )
        return attenuation

    @property
    def composition_model(self) -> CompositionModel:
        """Return the model itself."""
        return _model_of(self.model, self.sites, self.attenuation)


class DistributionRequest(ModelFields):
    """A model and one of ``uptake`` (mean additions per cage), ``exposure`` (τ), ``equivalents``.

    Equivalents (mol reagent per mol cage) come with ``reagent_efficiency`` ε: the uptake is E·ε.
    An uptake is at most the highest level that can be reached, which is N unless an attenuation of
    0 blocks the way; an exposure has no end. For Poisson the exposure is the uptake.
    """

    uptake: _NotNegative | None = None
    exposure: Annotated[float, Field(ge=0, le=1e300, allow_inf_nan=False)] | None = None
    reagent_efficiency: Efficiency | None = None
    equivalents: _NotNegative | None = None

    @field_validator("uptake")
    @classmethod
    def _uptake_fits(cls, uptake: float | None, info: ValidationInfo) -> float | None:
        if uptake is not None:
            check_uptake(uptake, info, f"An uptake of {uptake:g}", per_unit=1.0)
        return uptake

    @field_validator("equivalents")
    @classmethod
    def _equivalents_fit(cls, equivalents: float | None, info: ValidationInfo) -> float | None:
        efficiency = info.data.get("reagent_efficiency")
        if equivalents is not None and efficiency is not None:
            what = (
                f"An uptake of {equivalents * efficiency:g} ({equivalents:g} equivalents at a "
                f"reagent efficiency of {efficiency:g})"
            )
            check_uptake(equivalents * efficiency, info, what, per_unit=efficiency)
        return equivalents

    @model_validator(mode="after")
    def _one_is_given(self) -> DistributionRequest:
        given = [
            name
            for name in ("uptake", "exposure", "equivalents")
            if getattr(self, name) is not None
        ]
        if len(given) != 1:
            named = f"{' and '.join(given)} are given" if given else "none of them is given"
            raise ValueError(f"Give one of uptake, exposure or equivalents; {named}.")
        if (self.equivalents is None) != (self.reagent_efficiency is None):
            raise ValueError(
                "Equivalents and reagent_efficiency go together: the uptake is their product."
            )
        return self

    @property
    def known_uptake(self) -> float | None:
        """Return the uptake that was given, directly or through equivalents; None with exposure."""
        if self.equivalents is not None and self.reagent_efficiency is not None:
            return self.equivalents * self.reagent_efficiency
        return self.uptake


class DistributionResult(Value):
    """The composition: ``mole_fraction`` is x_0 … x_N (for Poisson x_N stands for N and above).

    ``uptake`` is the mean number of additions per cage; for Poisson that of the uncut law.
    ``exposure`` is None for Poisson, and where it would be infinite: at an uptake of all levels
    that can be reached. ``unreacted`` is x_0. ``mono_to_multi`` is None when nothing adds twice.
    """

    mole_fraction: list[float]
    uptake: float
    exposure: float | None
    unreacted: float
    mono_to_multi: float | None


def distribution(request: DistributionRequest) -> DistributionResult:
    """Return the composition that a model gives.

    Absolute error below 1e-12 in every mole fraction, their sum 1 within 1e-13, for any N from 1
    to 200.
    """
    model = request.composition_model
    uptake = request.known_uptake
    if uptake is None:
        exposure = request.exposure or 0.0
        return result_of(model, exposure, model.composition(exposure), model.uptake(exposure))
    uptake = min(uptake, float(model.highest_level))
    exposure = model.exposure_for_uptake(uptake)
    composition = (
        model.composition_at_uptake(uptake)
        if model.has_equal_sites
        else model.composition(exposure)
    )
    return result_of(model, exposure, composition, uptake)


def result_of(
    model: CompositionModel, exposure: float, composition: FloatArray, uptake: float
) -> DistributionResult:
    """Return a composition as the calculators give it."""
    return DistributionResult(
        mole_fraction=composition.tolist(),
        uptake=uptake,
        exposure=None if model.name == "poisson" or math.isinf(exposure) else exposure,
        unreacted=float(composition[0]),
        mono_to_multi=mono_to_multi(composition),
    )


def check_uptake(uptake: float, info: ValidationInfo, what: str, *, per_unit: float) -> None:
    """Raise ValueError when the model being validated can't take this uptake.

    ``what`` names the value typed; one unit of it brings an uptake of ``per_unit``.
    """
    if not {"model", "sites", "attenuation"} <= set(info.data):
        return
    model = _model_of(info.data["model"], info.data["sites"], info.data["attenuation"])
    if uptake <= model.highest_level * (1 + _ROUNDING):
        return
    limit = (
        f"{model.sites} sites of this cage"
        if model.highest_level == model.sites
        else f"{model.highest_level} additions that this attenuation allows"
    )
    most = math.floor(model.highest_level / per_unit * 1e4) / 1e4
    raise ValueError(f"{what} is more than the {limit}; give at most {most:.12g}.")


def _model_of(name: ModelName, sites: int, attenuation: float | list[float]) -> CompositionModel:
    return CompositionModel(
        name, sites, tuple(attenuation) if isinstance(attenuation, list) else attenuation
    )
