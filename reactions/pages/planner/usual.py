"""What is usual for a family, as it stands in the planner's fields."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from reactions.chemistry.families import Family, FamilyRole
from reactions.chemistry.quantity_text import (
    format_density,
    format_duration,
    format_fraction,
    format_temperature,
)
from reactions.chemistry.substances import find_substance, substances
from reactions.models import ComponentRole
from reactions.pages.planner.numbers import show_number

# Where the table says nothing, and where practice varies too much to say.
_EFFICIENCY_UNKNOWN = 0.7


@dataclass(frozen=True)
class UsualLine:
    """A line of the weighing list as a family suggests it; texts as typed."""

    role: str
    name: str
    smiles: str = ""
    equivalents: str = ""
    density: str = ""


def usual_lines(family: Family) -> list[UsualLine]:
    """Return the lines of a family: first the reagent that the plan sets, then what goes with it.

    The others' equivalents are per reagent; those that practice leaves open are blank.
    """
    leading = leading_role(family)
    if leading is None:
        return [UsualLine(ComponentRole.REAGENT, "")]
    others = [row for row in family.roles if row is not leading]
    return [_line(leading, ""), *(_line(row, _ratio(row, leading)) for row in others)]


def usual_conditions(family: Family) -> dict[str, str]:
    """Return objective, solvent, temperature, time, model and reagent efficiency, as typed."""
    temperature, duration = family.usual_temperature_c, family.usual_duration_min
    leading = leading_role(family)
    usual = leading.equivalents_per_addition if leading else None
    return {
        "objective": "most_of_level" if family.is_forward else "equivalents",
        "equivalents": show_number(usual) if usual else "",
        "solvent": family.usual_solvents[0] if family.usual_solvents else "",
        "temperature": format_temperature(temperature[0]) if temperature else "",
        "duration": format_duration(duration[0]) if duration else "",
        "model": family.model,
        "reagent_efficiency": format_fraction(usual_efficiency(family)),
    }


def usual_efficiency(family: Family) -> float:
    """Return the share of the reagent that adds when the usual equivalents give one addition."""
    leading = leading_role(family)
    usual = leading.equivalents_per_addition if leading else None
    return min(1.0, 1.0 / usual) if usual else _EFFICIENCY_UNKNOWN


def leading_role(family: Family) -> FamilyRole | None:
    """Return the role that sets the level: a reagent, else the first with equivalents."""
    with_equivalents = [row for row in family.roles if row.equivalents_per_addition]
    reagents = [row for row in family.roles if row.role == ComponentRole.REAGENT]
    return next(iter([*reagents, *with_equivalents, *family.roles]), None)


def _line(role: FamilyRole, equivalents: str) -> UsualLine:
    known = substances().get(role.substance or "") or find_substance(role.name)
    return UsualLine(
        role=role.role if role.role in ComponentRole.values else ComponentRole.ADDITIVE,
        name=known.name if known else role.name,
        smiles=(known.smiles or "") if known else "",
        equivalents=equivalents,
        density=format_density(known.density_g_per_ml) if known and known.density_g_per_ml else "",
    )


def _ratio(role: FamilyRole, leading: FamilyRole) -> str:
    own, reference = role.equivalents_per_addition, leading.equivalents_per_addition
    return show_number(own / (reference or 1.0)) if own else ""


def refilled(
    data: Mapping[str, str], new: Mapping[str, str], old: Mapping[str, str]
) -> dict[str, str]:
    """Return the fields to fill with what is ``new``: those blank, or still as of ``old``."""
    return {
        name: value
        for name, value in new.items()
        if not data.get(name) or data.get(name) == old.get(name)
    }
