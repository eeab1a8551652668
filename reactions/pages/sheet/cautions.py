"""The cautions of a record, from its weighing list, isolation and conditions."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace

from reactions.bounded import run_bounded
from reactions.chemistry.cautions import (
    CautionSheet,
    PlannedConditions,
    PlannedSubstance,
    cautions_for,
)
from reactions.chemistry.families import Family
from reactions.chemistry.structures import StructureError
from reactions.models import Component, ComponentRole, IsolationStep, Reaction

_ACTS_ON_THE_CAGE = (ComponentRole.REAGENT,)

# What stands between the names of a mixed eluent, and its ratio: “CS2/hexane 1:1”.
_BETWEEN_NAMES = re.compile(r"\s*(?:/|;|\+|→|,\s|\bthen\b|\band\b|\bto\b|\bin\b)\s*")
_RATIO = re.compile(r"[(]?\b\d+([.,]\d+)?(\s*%|(\s*:\s*\d+([.,]\d+)?)+)( v/v)?[)]?")


def cautions_of(
    reaction: Reaction,
    components: Sequence[Component],
    family: Family | None,
    steps: Iterable[IsolationStep] = (),
) -> CautionSheet:
    """Return the cautions of the weighing list, the conditions and the solvents of isolation."""
    cage = next((row for row in components if row.role == ComponentRole.CAGE), None)
    conditions = PlannedConditions(
        solvent=reaction.solvent or None,
        temperature_c=reaction.temperature_c,
        cage_mmol=_first(cage.actual_mmol, cage.planned_mmol) if cage else None,
        family_key=reaction.family_key,
        level=reaction.target_level,
        light=reaction.light or None,
        atmosphere=reaction.atmosphere or None,
        equivalents=_reagent_equivalents(components),
        family=family,
    )
    substances = [_planned(row) for row in components]
    substances += [PlannedSubstance(name, None) for step in steps for name in named(step.solvent)]
    try:
        return run_bounded(cautions_for, substances, conditions)
    except StructureError:
        # A structure that can't be worked on must not cost the cautions that names alone give.
        return cautions_for([replace(row, smiles=None) for row in substances], conditions)


def _planned(row: Component) -> PlannedSubstance:
    return PlannedSubstance(
        name=row.name,
        smiles=row.smiles or None,
        role=row.role,
        mass_mg=_first(row.actual_mass_mg, row.planned_mass_mg),
    )


def named(solvent: str) -> Iterator[str]:
    """Yield each solvent that a mixture names, without the ratio."""
    for part in _BETWEEN_NAMES.split(_RATIO.sub(" ", solvent)):
        if name := part.strip(" ,.()"):
            yield name


def _reagent_equivalents(components: Iterable[Component]) -> float | None:
    """Return the most equivalents of any reagent, the actual ones where they are known."""
    amounts = [
        _first(row.actual_equivalents, row.equivalents)
        for row in components
        if row.role in _ACTS_ON_THE_CAGE
    ]
    return max((amount for amount in amounts if amount is not None), default=None)


def _first(actual: float | None, planned: float | None) -> float | None:
    return planned if actual is None else actual
