"""Where the cages went: yields and recovery from what was isolated.

n(level) = mass · purity / (M(cage) + level · M(addition)), summed over the fractions that were not
carried on to a later step. Yield on charged cage = n(target) / n(charged); yield on consumed cage =
n(target) / (n(charged) − n(recovered)). Common practice of preparative chemistry, no source.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True)
class IsolatedFraction:
    """A fraction as weighed: its mass in mg, addition level (None: not identified) and purity."""

    mass_mg: float
    addition_level: int | None
    purity: float = 1.0


@dataclass(frozen=True)
class MassBalance:
    """Amounts of cage in mmol, and the yields they give (0 to 1; None where not defined).

    ``level_mmol`` maps each addition level found to mmol of cage at that level; level 0 is
    recovered cage. ``unidentified_mg`` is the mass in fractions of no stated level, which no
    amount can be given for.
    """

    charged_mmol: float
    level_mmol: dict[int, float]
    unidentified_mg: float
    yield_on_charged: float | None
    yield_on_consumed: float | None

    @property
    def recovered_mmol(self) -> float:
        """Return the cage recovered unreacted, in mmol."""
        return self.level_mmol.get(0, 0.0)

    @property
    def accounted_for(self) -> float:
        """Return the share of the charged cages found again at any identified level."""
        return sum(self.level_mmol.values()) / self.charged_mmol


def mass_balance(
    charged_mmol: float,
    fractions: Iterable[IsolatedFraction],
    *,
    cage_g_per_mol: float,
    addition_g_per_mol: float | None,
    target_level: int | None,
) -> MassBalance:
    """Return where ``charged_mmol`` of cage went.

    ``addition_g_per_mol`` is the mass that one addition adds; without it only recovered cage can
    be turned into an amount, and other fractions count as unidentified. Raises ``ValueError`` when
    no cage was charged.
    """
    if not charged_mmol > 0:
        raise ValueError("No cage was charged; give the mass of cage to get a mass balance.")
    level_mmol: dict[int, float] = {}
    unidentified_mg = 0.0
    for fraction in fractions:
        level = fraction.addition_level
        if level is None or (level > 0 and addition_g_per_mol is None):
            unidentified_mg += fraction.mass_mg
            continue
        molar_mass = cage_g_per_mol + level * (addition_g_per_mol or 0.0)
        amount = fraction.mass_mg * fraction.purity / molar_mass
        level_mmol[level] = level_mmol.get(level, 0.0) + amount
    target_mmol = level_mmol.get(target_level, 0.0) if target_level else None
    if not any(level > 0 for level in level_mmol):
        target_mmol = None
    consumed = charged_mmol - level_mmol.get(0, 0.0)
    return MassBalance(
        charged_mmol=charged_mmol,
        level_mmol=dict(sorted(level_mmol.items())),
        unidentified_mg=unidentified_mg,
        yield_on_charged=None if target_mmol is None else target_mmol / charged_mmol,
        yield_on_consumed=(
            None if target_mmol is None or consumed <= 0 else target_mmol / consumed
        ),
    )
