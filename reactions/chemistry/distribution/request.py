"""The calculator ``distribution``: composition over addition levels from what is known."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import BaseModel, ConfigDict, Field, model_validator

from reactions.chemistry.distribution.chain import FloatArray
from reactions.chemistry.distribution.models import CompositionModel, ModelName, mono_to_multi

_Factor = Annotated[float, Field(ge=0, le=1e3, allow_inf_nan=False)]
_NotNegative = Annotated[float, Field(ge=0, allow_inf_nan=False)]
Efficiency = Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)]


class Value(BaseModel):
    """A frozen value that refuses what it doesn't know."""

    model_config = ConfigDict(frozen=True, extra="forbid")


class ModelFields(Value):
    """Which composition model.

    ``sites`` is N. ``attenuation`` belongs to the sequential model: one factor for each addition
    present, or a list with the factor that the first, second … addition brings (at most N of them;
    additions beyond its end bring no further factor).
    """

    model: ModelName
    sites: Annotated[int, Field(ge=1, le=200)] = 30
    attenuation: _Factor | Annotated[list[_Factor], Field(min_length=1, max_length=200)] = 1.0

    @model_validator(mode="after")
    def _attenuation_fits(self) -> ModelFields:
        if self.model != "sequential" and self.attenuation != 1.0:
            raise ValueError(
                f"The model {self.model} knows no attenuation; choose sequential, or leave it out."
            )
        if isinstance(self.attenuation, list) and len(self.attenuation) > self.sites:
            raise ValueError(
                f"{len(self.attenuation)} attenuations are more than the {self.sites} sites; give "
                f"at most {self.sites}."
            )
        return self

    @property
    def composition_model(self) -> CompositionModel:
        """Return the model itself."""
        attenuation = self.attenuation
        return CompositionModel(
            self.model,
            self.sites,
            tuple(attenuation) if isinstance(attenuation, list) else attenuation,
        )


class DistributionRequest(ModelFields):
    """A model and one of ``uptake`` (mean additions per cage), ``exposure`` (τ), ``equivalents``.

    Equivalents (mol reagent per mol cage) come with ``reagent_efficiency`` ε: the uptake is E·ε.
    """

    uptake: _NotNegative | None = None
    exposure: Annotated[float, Field(ge=0, le=1e300, allow_inf_nan=False)] | None = None
    equivalents: _NotNegative | None = None
    reagent_efficiency: Efficiency | None = None

    @model_validator(mode="after")
    def _one_is_given(self) -> DistributionRequest:
        given = [
            name
            for name in ("uptake", "exposure", "equivalents")
            if getattr(self, name) is not None
        ]
        if len(given) != 1:
            named = " and ".join(given) or "none of them"
            raise ValueError(
                f"Give one of uptake, exposure or equivalents; {named} "
                f"{'is' if not given else 'are'} given."
            )
        if (self.equivalents is None) != (self.reagent_efficiency is None):
            raise ValueError(
                "Equivalents and reagent_efficiency go together: the uptake is their product."
            )
        self._check_uptake()
        return self

    def _check_uptake(self) -> None:
        uptake = self.known_uptake
        if uptake is None:
            return
        highest = self.composition_model.highest_level
        if self.model != "poisson" and uptake > highest:
            what = "sites of this cage" if highest == self.sites else "levels that can be reached"
            raise ValueError(
                f"An uptake of {uptake:g} is more than the {highest} {what}; give {highest} or less."
            )
        if self.model == "poisson" and uptake > 1e6:
            raise ValueError(f"An uptake of {uptake:g} is beyond any cage; give at most a million.")

    @property
    def known_uptake(self) -> float | None:
        """Return the uptake that was given, directly or through equivalents; None with exposure."""
        if self.equivalents is not None and self.reagent_efficiency is not None:
            return self.equivalents * self.reagent_efficiency
        return self.uptake


class DistributionResult(Value):
    """The composition: ``mole_fraction`` is x_0 … x_N (for Poisson x_N stands for N and above).

    ``exposure`` is None for Poisson and where it would be infinite; ``mono_to_multi`` is None when
    nothing has two additions.
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
    exposure = model.exposure_for_uptake(uptake)
    return result_of(model, exposure, model.composition_at_uptake(uptake), uptake)


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
