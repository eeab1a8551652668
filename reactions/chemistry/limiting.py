"""Which of cage and reagents runs out first.

A supply of n mmol, of which a cage turned into the target takes up ν mol per mol, suffices for n/ν
mmol of cage. What suffices for the least cage is limiting. With ν = 1 and 1.1 equivalents of a
reagent the cage limits; for a bis-adduct ν = 2, and 1.1 equivalents suffice for 0.55 of the cage.
Definition of the limiting reactant; common practice, no source.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

_SAME = 1e-9


@dataclass(frozen=True)
class Supply:
    """An amount in mmol, and how many mol of it one mol of cage consumes."""

    name: str
    mmol: float
    needed_per_cage: float = 1.0

    @property
    def cages_served_mmol(self) -> float:
        """Return the amount of cage in mmol that this supply suffices for."""
        return self.mmol / self.needed_per_cage


def limiting_supply(supplies: Sequence[Supply]) -> str:
    """Return the name of the supply that suffices for the least cage; of equals, the first.

    Equal are supplies within 1e-9 of each other, so that rounding doesn't decide. Raises
    ValueError without any supply.
    """
    least = min(supply.cages_served_mmol for supply in supplies)
    return next(
        supply.name for supply in supplies if supply.cages_served_mmol <= least * (1 + _SAME)
    )
