"""Storing addends, each structure once."""

from __future__ import annotations

from dataclasses import dataclass

import rdkit

from reactions.bounded import run_bounded
from reactions.chemistry.addends import AddendStructure, read_addend
from reactions.chemistry.structures import StructureError
from reactions.chemistry.substructure import fingerprint
from reactions.errors import FieldErrors
from reactions.models import Addend


@dataclass(frozen=True)
class ReadAddend:
    """An addend's structure with the fingerprint that screens it."""

    structure: AddendStructure
    fingerprint: bytes


def read_with_fingerprint(text: str) -> ReadAddend:
    """Return the addend drawn in ``text`` and its fingerprint; runs in a bounded process."""
    structure = read_addend(text)
    return ReadAddend(structure, fingerprint(structure.search_smiles))


def store_addend(text: str, name: str = "") -> Addend:
    """Return the stored addend of this structure, stored now if it is new.

    A name is taken when the addend has none yet. Raises ``FieldErrors`` at ``addend``.
    """
    known = Addend.objects.filter(smiles=text).first()
    if known is None:
        try:
            read = run_bounded(read_with_fingerprint, text)
        except StructureError as error:
            raise FieldErrors.at("addend", str(error)) from error
        known = _store(read, name)
    if name and not known.name:
        known.name = name
        known.save(update_fields=["name"])
    return known


def _store(read: ReadAddend, name: str) -> Addend:
    structure = read.structure
    addend, _ = Addend.objects.get_or_create(
        smiles=structure.smiles,
        defaults={
            "search_smiles": structure.search_smiles,
            "name": name,
            "attachment_points": structure.attachment_points,
            "formula": structure.formula,
            "mass_g_per_mol": structure.mass_g_per_mol,
            "fingerprint": read.fingerprint,
            "rdkit_version": rdkit.__version__,
        },
    )
    return addend
