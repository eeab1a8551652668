"""What the API answers, typed for the schema."""

from __future__ import annotations

from datetime import date, datetime
from typing import Any

from pydantic import BaseModel, ConfigDict, RootModel


class Output(BaseModel):
    """An answer, read off a model's attributes."""

    model_config = ConfigDict(from_attributes=True, frozen=True)


class Refusal(Output):
    """Why a request was refused; which of the fields are there depends on the status."""

    detail: str | None = None
    errors: dict[str, list[str]] | None = None
    confirm: dict[str, str] | None = None
    conflict: dict[str, Any] | None = None


REFUSALS: dict[int, type[BaseModel]] = dict.fromkeys((400, 401, 403, 404, 409, 413, 428), Refusal)


class AddendOutput(Output):
    """An addend: ``*`` in its SMILES marks where it is attached."""

    id: int
    name: str
    smiles: str
    attachment_points: int
    formula: str
    mass_g_per_mol: float


class CampaignOutput(Output):
    """A campaign and the role of who asks."""

    code: str
    name: str
    purpose: str
    is_invented: bool
    role: str
    members: dict[str, str]


class CampaignList(RootModel[list[CampaignOutput]]):
    """Campaigns."""


class AnyObject(RootModel[dict[str, Any]]):
    """An object whose fields its own description names."""


class ObjectList(RootModel[list[dict[str, Any]]]):
    """Objects whose fields their own description names."""


class ReactionSummary(Output):
    """A reaction as a search lists it. Fractions and yields are 0 to 1."""

    label: str
    title: str
    state: str
    version: int
    is_invented: bool
    campaign: str
    number: int
    family_key: str
    cage: str
    addend: AddendOutput | None
    target_level: int | None
    solvent: str
    solvent_volume_ml: float | None
    temperature_c: float | None
    duration_min: float | None
    atmosphere: str
    light: str
    addition_mode: str
    performed_on: date | None
    predicted_composition: list[float] | None
    found_composition: list[float] | None
    level_reached: int | None
    conversion: float | None
    yield_on_charged: float | None
    yield_on_consumed: float | None
    created_by: str
    created_at: datetime
    changed_at: datetime


class LineOutput(Output):
    """A line of the weighing list."""

    role: str
    name: str
    smiles: str
    molar_mass_g_per_mol: float | None
    purity: float
    density_g_per_ml: float | None
    molarity_mol_per_l: float | None
    batch: str
    equivalents: float | None
    equivalents_of: str
    planned_mmol: float | None
    planned_mass_mg: float | None
    planned_volume_ml: float | None
    actual_mass_mg: float | None
    actual_volume_ml: float | None
    actual_mmol: float | None
    actual_equivalents: float | None


class ObservationOutput(Output):
    """A line of the time line."""

    id: int
    at_min: float
    kind: str
    text: str
    recorded_by: str
    recorded_at: datetime


class ReadingOutput(Output):
    """A composition that was read."""

    id: int
    method: str
    sampled_at_min: float | None
    is_higher_lumped: bool
    mole_fraction_by_level: dict[int, float]
    note: str
    recorded_by: str
    recorded_at: datetime


class FractionOutput(Output):
    """A fraction of an isolation step; level 0 is recovered cage."""

    name: str
    mass_mg: float
    level: int | None
    purity: float
    is_carried_on: bool


class IsolationStepOutput(Output):
    """A step of the isolation."""

    method: str
    medium: str
    solvent: str
    loading_mg: float | None
    volume_ml: float | None
    note: str
    fractions: list[FractionOutput]


class MassBalanceOutput(Output):
    """Where the cages went, in mmol by level."""

    charged_mmol: float
    level_mmol: dict[int, float]
    unidentified_mg: float
    accounted_for: float
    yield_on_charged: float | None
    yield_on_consumed: float | None


class SignatureOutput(Output):
    """A signature; ``is_true_today`` tells whether the record still says what was signed."""

    signed_by: str
    role: str
    signed_at: datetime
    digest: str
    is_true_today: bool


class RevisionOutput(Output):
    """A revision."""

    number: int
    section: str
    action: str
    changes: list[dict[str, Any]]
    made_by: str
    made_at: datetime


class ReactionOutput(ReactionSummary):
    """A reaction with everything its record holds."""

    objective: dict[str, Any] | None
    composition_model: dict[str, Any] | None
    recovered_cage_mg: float | None
    conclusion: str
    completed_at: datetime | None
    signed_at: datetime | None
    lines: list[LineOutput]
    observations: list[ObservationOutput]
    readings: list[ReadingOutput]
    isolation: list[IsolationStepOutput]
    mass_balance: MassBalanceOutput | None
    signatures: list[SignatureOutput]
    revisions: list[RevisionOutput]


class AddendPage(Output):
    """One page of addends."""

    count: int
    next: str | None
    previous: str | None
    results: list[AddendOutput]


class ReactionPage(Output):
    """One page of a search's hits."""

    count: int
    next: str | None
    previous: str | None
    results: list[ReactionSummary]
