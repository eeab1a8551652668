"""The weighing list: planned amounts from equivalents, actual equivalents from what was weighed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache

from pydantic import ValidationError

from reactions.bounded import run_bounded
from reactions.chemistry.amounts import AmountsLine, AmountsRequest, AmountsResult, amounts
from reactions.chemistry.line_amounts import (
    AmountsError,
    LineSubstance,
    amount_from_mass_mmol,
)
from reactions.chemistry.masses import cage_molar_mass_g_per_mol, molar_mass_g_per_mol
from reactions.chemistry.structures import StructureError
from reactions.errors import FieldErrors, field_errors
from reactions.models import Component, ComponentRole, Reaction, Section
from reactions.services.inputs import LineInput
from reactions.services.revising import ChangeList, Edit, revising

_TYPED = tuple(LineInput.model_fields)
_SHARED = tuple(set(LineInput.model_fields) & set(AmountsLine.model_fields) - {"smiles", "role"})
_ACTUAL = ("actual_mass_mg", "actual_volume_ml", "actual_mmol")
# What a revision says of a line; the computed amounts follow from these.
_NOTED = (
    "role",
    "smiles",
    "purity",
    "density_g_per_ml",
    "molarity_mol_per_l",
    "batch",
    "equivalents",
    "equivalents_of",
    "planned_mass_mg",
    *_ACTUAL,
)


@dataclass(frozen=True)
class WorkedOutLines:
    """Unsaved components in their order, what runs out first, and warnings."""

    components: list[Component]
    limiting: str | None
    warnings: list[str]


def lines_of(reaction: Reaction) -> list[LineInput]:
    """Return the stored lines in their order, each with the one actual amount that stands first."""
    return [_as_input(component) for component in reaction.components.all()]


def _as_input(component: Component) -> LineInput:
    values = {name: getattr(component, name) for name in _TYPED}
    if component.role != ComponentRole.CAGE:
        values["planned_mass_mg"] = None
    given = [name for name in _ACTUAL if values[name] is not None]
    for name in given[1:]:
        values[name] = None
    return LineInput(**values)


def work_out_lines(cage: str, lines: Sequence[LineInput]) -> WorkedOutLines:
    """Work out every amount of a weighing list.

    Planned amounts follow from the cage line's ``planned_mass_mg`` and the equivalents; actual
    equivalents follow from actual amounts. A figure that lacks what it follows from stays empty.
    Raises ``FieldErrors`` with paths such as ``lines.2.smiles``.
    """
    _check_together(lines)
    cage_g_per_mol = cage_mass(cage)
    masses = [_molar_mass(place, line, cage_g_per_mol) for place, line in enumerate(lines)]
    components = [
        _component(place, line, mass)
        for place, (line, mass) in enumerate(zip(lines, masses, strict=True))
    ]
    cage_line = next((row for row in components if row.role == ComponentRole.CAGE), None)
    others = [row for row in components if row is not cage_line]
    if cage_line is None:
        return WorkedOutLines(components, None, [])
    _work_out_cage(cage_line)
    charged_mg = cage_line.planned_mass_mg or cage_line.actual_mass_mg
    if not charged_mg:
        return WorkedOutLines(components, None, [])
    result = _amounts(cage, cage_line, charged_mg, others)
    _take_over(cage_line, others, result)
    return WorkedOutLines(components, result.limiting, list(result.warnings))


def amend_lines(edit: Edit, lines: Sequence[LineInput]) -> None:
    """Put these lines in place of those stored, with every amount worked out."""
    with revising(edit, Section.LINES, "weighing list amended") as (reaction, changes):
        worked_out = work_out_lines(reaction.cage, lines)
        _note_changes(lines_of(reaction), list(lines), changes)
        if not changes.rows:
            return
        reaction.components.all().delete()
        for component in worked_out.components:
            component.reaction = reaction
        Component.objects.bulk_create(worked_out.components)


def _check_together(lines: Sequence[LineInput]) -> None:
    """Raise for what is wrong between lines that are right one by one."""
    errors: dict[str, list[str]] = {}
    names = [line.name for line in lines]
    cages = [place for place, line in enumerate(lines) if line.role == ComponentRole.CAGE]
    for place in cages[1:]:
        errors[f"lines.{place}.role"] = ["A list has one cage; give this line another role."]
    for place, line in enumerate(lines):
        if line.name in names[:place]:
            errors[f"lines.{place}.name"] = [f"“{line.name}” stands above already; rename one."]
        if line.equivalents_of and line.equivalents_of not in names:
            errors[f"lines.{place}.equivalents_of"] = [
                f"“{line.equivalents_of}” is no line of this list; choose one, or leave it empty "
                "for the cage."
            ]
        if sum(getattr(line, name) is not None for name in _ACTUAL) > 1:
            errors[f"lines.{place}.actual_mass_mg"] = [
                "Give one actual amount: a mass, a volume or an amount of substance."
            ]
    if errors:
        raise FieldErrors(errors)


def cage_mass(cage: str) -> float:
    """Return the molar mass of a cage in g/mol; raises ``FieldErrors`` at ``cage``."""
    try:
        return cage_molar_mass_g_per_mol(cage)
    except StructureError as error:
        raise FieldErrors.at("cage", str(error)) from error


@lru_cache(maxsize=4096)
def _mass_of_structure(smiles: str) -> float:
    return run_bounded(molar_mass_g_per_mol, smiles)


def _molar_mass(place: int, line: LineInput, cage_g_per_mol: float) -> float | None:
    """Return the molar mass from the cage, the structure, or as typed."""
    if line.role == ComponentRole.CAGE:
        return cage_g_per_mol
    if not line.smiles:
        return line.molar_mass_g_per_mol
    try:
        return _mass_of_structure(line.smiles)
    except StructureError as error:
        raise FieldErrors.at(f"lines.{place}.smiles", str(error)) from error


def _component(place: int, line: LineInput, molar_mass: float | None) -> Component:
    return Component(
        position=place, **{**dict(line), "molar_mass_g_per_mol": molar_mass, "role": str(line.role)}
    )


def _work_out_cage(cage_line: Component) -> None:
    substance = LineSubstance(cage_line.molar_mass_g_per_mol, cage_line.purity)
    if cage_line.planned_mass_mg is not None:
        cage_line.planned_mmol = amount_from_mass_mmol(cage_line.planned_mass_mg, substance)
    if cage_line.actual_mmol is not None and cage_line.molar_mass_g_per_mol:
        cage_line.actual_mass_mg = (
            cage_line.actual_mmol * cage_line.molar_mass_g_per_mol / cage_line.purity
        )
    elif cage_line.actual_mass_mg is not None:
        cage_line.actual_mmol = amount_from_mass_mmol(cage_line.actual_mass_mg, substance)


def _amounts(
    cage: str, cage_line: Component, charged_mg: float, others: Sequence[Component]
) -> AmountsResult:
    try:
        return amounts(
            AmountsRequest(
                cage=cage,
                cage_mass_mg=charged_mg,
                cage_purity=cage_line.purity,
                actual_cage_mass_mg=cage_line.actual_mass_mg or None,
                lines=[
                    AmountsLine(
                        role=row.role,
                        **{
                            name: value
                            for name in _SHARED
                            if (value := getattr(row, name)) not in (None, "")
                        },
                    )
                    for row in others
                ],
            )
        )
    except ValidationError as error:
        raise _at_own_places(field_errors(error), others) from error
    except AmountsError as error:
        raise _at_own_places(FieldErrors.at(error.field, str(error)), others) from error


def _at_own_places(errors: FieldErrors, others: Sequence[Component]) -> FieldErrors:
    """Return errors of the request's lines at their places in the whole list, cage included."""
    messages: dict[str, list[str]] = {}
    for path, texts in errors.messages.items():
        parts = path.split(".")
        if parts[0] == "lines" and len(parts) > 1 and parts[1].isdigit():
            parts[1] = str(others[int(parts[1])].position)
        messages.setdefault(".".join(parts), []).extend(texts)
    return FieldErrors(messages)


def _take_over(cage_line: Component, others: Sequence[Component], result: AmountsResult) -> None:
    for row, worked_out in zip(others, result.lines, strict=True):
        for name in (*_ACTUAL, "actual_equivalents"):
            setattr(row, name, getattr(worked_out, name))
        if cage_line.planned_mass_mg:
            row.planned_mmol = worked_out.mmol
            row.planned_mass_mg = worked_out.mass_mg
            row.planned_volume_ml = worked_out.volume_ml


def _note_changes(
    before: Sequence[LineInput], after: Sequence[LineInput], changes: ChangeList
) -> None:
    """Note what differs, line by line, told apart by name."""
    old = {line.name: line for line in before}
    new = {line.name: line for line in after}
    for name in [*old, *(name for name in new if name not in old)]:
        if name not in new or name not in old:
            changes.note(name, _words(old.get(name)), _words(new.get(name)))
            continue
        for column in _NOTED:
            changes.note(
                f"{name}: {column}",
                _plain(getattr(old[name], column)),
                _plain(getattr(new[name], column)),
            )
    if set(old) == set(new):
        changes.note("order of lines", list(old), list(new))


def _plain(value: object) -> object:
    return value if value is None or isinstance(value, (int, float)) else str(value)


def _words(line: LineInput | None) -> str | None:
    if line is None:
        return None
    amount = line.planned_mass_mg and f"{line.planned_mass_mg:g} mg"
    return f"{line.role.value}, {amount or f'{line.equivalents or 0:g} equivalents'}"
