"""Structures as typed or drawn, read into molecules."""

from __future__ import annotations

from rdkit import Chem, rdBase

LONGEST_SMILES = 2000
MOST_HEAVY_ATOMS = 400
_SHOWN = 60


class StructureError(ValueError):
    """A structure that can't be read; the message says what is wrong and the remedy."""


def parse_smiles(smiles: str) -> Chem.Mol:
    """Return the molecule of a SMILES; salts and hydrates are parts joined by dots.

    At most 2,000 characters and 400 atoms other than hydrogen. A structure whose aromatic rings
    don't kekulize at once is tried again with its rings perceived afresh. Raises StructureError.
    """
    text = smiles.strip()
    shown = text if len(text) <= _SHOWN else f"{text[:_SHOWN]}…"
    if not text:
        raise StructureError("There is no structure; type it as SMILES or draw it.")
    if len(text) > LONGEST_SMILES:
        raise StructureError(
            f"The structure has {len(text)} characters; at most {LONGEST_SMILES} are read."
        )
    with rdBase.BlockLogs():
        molecule = Chem.MolFromSmiles(text, sanitize=False)
        if molecule is None:
            raise StructureError(
                f"“{shown}” can't be read as SMILES; look for an unclosed ring or bracket."
            )
        _sanitize(molecule, shown)
    if molecule.GetNumHeavyAtoms() > MOST_HEAVY_ATOMS:
        raise StructureError(
            f"The structure has {molecule.GetNumHeavyAtoms()} atoms without hydrogen; "
            f"at most {MOST_HEAVY_ATOMS} are read."
        )
    return molecule


def _sanitize(molecule: Chem.Mol, shown: str) -> None:
    try:
        Chem.SanitizeMol(molecule)
    except Chem.AtomValenceException as error:
        raise StructureError(
            f"“{shown}”: {error}; correct its bonds or give its charge."
        ) from error
    except Chem.MolSanitizeException as first:
        try:
            Chem.FastFindRings(molecule)
            Chem.Kekulize(molecule, clearAromaticFlags=True)
            Chem.SanitizeMol(molecule)
        except (Chem.MolSanitizeException, ValueError):
            raise StructureError(
                f"“{shown}”: its aromatic rings can't be drawn with double bonds; "
                "write a hydrogen such as [nH] where one is missing."
            ) from first
