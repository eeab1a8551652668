"""Reading a drawn group and finding where it is attached.

The reader accepts what people and drawing programs produce (labelled ``*``, ``R#``, ``A``,
attachment points of an atom, plain lines from ligands to metals) and hands on one plain form:
every attachment point an unlabelled dummy atom with one single bond.
"""

from __future__ import annotations

import re

from rdkit import Chem

from reactions.chemistry.ligands import bind_ligands_datively
from reactions.chemistry.structures import StructureError

MOST_ATTACHMENT_POINTS = 2
_LONGEST_TEXT = 20_000
_MOST_ATOMS = 300
_MOLFILE = re.compile(r"V[23]000|^M {2}END", re.MULTILINE)
_R_GROUP = re.compile(r"\[R#?\d*\]|\bR\d*\b")
_HOW_TO_MARK = "mark where it is attached with * (for example *C(*)(C(=O)OCC)C(=O)OCC)"
# What an ``A`` (any atom) in a drawing says of its atom.
_ANY_ATOM = {"AtomNull", "AtomAtomicNum 1 != val"}
# Nitro groups drawn with five bonds, carbonyl ligands drawn with a plain line.
_TIDY = Chem.SANITIZE_CLEANUP | Chem.SANITIZE_CLEANUP_ORGANOMETALLICS


def is_molfile(text: str) -> bool:
    """Say whether ``text`` is a molfile rather than a line notation."""
    return _MOLFILE.search(text) is not None


def read_attached(text: str) -> Chem.Mol:
    """Return the molecule drawn in ``text`` (SMILES or molfile), its attachment points as dummies.

    Raises StructureError, with the remedy, for whatever can't be one addend.
    """
    molecule = _molecule(text)
    _refuse_queries(molecule)
    _make_points_plain(molecule)
    _check_points(molecule)
    bind_ligands_datively(molecule)
    sanitised = _sanitised(molecule)
    _check_fragments(sanitised)
    return sanitised


def plain_molecule(smiles: str) -> Chem.Mol | None:
    """Return the molecule of a SMILES written by this program, keeping the hydrogen of ``*[H]``.

    None when the SMILES, though well formed, can't be read back.
    """
    molecule = Chem.MolFromSmiles(smiles, sanitize=False)
    if Chem.SanitizeMol(molecule, catchErrors=True) != Chem.SANITIZE_NONE:
        return None
    Chem.AssignStereochemistry(molecule, cleanIt=True, force=True)
    return molecule


def _molecule(text: str) -> Chem.RWMol:
    if not text.strip():
        raise StructureError("No structure is given; draw the addend or type its SMILES.")
    if len(text) > _LONGEST_TEXT:
        raise StructureError("The structure is too long to read; give the addend alone.")
    molecule = _from_molfile(text) if is_molfile(text) else _from_smiles(text.strip())
    if molecule.GetNumAtoms() == 0:
        raise StructureError("The drawing is empty; draw the addend or type its SMILES.")
    if molecule.GetNumAtoms() > _MOST_ATOMS:
        raise StructureError(
            f"The structure has {molecule.GetNumAtoms()} atoms, more than {_MOST_ATOMS}; "
            "give the addend alone, without the cage."
        )
    return Chem.RWMol(molecule)


def _from_molfile(text: str) -> Chem.Mol:
    try:
        molecule = Chem.MolFromMolBlock(text, sanitize=False, removeHs=False)
    except RuntimeError:  # an element symbol that RDKit doesn't know
        molecule = None
    if molecule is None:
        raise StructureError("The drawing can't be read as a molfile; draw it again.")
    Chem.ExpandAttachmentPoints(molecule)
    return molecule


def _from_smiles(text: str) -> Chem.Mol:
    molecule = Chem.MolFromSmiles(text, sanitize=False)
    if molecule is None:
        remedy = "check its brackets and ring numbers"
        if _R_GROUP.search(text):
            remedy = _HOW_TO_MARK.replace("with *", "with * instead of R")
        raise StructureError(f"“{_short(text)}” can't be read as SMILES; {remedy}.")
    return molecule


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


def _sanitised(molecule: Chem.RWMol) -> Chem.Mol:
    Chem.SanitizeMol(molecule, _TIDY)
    problems = Chem.DetectChemistryProblems(molecule)
    if problems:
        raise StructureError(_in_words(problems[0], molecule))
    Chem.SanitizeMol(molecule)
    Chem.AssignStereochemistry(molecule, cleanIt=True, force=True)
    return Chem.RemoveHs(molecule)


def _in_words(problem: Chem.MolSanitizeException, molecule: Chem.RWMol) -> str:
    kind: str = problem.GetType()  # type: ignore[attr-defined]
    if kind in {"AtomValenceException", "AtomKekulizeException"}:
        atom = molecule.GetAtomWithIdx(problem.GetAtomIdx())  # type: ignore[attr-defined]
        place = f"{atom.GetSymbol()} (atom {atom.GetIdx() + 1})"
        if kind == "AtomValenceException":
            return f"{place} has too many bonds; take one off or give the atom its charge."
        return f"{place} is written as aromatic but stands in no ring; write it as a plain atom."
    return (
        "The aromatic ring can't be given alternating bonds; "
        "check its atoms (a pyrrole nitrogen is written [nH]) or draw single and double bonds."
    )


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


def _short(text: str) -> str:
    return text if len(text) <= 60 else f"{text[:59]}…"
