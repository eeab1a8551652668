"""A plan as the rules see it: each substance with its structure, table row and kinds."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from rdkit import Chem

from reactions.chemistry.cautions.kinds import kinds_of
from reactions.chemistry.cautions.sheet import PlannedConditions, PlannedSubstance
from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.families import Family, UnknownFamilyError, family
from reactions.chemistry.ionic_form import ionic_form
from reactions.chemistry.structures import StructureError
from reactions.chemistry.substances import Substance, find_substance


@dataclass(frozen=True)
class Member:
    """One substance of a plan; ``molecule``, in ionic form, is None without a structure."""

    name: str
    role: str
    mass_mg: float | None
    molecule: Chem.Mol | None
    record: Substance | None
    kinds: frozenset[str]


@dataclass(frozen=True)
class Plan:
    """All substances of a plan, the solvent among them, with its conditions and family."""

    members: tuple[Member, ...]
    conditions: PlannedConditions
    family: Family | None

    def of_kind(self, kind: str) -> tuple[Member, ...]:
        """Return the members of a kind."""
        return tuple(member for member in self.members if kind in member.kinds)

    @property
    def solvent_members(self) -> tuple[Member, ...]:
        """Return the members that serve as solvent, by the conditions or by their role."""
        return tuple(member for member in self.members if "solvent" in member.role)


def read_plan(substances: Iterable[PlannedSubstance], conditions: PlannedConditions) -> Plan:
    """Look up every substance of a plan, the solvent of the conditions with them."""
    planned = list(substances)
    solvent = (conditions.solvent or "").strip()
    if solvent and solvent.casefold() not in {row.name.strip().casefold() for row in planned}:
        planned.append(PlannedSubstance(solvent, None, role="solvent"))
    solvent_name = solvent.casefold()
    members = tuple(
        _member(row, is_solvent=row.name.strip().casefold() == solvent_name) for row in planned
    )
    return Plan(members, conditions, _family(conditions))


def _member(planned: PlannedSubstance, is_solvent: bool) -> Member:
    record = find_substance(planned.name, planned.smiles)
    molecule = _molecule(planned.smiles or (record.smiles if record else None))
    name = planned.name.strip() or (record.name if record else planned.smiles or "")
    known_as = " ".join((name, record.name)) if record else name
    return Member(
        name=name,
        role="solvent" if is_solvent else planned.role,
        mass_mg=planned.mass_mg,
        molecule=molecule,
        record=record,
        kinds=kinds_of(known_as, molecule),
    )


def _molecule(smiles: str | None) -> Chem.Mol | None:
    if not smiles:
        return None
    try:
        return ionic_form(sanitised(unsanitised(smiles)))
    except StructureError:
        return None


def _family(conditions: PlannedConditions) -> Family | None:
    if conditions.family is not None or not conditions.family_key:
        return conditions.family
    try:
        return family(conditions.family_key)
    except UnknownFamilyError:
        return None
