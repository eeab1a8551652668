"""What was found: composition, conversion and yields, computed from readings and fractions."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from reactions.chemistry.mass_balance import IsolatedFraction, MassBalance, mass_balance
from reactions.chemistry.masses import cage_molar_mass_g_per_mol
from reactions.chemistry.structures import StructureError
from reactions.models import Component, ComponentRole, Fraction, Reaction, Reading

# A level below one cage in a hundred is not said to have been reached.
LEAST_FRACTION_REACHED = 0.01


def charged_mmol(reaction: Reaction) -> float | None:
    """Return the cage charged in mmol: the actual amount, before a run the planned one."""
    cage = Component.objects.filter(reaction=reaction, role=ComponentRole.CAGE).first()
    if cage is None:
        return None
    return cage.actual_mmol or cage.planned_mmol or None


def balance_from(
    reaction: Reaction, charged: float | None, fractions: Iterable[IsolatedFraction]
) -> MassBalance | None:
    """Return the mass balance of ``fractions`` and the recovered cage; None without either side."""
    found = list(fractions)
    if reaction.recovered_cage_mg:
        found.append(IsolatedFraction(reaction.recovered_cage_mg, 0))
    if not charged or not found:
        return None
    try:
        cage_mass = cage_molar_mass_g_per_mol(reaction.cage)
    except StructureError:
        return None
    return mass_balance(
        charged,
        found,
        cage_g_per_mol=cage_mass,
        addition_g_per_mol=reaction.addend.mass_g_per_mol if reaction.addend else None,
        target_level=reaction.target_level,
    )


def balance_of(reaction: Reaction) -> MassBalance | None:
    """Return the mass balance of the isolated fractions; None without fractions or cage."""
    rows = Fraction.objects.filter(step__reaction=reaction, is_carried_on=False)
    fractions = [IsolatedFraction(row.mass_mg, row.level, row.purity) for row in rows]
    return balance_from(reaction, charged_mmol(reaction), fractions)


def composition_of(reading: Reading) -> list[float]:
    """Return the mole fractions of a reading as a list from level 0; levels not read are 0."""
    return _as_list({row.level: row.mole_fraction for row in reading.levels.all()})


def _as_list(mole_fraction_by_level: Mapping[int, float]) -> list[float]:
    highest = max(mole_fraction_by_level, default=-1)
    return [mole_fraction_by_level.get(level, 0.0) for level in range(highest + 1)]


def latest_reading(reaction: Reaction) -> Reading | None:
    """Return the reading of the latest sample; one without a time counts as the last of all."""
    readings = list(Reading.objects.filter(reaction=reaction).prefetch_related("levels"))
    if not readings:
        return None
    return max(
        readings,
        key=lambda reading: (
            float("inf") if reading.sampled_at_min is None else reading.sampled_at_min,
            reading.pk,
        ),
    )


def refresh_found(reaction: Reaction) -> None:
    """Set the computed columns of ``reaction`` from what is stored; the caller saves it."""
    reading = latest_reading(reaction)
    by_level = {row.level: row.mole_fraction for row in reading.levels.all()} if reading else {}
    set_found(reaction, by_level, balance_of(reaction))


def set_found(
    reaction: Reaction, mole_fraction_by_level: Mapping[int, float], balance: MassBalance | None
) -> None:
    """Set the computed columns of ``reaction`` from a composition and a mass balance."""
    reaction.found_composition = _as_list(mole_fraction_by_level) or None
    amounts = balance.level_mmol if balance else {}
    reached = [
        level for level, share in mole_fraction_by_level.items() if share >= LEAST_FRACTION_REACHED
    ] + [level for level, amount in amounts.items() if amount > 0]
    reaction.level_reached = max(reached, default=None)
    reaction.conversion = _conversion(mole_fraction_by_level, balance)
    reaction.yield_on_charged = balance.yield_on_charged if balance else None
    reaction.yield_on_consumed = balance.yield_on_consumed if balance else None


def _conversion(by_level: Mapping[int, float], balance: MassBalance | None) -> float | None:
    """Return 1 − unreacted, from a reading that has level 0, else from the recovered cage."""
    unreacted = by_level.get(0)
    if unreacted is None and balance and balance.recovered_mmol:
        unreacted = balance.recovered_mmol / balance.charged_mmol
    return None if unreacted is None else min(1.0, max(0.0, 1.0 - unreacted))
