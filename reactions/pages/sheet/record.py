"""What a sheet shows, gathered from the record once for screen and print."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from django.contrib.auth.models import User
from django.utils.safestring import SafeString

from reactions.chemistry.amounts import DEFAULT_MARGIN
from reactions.chemistry.cautions import CautionSheet
from reactions.chemistry.families import Family, UnknownFamilyError
from reactions.chemistry.mass_balance import MassBalance
from reactions.chemistry.solvent_volume import VolumeAdvice, advise_volume
from reactions.chemistry.structures import StructureError
from reactions.models import (
    Component,
    ComponentRole,
    IsolationStep,
    Observation,
    Reaction,
    Reading,
    Role,
    Signature,
    State,
    known_family,
)
from reactions.pages.drawing.levels import level_name
from reactions.pages.sheet.cautions import cautions_of
from reactions.pages.sheet.changes import DescribedRevision, described
from reactions.pages.sheet.plan_words import model_in_words, objective_in_words
from reactions.pages.structure.showing import drawn
from reactions.services.found import balance_of, composition_of, latest_reading
from reactions.services.states import digest_of

_DRAWING_WIDTH, _DRAWING_HEIGHT = 220, 130


@dataclass(frozen=True)
class ReadComposition:
    """A reading with its composition as a list from level 0."""

    reading: Reading
    composition: list[float]


@dataclass(frozen=True)
class CheckedSignature:
    """A signature, and whether the record still says what was signed."""

    signature: Signature
    is_intact: bool


@dataclass(frozen=True)
class BalanceRow:
    """The cages found at one addition level: mmol, and the share of those charged."""

    name: str
    amount_mmol: float
    share: float


@dataclass(frozen=True)
class Move:
    """A state the record may go to, and the words on the button."""

    state: State
    words: str


_MOVES = {
    State.PLANNED: [Move(State.RUNNING, "Start the run")],
    State.RUNNING: [
        Move(State.COMPLETED, "Complete the run"),
        Move(State.PLANNED, "Back to planned"),
    ],
    State.COMPLETED: [Move(State.RUNNING, "Reopen the run")],
}


class Record:
    """One reaction with all that its sheet shows, for one person; read from the database once."""

    def __init__(self, reaction: Reaction, user: User) -> None:
        self.reaction = reaction
        self.user = user

    @cached_property
    def role(self) -> Role | None:
        """Return the role of the person in the campaign."""
        return self.reaction.campaign.role_of(self.user)

    @property
    def may_write(self) -> bool:
        """Return whether the person may change the record as it stands."""
        return self.role == Role.AUTHOR and self.reaction.is_open

    @property
    def may_countersign(self) -> bool:
        """Return whether the person may countersign the record now."""
        return (
            self.role == Role.REVIEWER
            and self.reaction.state == State.SIGNED
            and not any(row.signature.signed_by_id == self.user.pk for row in self.signatures)
        )

    @cached_property
    def family(self) -> Family | None:
        """Return the addition family; None where its key is no longer known."""
        try:
            return known_family(self.reaction.family_key)
        except UnknownFamilyError:
            return None

    @cached_property
    def addend_drawing(self) -> SafeString:
        """Return the drawing of the addend; empty where there is none or it can't be drawn."""
        addend = self.reaction.addend
        if addend is None:
            return SafeString("")
        try:
            return drawn(addend.smiles, _DRAWING_WIDTH, _DRAWING_HEIGHT, f"addend: {addend}")
        except StructureError:
            return SafeString("")

    @cached_property
    def components(self) -> list[Component]:
        """Return the lines of the weighing list in their order."""
        return list(self.reaction.components.all())

    @property
    def cage_line(self) -> Component | None:
        """Return the line of the cage."""
        return next((row for row in self.components if row.role == ComponentRole.CAGE), None)

    @property
    def has_actual_amounts(self) -> bool:
        """Return whether anything has been weighed yet."""
        return any(row.actual_mmol is not None for row in self.components)

    @cached_property
    def observations(self) -> list[Observation]:
        """Return the time line."""
        return list(self.reaction.observations.select_related("recorded_by"))

    @cached_property
    def readings(self) -> list[ReadComposition]:
        """Return the readings with their compositions, in the order of their samples."""
        rows = self.reaction.readings.select_related("recorded_by").prefetch_related("levels")
        return [ReadComposition(row, composition_of(row)) for row in rows]

    @property
    def is_found_lumped(self) -> bool:
        """Return whether the last level of the found composition stands for all above it."""
        found = self.reaction.found_composition
        return any(
            row.reading.is_higher_lumped for row in self.readings if row.composition == found
        )

    @property
    def conversion_rests_on(self) -> str:
        """Return in words what the conversion was computed from; empty where there is none."""
        if self.reaction.conversion is None:
            return ""
        reading = latest_reading(self.reaction)
        if reading is not None and any(row.level == 0 for row in reading.levels.all()):
            return "by the latest reading"
        return "by recovered cage"

    @cached_property
    def steps(self) -> list[IsolationStep]:
        """Return the isolation steps with their fractions."""
        return list(self.reaction.isolation_steps.prefetch_related("fractions"))

    @cached_property
    def balance(self) -> MassBalance | None:
        """Return the mass balance of what was isolated."""
        return balance_of(self.reaction)

    @cached_property
    def revisions(self) -> list[DescribedRevision]:
        """Return the history, the latest first, in words."""
        rows = self.reaction.revisions.select_related("made_by").order_by("-number")
        return [described(row) for row in rows]

    @cached_property
    def signatures(self) -> list[CheckedSignature]:
        """Return the signatures, each checked against what the record says now."""
        rows = list(self.reaction.signatures.select_related("signed_by"))
        now = digest_of(self.reaction) if rows else ""
        return [CheckedSignature(row, row.digest == now) for row in rows]

    @property
    def moves(self) -> list[Move]:
        """Return where the record may go from here, the usual way first."""
        return _MOVES.get(State(self.reaction.state), [])

    @cached_property
    def balance_rows(self) -> list[BalanceRow]:
        """Return the cages found again, by addition level."""
        if self.balance is None:
            return []
        return [
            BalanceRow(
                "recovered cage" if level == 0 else f"{level_name(level)}-adduct",
                mmol,
                mmol / self.balance.charged_mmol,
            )
            for level, mmol in self.balance.level_mmol.items()
        ]

    @cached_property
    def cautions(self) -> CautionSheet:
        """Return the cautions of what is on the sheet."""
        return cautions_of(self.reaction, self.components, self.family, self.steps)

    @cached_property
    def volume_advice(self) -> VolumeAdvice | None:
        """Return whether the solvent dissolves the cage; None without cage or solvent."""
        cage, reaction = self.cage_line, self.reaction
        mass_mg = (cage.actual_mass_mg or cage.planned_mass_mg) if cage else None
        if not mass_mg or not reaction.solvent:
            return None
        chosen_ml = reaction.solvent_volume_ml
        return advise_volume(reaction.cage, mass_mg, reaction.solvent, chosen_ml, DEFAULT_MARGIN)

    @property
    def objective(self) -> str:
        """Return what the plan was solved for, in words."""
        return objective_in_words(self.reaction.objective)

    @property
    def model(self) -> str:
        """Return the model that the prediction rests on, in words."""
        return model_in_words(self.reaction.composition_model)
