"""What the services take: typed, in fixed units, checked at the edge.

The pages build these from what a person typed, the API from JSON, the import from a row.
"""

from __future__ import annotations

from datetime import date
from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field, model_validator

from reactions.models import (
    AdditionMode,
    Atmosphere,
    ComponentRole,
    IsolationMethod,
    Light,
    ObservationKind,
    ReadingMethod,
)
from reactions.models.constraints import HIGHEST_LEVEL, LARGEST_AMOUNT
from reactions.models.guards import FRACTION_SUM_TOLERANCE

Amount = Annotated[float, Field(ge=0, le=LARGEST_AMOUNT, allow_inf_nan=False)]
Share = Annotated[float, Field(ge=0, le=1, allow_inf_nan=False)]
Purity = Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)]
Temperature = Annotated[float, Field(ge=-273.15, le=3000, allow_inf_nan=False)]
Level = Annotated[int, Field(ge=0, le=HIGHEST_LEVEL)]
ShortText = Annotated[str, Field(max_length=160)]
LongText = Annotated[str, Field(max_length=20_000)]


class Input(BaseModel):
    """A frozen value that refuses fields it does not know."""

    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)


class ConditionsInput(Input):
    """Solvent, temperature, time and the rest of a run's conditions."""

    solvent: Annotated[str, Field(max_length=80)] = ""
    solvent_volume_ml: Amount | None = None
    temperature_c: Temperature | None = None
    duration_min: Amount | None = None
    atmosphere: Atmosphere = Atmosphere.UNSTATED
    light: Light = Light.UNSTATED
    addition_mode: AdditionMode = AdditionMode.UNSTATED
    performed_on: date | None = None


class LineInput(Input):
    """One line of the weighing list.

    The line of role ``cage`` needs ``planned_mass_mg`` or an actual amount; any other line needs
    ``equivalents`` or an actual amount. At most one actual amount is typed; the others follow.
    """

    role: ComponentRole
    name: Annotated[str, Field(min_length=1, max_length=160)]
    smiles: Annotated[str, Field(max_length=2000)] = ""
    molar_mass_g_per_mol: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)] | None = None
    purity: Purity = 1.0
    density_g_per_ml: Annotated[float, Field(gt=0, le=30, allow_inf_nan=False)] | None = None
    molarity_mol_per_l: Annotated[float, Field(gt=0, le=100, allow_inf_nan=False)] | None = None
    batch: Annotated[str, Field(max_length=80)] = ""
    equivalents: Annotated[float, Field(gt=0, le=1e6, allow_inf_nan=False)] | None = None
    equivalents_of: ShortText = ""
    planned_mass_mg: (
        Annotated[float, Field(gt=0, le=LARGEST_AMOUNT, allow_inf_nan=False)] | None
    ) = None
    actual_mass_mg: Amount | None = None
    actual_volume_ml: Amount | None = None
    actual_mmol: Amount | None = None


class ModelInput(Input):
    """The composition model that a plan rests on."""

    model: str = "independent_sites"
    sites: Annotated[int, Field(ge=1, le=200)] = 30
    attenuation: float | list[float] = 1.0
    reagent_efficiency: Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)] = 1.0


class PlanInput(Input):
    """A reaction as planned."""

    title: Annotated[str, Field(min_length=1, max_length=200)]
    family_key: Annotated[str, Field(min_length=1, max_length=60)]
    cage: Annotated[str, Field(min_length=1, max_length=40)] = "C60"
    addend: Annotated[str, Field(max_length=50_000)] = ""
    addend_name: ShortText = ""
    target_level: Level | None = None
    objective: dict[str, Any] | None = None
    composition_model: ModelInput | None = None
    predicted_composition: list[Share] | None = None
    lines: Annotated[list[LineInput], Field(max_length=60)] = []
    conditions: ConditionsInput = ConditionsInput()
    is_level_confirmed: bool = False


class ObservationInput(Input):
    """Something seen or done, in minutes after the start."""

    at_min: Amount
    kind: ObservationKind = ObservationKind.OBSERVATION
    text: Annotated[str, Field(min_length=1, max_length=20_000)]


class ReadingInput(Input):
    """A composition: mole fraction of cages by addition level."""

    method: ReadingMethod
    mole_fraction_by_level: Annotated[dict[Level, Share], Field(min_length=1)]
    sampled_at_min: Amount | None = None
    is_higher_lumped: bool = False
    note: LongText = ""

    @model_validator(mode="after")
    def _sums_to_one_at_most(self) -> ReadingInput:
        total = sum(self.mole_fraction_by_level.values())
        if total > 1 + FRACTION_SUM_TOLERANCE:
            raise ValueError(
                f"The fractions sum to {100 * total:.1f} %; they can't exceed 100 %. "
                "Correct one, or leave out what overlaps."
            )
        if total == 0:
            raise ValueError("All fractions are 0; give at least one level its share.")
        return self


class FractionInput(Input):
    """What one isolation step gave; level 0 is recovered cage, no level is unidentified."""

    name: Annotated[str, Field(max_length=120)] = ""
    mass_mg: Amount
    level: Level | None = None
    purity: Purity = 1.0
    is_carried_on: bool = False


class IsolationStepInput(Input):
    """One step of the isolation with its fractions."""

    method: IsolationMethod
    medium: ShortText = ""
    solvent: ShortText = ""
    loading_mg: Amount | None = None
    volume_ml: Amount | None = None
    note: LongText = ""
    fractions: Annotated[list[FractionInput], Field(max_length=100)] = []


class ConclusionInput(Input):
    """What came of it."""

    conclusion: LongText = ""
    recovered_cage_mg: Amount | None = None
    title: Annotated[str, Field(min_length=1, max_length=200)] | None = None
