"""What a caution rule may ask of a plan.

Each predicate takes the plan and the arguments of its row, and returns None where it doesn't
apply, else the words that the rule's text may use, by name.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import Any

from rdkit.Chem import Descriptors

from reactions.chemistry.cautions.energetic import azide_ratio, carbons_per_energetic_group
from reactions.chemistry.cautions.plan import Member, Plan
from reactions.chemistry.cautions.solvent_limits import (
    above_autoignition,
    above_boiling_point,
    above_flash_point,
    in_degrees,
    solvent_unknown,
)
from reactions.chemistry.families import gas_evolved_ml

Words = Mapping[str, str]
Predicate = Callable[[Plan, Mapping[str, Any]], Words | None]

_GAS_ML_PER_MMOL = 24.5
_HYDRIDES = {"H": 1, "Al": 4, "B": 4}
_OXYGENATED = ("air", "oxygen")
_FLAMMABLE = frozenset({"H224", "H225", "H226"})


def has(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a substance of a kind; words: the kind's name, for the substances' names."""
    members = plan.of_kind(arguments["kind"])
    return {arguments["kind"]: _names(members)} if members else None


def solvent_is(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a solvent of a kind; words: solvent."""
    members = [row for row in plan.solvent_members if arguments["kind"] in row.kinds]
    return {"solvent": _names(members)} if members else None


def solvent_flammable(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a solvent classed as a flammable liquid (H224, H225, H226); words: solvent."""
    members = [
        row
        for row in plan.solvent_members
        if row.record and _FLAMMABLE.intersection(row.record.hazard_statements)
    ]
    return {"solvent": _names(members)} if members else None


def hotter_than(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a temperature above so many °C; words: temperature."""
    temperature_c = plan.conditions.temperature_c
    if temperature_c is None or temperature_c <= arguments["temperature_c"]:
        return None
    return {"temperature": in_degrees(temperature_c)}


def light_is(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for one of several kinds of light; words: light."""
    light = (plan.conditions.light or "").casefold()
    return {"light": light} if light in arguments["any_of"] else None


def atmosphere_is(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for one of several atmospheres; words: atmosphere."""
    atmosphere = (plan.conditions.atmosphere or "").casefold()
    return {"atmosphere": atmosphere} if atmosphere in arguments["any_of"] else None


def oxygen_present(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for oxygen, in the atmosphere or charged as of a kind; words: atmosphere."""
    atmosphere = (plan.conditions.atmosphere or "").casefold()
    if atmosphere in _OXYGENATED:
        return {"atmosphere": atmosphere}
    return {"atmosphere": "oxygen"} if plan.of_kind(arguments["kind"]) else None


def family_is(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for one of several addition families; words: family."""
    if plan.family is None or plan.family.key not in arguments["any_of"]:
        return None
    return {"family": plan.family.name}


def family_unknown(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a family named but not found, whose gas can't be worked out; words: family."""
    key = plan.conditions.family_key
    return {"family": key} if key and plan.family is None else None


def azide_ratio_below(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for an organic azide with (N_C + N_O) / N_N below a limit; words: azides."""
    return _measured(plan, azide_ratio, arguments["limit"], "azides")


def carbons_per_group_below(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for fewer carbon atoms per energetic group than a limit; words: substances."""
    return _measured(plan, carbons_per_energetic_group, arguments["limit"], "substances")


def gas_evolved(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for gas set free by the additions, more than so many mL; words: gases.

    The volume is that at 25 °C and 1 atm. Where the scale isn't known, a family that sets gas
    free is enough, and the gases are named without a volume.
    """
    if plan.family is None:
        return None
    conditions = plan.conditions
    if conditions.cage_mmol is None:
        names = [row.name for row in plan.family.by_products if row.is_gas]
        return {"gases": f"{' and '.join(names)} (volume not known)"} if names else None
    volumes = gas_evolved_ml(
        plan.family,
        conditions.cage_mmol,
        max(conditions.level or 0.0, 1.0),
        equivalents=conditions.equivalents,
    )
    if sum(volumes.values()) <= arguments["more_than_ml"]:
        return None
    gases = " and ".join(f"{_ml(volume)} of {gas}" for gas, volume in volumes.items())
    return {"gases": f"{gases} at 25 °C and 1 atm"}


def family_sets_free(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a family that sets free a substance of this name; words: family."""
    if plan.family is None:
        return None
    names = {row.name for row in plan.family.by_products}
    return {"family": plan.family.name} if arguments["substance"] in names else None


def hydrogen_from_mass(plan: Plan, arguments: Mapping[str, Any]) -> Words | None:
    """Ask for a weighed metal hydride; words: hydride, hydrogen (mL at 25 °C, 1 mol per hydride).

    Four hydrides are counted for aluminium and boron hydrides.
    """
    weighed = [row for row in plan.of_kind("metal_hydride") if row.mass_mg and row.molecule]
    total_ml = sum((_hydrogen_ml(row) for row in weighed), start=0.0)
    return {"hydride": _names(weighed), "hydrogen": _ml(total_ml)} if total_ml else None


def _hydrogen_ml(hydride: Member) -> float:
    if hydride.molecule is None or hydride.mass_mg is None:
        return 0.0
    hydrides = sum(_HYDRIDES.get(atom.GetSymbol(), 0) for atom in hydride.molecule.GetAtoms())
    mg_per_mmol = float(Descriptors.MolWt(hydride.molecule))  # type: ignore[attr-defined]
    return hydride.mass_mg / mg_per_mmol * hydrides * _GAS_ML_PER_MMOL


def _measured(
    plan: Plan, measure: Callable[[Any], float | None], limit: float, word: str
) -> Words | None:
    found = []
    for row in plan.members:
        value = measure(row.molecule) if row.molecule is not None else None
        if value is not None and value < limit:
            found.append(f"{row.name} ({value:.2g})")
    return {word: ", ".join(found)} if found else None


def _names(members: Sequence[Member]) -> str:
    return ", ".join(dict.fromkeys(row.name for row in members))


def _ml(volume: float) -> str:
    return f"{volume / 1000:.3g} L" if volume >= 1000 else f"{volume:.3g} mL"


PREDICATES: Mapping[str, Predicate] = {
    predicate.__name__: predicate
    for predicate in (
        has,
        solvent_is,
        solvent_flammable,
        hotter_than,
        light_is,
        atmosphere_is,
        oxygen_present,
        family_is,
        family_unknown,
        azide_ratio_below,
        carbons_per_group_below,
        gas_evolved,
        family_sets_free,
        hydrogen_from_mass,
        above_boiling_point,
        above_flash_point,
        above_autoignition,
        solvent_unknown,
    )
}
