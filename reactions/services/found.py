"""What was found: composition, conversion and yields, computed from readings and fractions."""

from __future__ import annotations

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


def balance_of(reaction: Reaction) -> MassBalance | None:
    """Return the mass balance of the isolated fractions; None without fractions or cage."""
    charged = charged_mmol(reaction)
    fractions = [
        IsolatedFraction(fraction.mass_mg, fraction.level, fraction.purity)
        for fraction in Fraction.objects.filter(
            step__reaction=reaction, is_carried_on=False
        ).order_by("step__position", "position")
    ]
    if reaction.recovered_cage_mg:
        fractions.append(IsolatedFraction(reaction.recovered_cage_mg, 0))
    if not charged or not fractions:
        return None
    try:
        cage_mass = cage_molar_mass_g_per_mol(reaction.cage)
    except StructureError:
        return None
    return mass_balance(
        charged,
        fractions,
        cage_g_per_mol=cage_mass,
        addition_g_per_mol=reaction.addend.mass_g_per_mol if reaction.addend else None,
        target_level=reaction.target_level,
    )


def composition_of(reading: Reading) -> list[float]:
    """Return the mole fractions of a reading as a list from level 0; levels not read are 0."""
    levels = {row.level: row.mole_fraction for row in reading.levels.all()}
    return [levels.get(level, 0.0) for level in range(max(levels, default=-1) + 1)]


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
    """Set the computed columns of ``reaction``; the caller saves it."""
    reading = latest_reading(reaction)
    composition = composition_of(reading) if reading else []
    balance = balance_of(reaction)
    reaction.found_composition = composition or None
    reached = [
        level for level, share in enumerate(composition) if share >= LEAST_FRACTION_REACHED
    ] + [level for level, amount in (balance.level_mmol if balance else {}).items() if amount > 0]
    reaction.level_reached = max(reached, default=None)
    reaction.conversion = _conversion(reading, balance)
    reaction.yield_on_charged = balance.yield_on_charged if balance else None
    reaction.yield_on_consumed = balance.yield_on_consumed if balance else None


def _conversion(reading: Reading | None, balance: MassBalance | None) -> float | None:
    """Return 1 − unreacted, from a reading that has level 0, else from the recovered cage."""
    unreacted = [row.mole_fraction for row in reading.levels.all() if row.level == 0] if reading else []
    if not unreacted and balance and balance.recovered_mmol:
        unreacted = [balance.recovered_mmol / balance.charged_mmol]
    return min(1.0, max(0.0, 1.0 - unreacted[0])) if unreacted else None
