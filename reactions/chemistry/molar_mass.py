"""The calculator ``molar_mass``: formula and masses of a structure."""

from __future__ import annotations

from typing import Annotated

from pydantic import BaseModel, ConfigDict, Field

from reactions.chemistry.masses import formula, molar_mass_g_per_mol, monoisotopic_mass
from reactions.chemistry.structures import StructureError


class MolarMassRequest(BaseModel):
    """A structure as SMILES; salts and hydrates are parts joined by dots."""

    model_config = ConfigDict(frozen=True, extra="forbid", str_strip_whitespace=True)

    smiles: Annotated[str, Field(min_length=1, max_length=2000)]


class MolarMassResult(BaseModel):
    """Formula in Hill order, average molar mass (g/mol) and monoisotopic mass (u)."""

    model_config = ConfigDict(frozen=True)

    formula: str
    molar_mass_g_per_mol: float
    monoisotopic_mass: float


class MolarMassError(StructureError):
    """The structure can't be read; ``field`` is where it stands in the request."""

    field = "smiles"


def molar_mass(request: MolarMassRequest) -> MolarMassResult:
    """Return formula and masses; raises MolarMassError for a structure that can't be read."""
    try:
        return MolarMassResult(
            formula=formula(request.smiles),
            molar_mass_g_per_mol=molar_mass_g_per_mol(request.smiles),
            monoisotopic_mass=monoisotopic_mass(request.smiles),
        )
    except StructureError as error:
        raise MolarMassError(str(error)) from error
