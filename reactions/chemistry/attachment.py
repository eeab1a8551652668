"""Reading a drawn group and finding where it is attached.

The reader accepts what people and drawing programs produce (labelled ``*``, ``R#``, ``A``,
attachment points of an atom) and hands on one plain form: every attachment point an unlabelled
dummy atom with one single bond.
"""

from __future__ import annotations

import re

from rdkit import Chem
from rdkit.Chem import rdMolDescriptors

from reactions.chemistry.drawings import is_molfile, sanitised, unsanitised
from reactions.chemistry.structures import StructureError

MOST_ATTACHMENT_POINTS = 2
_MOST_ATOMS = 300
_R_GROUP = re.compile(r"\[R\d*\]|\bR\d*\b")
_HOW_TO_MARK = "mark where it is attached with * (for example *C(*)(C(=O)OCC)C(=O)OCC)"
# What an ``A`` (any atom) in a drawing says of its atom.
_ANY_ATOM = {"AtomNull", "AtomAtomicNum 1 != val"}


def read_attached(text: str) -> Chem.Mol:
    """Return the molecule drawn in ``text`` (SMILES or molfile), its attachment points as dummies.

    Raises StructureError, with the remedy, for whatever can't be one addend.
    """
    if not is_molfile(text) and _R_GROUP.search(text):
        raise StructureError(f"R is no atom: {_HOW_TO_MARK}.")
    molecule = unsanitised(text)
    if molecule.GetNumAtoms() > _MOST_ATOMS:
        raise StructureError(
            f"The structure has {molecule.GetNumAtoms()} atoms, more than {_MOST_ATOMS}; "
            "give the addend alone, without the cage."
        )
    _refuse_queries(molecule)
    _make_points_plain(molecule)
    _check_points(molecule)
    addend = sanitised(molecule)
    _check_fragments(addend)
    return addend


def plain_molecule(smiles: str) -> Chem.Mol | None:
    """Return the molecule of a SMILES written by this program, keeping the hydrogen of ``*[H]``.

    None when it can't be read back.
    """
    molecule = Chem.MolFromSmiles(smiles, sanitize=False)
    if molecule is None or Chem.SanitizeMol(molecule, catchErrors=True) != Chem.SANITIZE_NONE:
        return None
    Chem.AssignStereochemistry(molecule, cleanIt=True, force=True)
    return molecule


def group_formula(molecule: Chem.Mol) -> str:
    """Return the formula of what is attached, in Hill order, without the attachment points."""
    formula = rdMolDescriptors.CalcMolFormula(molecule, True, True)
    return re.sub(r"\*\d*", "", formula)


def _refuse_queries(molecule: Chem.RWMol) -> None:
    for atom in molecule.GetAtoms():
        if atom.HasQuery() and atom.DescribeQuery().strip() not in _ANY_ATOM:
            raise StructureError(
                f"Atom {atom.GetIdx() + 1} stands for several elements; "
                "an addend needs one element at each place."
            )
    if any(bond.HasQuery() for bond in molecule.GetBonds()):
        raise StructureError(
            "A bond stands for several kinds of bond; an addend needs single, double, triple or "
            "aromatic bonds."
        )


def _make_points_plain(molecule: Chem.RWMol) -> None:
    for atom in list(molecule.GetAtoms()):
        if atom.GetAtomicNum() == 0:
            for bond in atom.GetBonds():
                if bond.GetBondType() == Chem.BondType.DATIVE:
                    bond.SetBondType(Chem.BondType.SINGLE)
            molecule.ReplaceAtom(atom.GetIdx(), Chem.Atom(0))
        else:
            atom.SetAtomMapNum(0)


def _check_points(molecule: Chem.RWMol) -> None:
    points = [atom for atom in molecule.GetAtoms() if atom.GetAtomicNum() == 0]
    if not points:
        raise StructureError(f"Nothing says where this is bonded to the cage: {_HOW_TO_MARK}.")
    if len(points) > MOST_ATTACHMENT_POINTS:
        raise StructureError(
            f"{len(points)} places are marked with *, but one addition bonds an addend to one or "
            "two cage atoms; mark those of one addition."
        )
    for point in points:
        bonds = point.GetBonds()
        if len(bonds) != 1 or bonds[0].GetBondType() != Chem.BondType.SINGLE:
            raise StructureError(
                "Each * stands for one cage atom and takes exactly one single bond; "
                "write a second * for a second cage atom."
            )
        if bonds[0].GetOtherAtom(point).GetAtomicNum() == 0:
            raise StructureError("Two * are bonded to each other; put the addend between them.")


def _check_fragments(molecule: Chem.Mol) -> None:
    fragments = Chem.GetMolFrags(molecule, asMols=True, sanitizeFrags=False)
    attached = [each for each in fragments if any(a.GetAtomicNum() == 0 for a in each.GetAtoms())]
    if len(attached) > 1:
        raise StructureError(
            "Two separate groups carry *; give each as an addend of its own "
            "(a group R and a hydrogen are two addends)."
        )
    for fragment in fragments:
        if fragment not in attached and Chem.GetFormalCharge(fragment) == 0:
            raise StructureError(
                f"“{Chem.MolToSmiles(fragment)}” stands beside the addend and isn't bonded to it; "
                "take it out, or mark where it is attached with *."
            )
