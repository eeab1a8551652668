"""Which of cage and reagents runs out first."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


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

    Raises ValueError without any supply.
    """
    return min(supplies, key=lambda supply: supply.cages_served_mmol).name
