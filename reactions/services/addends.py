"""Storing addends, each structure once."""

from __future__ import annotations

import rdkit

from reactions.bounded import run_bounded
from reactions.chemistry.searchable_addends import SearchableAddend, read_searchable_addend
from reactions.chemistry.structures import StructureError
from reactions.errors import FieldErrors
from reactions.models import Addend


def read_bounded(text: str) -> SearchableAddend:
    """Return an addend read in a bounded process; raises ``StructureError``."""
    return run_bounded(read_searchable_addend, text)


def store_addend(text: str, name: str = "") -> Addend:
    """Return the stored addend of this structure, stored now if it is new.

    A name is taken when the addend has none yet. Raises ``FieldErrors`` at ``addend``.
    """
    known = Addend.objects.filter(smiles=text).first()
    if known is not None:
        return _named(known, name)
    try:
        return store_read_addend(read_bounded(text), name)
    except StructureError as error:
        raise FieldErrors.at("addend", str(error)) from error


def store_read_addend(read: SearchableAddend, name: str) -> Addend:
    """Return the stored addend of a structure already read, stored now if it is new."""
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
    return _named(addend, name)


def _named(addend: Addend, name: str) -> Addend:
    if name and not addend.name:
        addend.name = name
        addend.save(update_fields=["name"])
    return addend
