"""Storing the checked rows of a history in one transaction."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field
from datetime import UTC, datetime, time

from django.db import transaction
from django.utils import timezone

from reactions.bounded import run_bounded
from reactions.chemistry.mass_balance import IsolatedFraction
from reactions.chemistry.masses import cage_molar_mass_g_per_mol, molar_mass_g_per_mol
from reactions.chemistry.searchable_addends import SearchableAddend
from reactions.chemistry.structures import StructureError
from reactions.models import (
    Addend,
    Component,
    ComponentRole,
    Fraction,
    HistoryImport,
    IsolationMethod,
    IsolationStep,
    Reaction,
    Reading,
    ReadingLevel,
    ReadingMethod,
    Revision,
    Section,
    State,
)
from reactions.services.addends import read_bounded, store_read_addend
from reactions.services.found import balance_from, set_found
from reactions.services.history.rows import HistoryRow
from reactions.services.inputs import LineInput
from reactions.services.lines import work_out_lines
from reactions.services.planning import next_number

_BATCH = 500
_ROWS_BETWEEN_CANCEL_CHECKS = 50


@dataclass
class Structures:
    """The structures that the rows name, each read once: what it is, or why it can't be read."""

    addends: dict[str, SearchableAddend] = field(default_factory=dict)
    reagent_g_per_mol: dict[str, float] = field(default_factory=dict)
    cage_g_per_mol: dict[str, float] = field(default_factory=dict)
    faults: dict[str, str] = field(default_factory=dict)

    def problems(self, rows: Iterable[HistoryRow]) -> list[dict[str, object]]:
        """Return the rows whose structures can't be read, with the reason."""
        return [
            {"row": row.number, "reason": f"{key.replace('_', ' ')}: {self.faults[text]}"}
            for row in rows
            for key in ("cage", "addend", "reagent_smiles")
            if (text := row.get(key, "C60" if key == "cage" else "")) in self.faults
        ]


def read_structures(rows: Sequence[HistoryRow], heed_cancel: Callable[[], None]) -> Structures:
    """Read each cage, addend and reagent that the rows name, once, in the bounded process."""
    found = Structures()
    _read_each(
        {row.get("cage", "C60") for row in rows},
        cage_molar_mass_g_per_mol,
        found.cage_g_per_mol,
        found.faults,
        heed_cancel,
    )
    _read_each(
        {row.get("reagent_smiles") for row in rows},
        lambda text: run_bounded(molar_mass_g_per_mol, text),
        found.reagent_g_per_mol,
        found.faults,
        heed_cancel,
    )
    _read_each(
        {row.get("addend") for row in rows},
        read_bounded,
        found.addends,
        found.faults,
        heed_cancel,
    )
    return found


def _read_each(
    texts: set[str | None],
    read: Callable[[str], object],
    into: dict,  # type: ignore[type-arg]
    faults: dict[str, str],
    heed_cancel: Callable[[], None],
) -> None:
    for count, text in enumerate(sorted(text for text in texts if text)):
        if count % _ROWS_BETWEEN_CANCEL_CHECKS == 0:
            heed_cancel()
        try:
            into[text] = read(text)
        except StructureError as error:
            faults[text] = str(error)


@transaction.atomic
def store_rows(job: HistoryImport, rows: Sequence[HistoryRow], structures: Structures) -> int:
    """Store every row as a completed reaction with its revision; return how many."""
    addends = {text: store_read_addend(read, "") for text, read in structures.addends.items()}
    first_number = next_number(job.campaign)
    for start in range(0, len(rows), _BATCH):
        batch = [
            _Drafted(job, row, first_number + start + offset, addends, structures)
            for offset, row in enumerate(rows[start : start + _BATCH])
        ]
        _store_batch(batch)
    return len(rows)


class _Drafted:
    """One row as the unsaved rows of the tables it goes to."""

    def __init__(
        self,
        job: HistoryImport,
        row: HistoryRow,
        number: int,
        addends: dict[str, Addend],
        structures: Structures,
    ) -> None:
        self.row = row
        self.user = job.uploaded_by
        self.components = _components(row, structures)
        self.fractions = _fractions(row)
        self.reaction = _reaction(job, row, number, addends)
        charged = self.components[0].actual_mmol
        balance = balance_from(
            self.reaction,
            charged,
            [IsolatedFraction(part.mass_mg, part.level, part.purity) for part in self.fractions],
        )
        set_found(self.reaction, row.mole_fraction_by_level, balance)
        self.revision = Revision(
            reaction=self.reaction,
            number=1,
            section=Section.PLAN,
            action=f"brought in from {job.file_name}, row {row.number}"[:120],
            changes=[{"field": "reaction", "before": None, "after": _plain_values(row)}],
            made_by=job.uploaded_by,
        )


def _plain_values(row: HistoryRow) -> dict[str, object]:
    return {
        key: value if isinstance(value, (int, float)) else str(value)
        for key, value in row.values.items()
    }


def _reaction(
    job: HistoryImport, row: HistoryRow, number: int, addends: dict[str, Addend]
) -> Reaction:
    day = row.get("performed_on")
    completed = timezone.make_aware(datetime.combine(day, time(12)), UTC) if day else timezone.now()
    return Reaction(
        campaign=job.campaign,
        number=number,
        title=(row.get("title") or f"{job.file_name}, row {row.number}")[:200],
        state=State.COMPLETED,
        completed_at=completed,
        family_key=row.get("family"),
        cage=row.get("cage", "C60"),
        addend=addends.get(row.get("addend", "")),
        target_level=row.get("target_level"),
        solvent=row.get("solvent", "")[:80],
        solvent_volume_ml=row.get("solvent_volume"),
        temperature_c=row.get("temperature"),
        duration_min=row.get("duration"),
        atmosphere=row.get("atmosphere", ""),
        recovered_cage_mg=row.get("recovered_cage"),
        conclusion=row.get("conclusion", ""),
        performed_on=day,
        created_by=job.uploaded_by,
        is_invented=job.campaign.is_invented,
    )


def _components(row: HistoryRow, structures: Structures) -> list[Component]:
    cage = row.get("cage", "C60")
    lines = [
        LineInput(
            role=ComponentRole.CAGE,
            name=cage,
            purity=row.get("cage_purity", 1.0),
            actual_mass_mg=row.get("cage_mass"),
        )
    ]
    smiles = row.get("reagent_smiles", "")
    if row.get("reagent") or smiles:
        lines.append(
            LineInput(
                role=ComponentRole.REAGENT,
                name=(row.get("reagent") or smiles)[:160],
                molar_mass_g_per_mol=structures.reagent_g_per_mol.get(smiles),
                equivalents=row.get("reagent_equivalents") or None,
                actual_mass_mg=row.get("reagent_mass"),
            )
        )
    components = work_out_lines(cage, lines).components
    for component in components:
        if component.role == ComponentRole.REAGENT:
            component.smiles = smiles
    return components


def _fractions(row: HistoryRow) -> list[Fraction]:
    if "product_mass" not in row.values:
        return []
    return [
        Fraction(
            position=1,
            name="product",
            mass_mg=row.get("product_mass"),
            level=row.get("target_level"),
            purity=row.get("product_purity", 1.0),
        )
    ]


def _store_batch(batch: Sequence[_Drafted]) -> None:
    Reaction.objects.bulk_create([draft.reaction for draft in batch])
    for draft in batch:
        for component in draft.components:
            component.reaction = draft.reaction
    Component.objects.bulk_create([part for draft in batch for part in draft.components])
    Revision.objects.bulk_create([draft.revision for draft in batch])
    _store_readings(batch)
    _store_isolation(batch)


def _store_readings(batch: Sequence[_Drafted]) -> None:
    read = [draft for draft in batch if draft.row.mole_fraction_by_level]
    readings = [
        Reading(
            reaction=draft.reaction,
            method=draft.row.get("method", ReadingMethod.OTHER),
            recorded_by=draft.user,
        )
        for draft in read
    ]
    Reading.objects.bulk_create(readings)
    ReadingLevel.objects.bulk_create(
        ReadingLevel(reading=reading, level=level, mole_fraction=share)
        for draft, reading in zip(read, readings, strict=True)
        for level, share in draft.row.mole_fraction_by_level.items()
    )


def _store_isolation(batch: Sequence[_Drafted]) -> None:
    isolated = [draft for draft in batch if draft.fractions]
    steps = [
        IsolationStep(reaction=draft.reaction, position=1, method=IsolationMethod.UNSTATED)
        for draft in isolated
    ]
    IsolationStep.objects.bulk_create(steps)
    for draft, step in zip(isolated, steps, strict=True):
        for part in draft.fractions:
            part.step = step
    Fraction.objects.bulk_create([part for draft in isolated for part in draft.fractions])
