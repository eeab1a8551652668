"""What goes in, as people type it: ``1.1`` equivalents, or an amount with its unit."""

from __future__ import annotations

import re
from dataclasses import dataclass

from reactions.chemistry import quantities
from reactions.chemistry.quantity_text import format_amount, format_mass, format_volume
from reactions.pages.quantity_words import format_equivalents

_EQUIVALENTS = re.compile(
    r"(?P<number>[-+−]?[\d.,]+(?:[eE][-+]?\d+)?)\s*(?:eq|equiv|equivalents?)?\.?", re.IGNORECASE
)
_MEASURES: dict[quantities.Kind, str] = {
    "mass": "mass_mg",
    "volume": "volume_ml",
    "amount": "mmol",
}


@dataclass(frozen=True)
class Charge:
    """What goes in, in one of four measures; the others are None."""

    equivalents: float | None = None
    mass_mg: float | None = None
    volume_ml: float | None = None
    mmol: float | None = None

    @property
    def is_amount(self) -> bool:
        """Return whether this is an amount of its own, not one per cage."""
        return self.equivalents is None


def read_amount(text: str) -> Charge:
    """Return an amount typed with its unit, such as ``250 mg``, ``1.2 mL`` or ``3 mmol``.

    Raises ``ValueError`` for anything else; a number without a unit is not guessed at.
    """
    read = quantities.quantity(text)
    if read.kind not in _MEASURES:
        raise ValueError(f"“{text}” is a concentration; write an amount such as 1.2 mL or 3 mmol.")
    return Charge(**{_MEASURES[read.kind]: read.value})


def read_charge(text: str) -> Charge:
    """Return equivalents (``1.1`` or ``1.1 eq``) or an amount with its unit.

    Raises ``ValueError`` for anything else.
    """
    match = _EQUIVALENTS.fullmatch(text.strip())
    if match is None:
        return read_amount(text)
    # Read as a quantity, so that decimal marks mean here what they mean everywhere.
    equivalents = quantities.amount_mmol(f"{match['number']} mmol")
    if equivalents <= 0:
        raise ValueError(f"{text} is not above 0; give more than 0 equivalents.")
    return Charge(equivalents=equivalents)


def show_charge(charge: Charge) -> str:
    """Return a charge as it is typed."""
    if charge.mass_mg is not None:
        return format_mass(charge.mass_mg)
    if charge.volume_ml is not None:
        return format_volume(charge.volume_ml)
    if charge.mmol is not None:
        return format_amount(charge.mmol)
    return format_equivalents(charge.equivalents or 0.0)
