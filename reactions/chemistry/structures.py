"""Substances as typed in SMILES, read into molecules: what is weighed, and products with a cage."""

from __future__ import annotations

from rdkit import Chem, rdBase

from reactions.chemistry.ligands import bind_ligands_datively

LONGEST_SMILES = 2000
MOST_HEAVY_ATOMS = 400
_SHOWN = 60
# Nitro groups drawn with five bonds, carbonyl ligands drawn with a plain line.
_TIDY = Chem.SANITIZE_CLEANUP | Chem.SANITIZE_CLEANUP_ORGANOMETALLICS
_ATOM_ORDERS = 8


class StructureError(ValueError):
    """A structure that can't be read; the message says what is wrong and the remedy."""


def parse_smiles(smiles: str) -> Chem.Mol:
    """Return the molecule of a SMILES; salts and hydrates are parts joined by dots.

    At most 2,000 characters and 400 atoms other than hydrogen. A plain line from a phosphine or an
    amine to a metal is read as a dative bond, so that no hydrogen is added. Atoms may come in
    another order than they are typed in. Raises StructureError.
    """
    text = smiles.strip()
    shown = text if len(text) <= _SHOWN else f"{text[: _SHOWN - 1]}…"
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
                f"“{shown}” can't be read as SMILES; look for an unclosed ring or bracket, or an "
                "atom that needs square brackets."
            )
        _check_size(molecule)
        return _sanitised(molecule, shown)


def _check_size(molecule: Chem.Mol) -> None:
    if molecule.GetNumHeavyAtoms() > MOST_HEAVY_ATOMS:
        raise StructureError(
            f"The structure has {molecule.GetNumHeavyAtoms()} atoms without hydrogen; "
            f"at most {MOST_HEAVY_ATOMS} are read."
        )


def _sanitised(molecule: Chem.Mol, shown: str) -> Chem.Mol:
    """Return the molecule with valences checked and double bonds placed.

    The search for double bonds gives up early and depends on the order of the atoms: about 1 in
    5,000 cage adducts with aromatic atoms fails in one order and succeeds in the next.
    """
    for turn in range(_ATOM_ORDERS):
        candidate = Chem.RWMol(_turned(molecule, turn))
        bind_ligands_datively(candidate)
        Chem.SanitizeMol(candidate, _TIDY)
        try:
            Chem.SanitizeMol(candidate)
        except Chem.AtomValenceException as error:
            at_fault = error.cause.GetAtomIdx()  # type: ignore[attr-defined]
            atom = candidate.GetAtomWithIdx(at_fault)
            raise StructureError(
                f"“{shown}”: {atom.GetSymbol()} has too many bonds; take one off or give the atom "
                "its charge."
            ) from error
        except Chem.MolSanitizeException:
            continue
        return candidate.GetMol()
    raise StructureError(
        f"“{shown}”: its aromatic atoms can't be given single and double bonds; write a hydrogen "
        "such as [nH] where one is missing, or write the double bonds."
    )


def _turned(molecule: Chem.Mol, turn: int) -> Chem.Mol:
    """Return the molecule with its list of atoms begun further on by ``turn`` eighths."""
    count = molecule.GetNumAtoms()
    first = turn * count // _ATOM_ORDERS
    if not first:
        return molecule
    return Chem.RenumberAtoms(molecule, [(first + place) % count for place in range(count)])
