"""Line notation and molfiles, from text to a molecule, with what is wrong said in words.

Reading goes in two steps, so that a reader can put drawing conventions right in between:
``unsanitised`` takes the text apart, ``sanitised`` checks valences and perceives aromaticity.
"""

from __future__ import annotations

import re

from rdkit import Chem

from reactions.chemistry.ligands import bind_ligands_datively
from reactions.chemistry.structures import StructureError

LONGEST_TEXT = 20_000
_MOLFILE = re.compile(r"V[23]000|^M {2}END", re.MULTILINE)
# Nitro groups drawn with five bonds, carbonyl ligands drawn with a plain line.
_TIDY = Chem.SANITIZE_CLEANUP | Chem.SANITIZE_CLEANUP_ORGANOMETALLICS


def is_molfile(text: str) -> bool:
    """Say whether ``text`` is a molfile rather than a line notation."""
    return _MOLFILE.search(text) is not None


def unsanitised(text: str) -> Chem.RWMol:
    """Return the molecule written in ``text`` (SMILES or molfile V2000 or V3000) as it stands.

    Raises StructureError when there is none.
    """
    if not text.strip():
        raise StructureError("No structure is given; draw one or type its SMILES.")
    if len(text) > LONGEST_TEXT:
        raise StructureError("The structure is too long to read; give only the part that matters.")
    molecule = _from_molfile(text) if is_molfile(text) else _from_smiles(text.strip())
    if molecule.GetNumAtoms() == 0:
        raise StructureError("The drawing is empty; draw a structure or type its SMILES.")
    return Chem.RWMol(molecule)


def sanitised(molecule: Chem.RWMol) -> Chem.Mol:
    """Return the molecule with valences checked, aromatic rings perceived and hydrogens implied.

    Plain lines from ligands to metals become dative bonds. A hydrogen stays an atom where it is
    all there is (``*[H]``). Raises StructureError naming the atom at fault, counted from 1.
    """
    bind_ligands_datively(molecule)
    Chem.SanitizeMol(molecule, _TIDY)
    try:
        Chem.SanitizeMol(molecule)
    except ValueError as error:
        raise StructureError(_in_words(str(error), molecule)) from error
    Chem.AssignStereochemistry(molecule, cleanIt=True, force=True)
    return Chem.RemoveHs(molecule)


def short(text: str) -> str:
    """Return ``text`` cut to what fits a message."""
    return text if len(text) <= 60 else f"{text[:59]}…"


def _from_molfile(text: str) -> Chem.Mol:
    try:
        molecule = Chem.MolFromMolBlock(text, sanitize=False, removeHs=False)
    except RuntimeError:
        molecule = None
    if molecule is None:
        raise StructureError(
            "The drawing can't be read as a molfile; give each atom an element, "
            "and draw R1, A or * where the structure is attached."
        )
    Chem.ExpandAttachmentPoints(molecule)
    return molecule


def _from_smiles(text: str) -> Chem.Mol:
    molecule = Chem.MolFromSmiles(text, sanitize=False)
    if molecule is None:
        raise StructureError(
            f"“{short(text)}” can't be read as SMILES; check its brackets and ring numbers."
        )
    return molecule


def _in_words(problem: str, molecule: Chem.RWMol) -> str:
    """Say in a chemist's words what RDKit found (``Explicit valence for atom # 3 C, 5, …``)."""
    at = re.search(r"atom #? ?(\d+)", problem)
    place = ""
    if at:
        atom = molecule.GetAtomWithIdx(int(at[1]))
        place = f"{atom.GetSymbol()} (atom {atom.GetIdx() + 1})"
    if place and "valence" in problem:
        return f"{place} has too many bonds; take one off or give the atom its charge."
    if place and "non-ring" in problem:
        return f"{place} is written as aromatic but stands in no ring; write it as a plain atom."
    return (
        "The aromatic ring can't be given alternating bonds; "
        "check its atoms (a pyrrole nitrogen is written [nH]) or draw single and double bonds."
    )
