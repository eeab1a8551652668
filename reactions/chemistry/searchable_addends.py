"""An addend read from its drawing, with the fingerprint that a search screens it by."""

from __future__ import annotations

from dataclasses import dataclass

from reactions.chemistry.addends import AddendStructure, read_addend
from reactions.chemistry.substructure import fingerprint


@dataclass(frozen=True)
class SearchableAddend:
    """An addend's structure and its fingerprint (256 bytes)."""

    structure: AddendStructure
    fingerprint: bytes


def read_searchable_addend(structure: str) -> SearchableAddend:
    """Read an addend from SMILES or a molfile; raises StructureError as ``read_addend`` does."""
    addend = read_addend(structure)
    return SearchableAddend(addend, fingerprint(addend.search_smiles))
