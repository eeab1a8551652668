"""Solvents: what dissolves how much of a cage, and boiling and flash points.

Tables: ``solvents.csv`` and ``solubilities.csv``; each row names its source. Where published
solubilities differ all are kept, and a plan takes the lowest, so that the volume suffices whichever
is right. Solubilities hold at room temperature (25 °C); they pass through a maximum with
temperature in several solvents, so nothing is extrapolated. Where published flash points and
autoignition temperatures differ, the table has the lower.
"""

from __future__ import annotations

import difflib
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType
from typing import TYPE_CHECKING

from reactions.chemistry.folded_names import folded
from reactions.chemistry.masses import cage_formula
from reactions.chemistry.structures import StructureError
from reactions.chemistry.tables import read_csv_table

if TYPE_CHECKING:
    from collections.abc import Mapping


class UnknownSolventError(LookupError):
    """No solvent of the table has the name asked for."""


@dataclass(frozen=True)
class Solvent:
    """A solvent at 20 to 25 °C; None where the table has no value."""

    name: str
    synonyms: tuple[str, ...]
    smiles: str | None
    cas_number: str
    density_g_per_ml: float | None
    boiling_point_c: float | None
    flash_point_c: float | None
    autoignition_c: float | None
    source: str


@dataclass(frozen=True)
class Solubility:
    """A published solubility of a cage, in mg per mL of solvent at ``temperature_c``."""

    cage: str
    solvent: str
    mg_per_ml: float
    temperature_c: float
    source: str
    how_known: str


def _number(cell: str) -> float | None:
    return float(cell) if cell else None


@cache
def solvents() -> Mapping[str, Solvent]:
    """Return every solvent by name, in the order of the table."""
    rows = {
        row["name"]: Solvent(
            name=row["name"],
            synonyms=tuple(name for name in row["synonyms"].split("|") if name),
            smiles=row["smiles"] or None,
            cas_number=row["cas_number"],
            density_g_per_ml=_number(row["density_g_per_ml"]),
            boiling_point_c=_number(row["boiling_point_c"]),
            flash_point_c=_number(row["flash_point_c"]),
            autoignition_c=_number(row["autoignition_c"]),
            source=row["source"],
        )
        for row in read_csv_table("solvents.csv")
    }
    return MappingProxyType(rows)


@cache
def _names() -> Mapping[str, str]:
    return MappingProxyType(
        {
            folded(name): row.name
            for row in solvents().values()
            for name in (row.name, *row.synonyms, row.cas_number)
        }
    )


def solvent(name: str) -> Solvent:
    """Return the solvent of this name, synonym or CAS number.

    Capitals, blanks and the kind of hyphen don't count. Raises UnknownSolventError naming the
    nearest names.
    """
    known = _names().get(folded(name))
    if known is None:
        near = difflib.get_close_matches(folded(name), _names(), n=3)
        nearest = dict.fromkeys(_names()[other] for other in near)
        hint = f" Did you mean {' or '.join(nearest)}?" if nearest else ""
        raise UnknownSolventError(f"“{name.strip()}” is not in the table of solvents.{hint}")
    return solvents()[known]


@cache
def solubilities() -> tuple[Solubility, ...]:
    """Return every published solubility of the table."""
    return tuple(
        Solubility(
            cage=row["cage"],
            solvent=row["solvent"],
            mg_per_ml=float(row["solubility_mg_per_ml"]),
            temperature_c=float(row["temperature_c"]),
            source=row["source"],
            how_known=row["how_known"],
        )
        for row in read_csv_table("solubilities.csv")
    )


def published_solubilities(cage: str, name: str) -> tuple[Solubility, ...]:
    """Return what is published for ``cage`` in a solvent, lowest first; empty when nothing is.

    A cage or a solvent that isn't known here has nothing published here. The symmetry of a cage
    (``C60-Ih``) is left out of account, since the table has cages of one isomer only.
    """
    try:
        known = solvent(name).name
        bare_cage = cage_formula(cage)
    except (UnknownSolventError, StructureError):
        return ()
    found = [row for row in solubilities() if row.cage == bare_cage and row.solvent == known]
    return tuple(sorted(found, key=lambda row: row.mg_per_ml))


def solubility_mg_per_ml(cage: str, name: str) -> float | None:
    """Return the lowest published solubility in mg/mL at 25 °C; None when none is known.

    0 stands for practically insoluble.
    """
    found = published_solubilities(cage, name)
    return found[0].mg_per_ml if found else None


def least_volume_ml(cage: str, mass_mg: float, name: str, margin: float) -> float | None:
    """Return the volume in mL that dissolves ``mass_mg`` of cage at 25 °C, times ``margin``.

    V = margin · m / s with the lowest published solubility s. None when no solubility is known, or
    when the cage is practically insoluble (0 mg/mL). Raises ValueError for a margin below 1 or a
    mass below 0.
    """
    if margin < 1:
        raise ValueError(f"A margin of {margin:g} would leave cage undissolved; give 1 or more.")
    if mass_mg < 0:
        raise ValueError(f"A mass of {mass_mg:g} mg is below 0; give 0 or more.")
    solubility = solubility_mg_per_ml(cage, name)
    return margin * mass_mg / solubility if solubility else None
