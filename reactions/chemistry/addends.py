"""Addends as structures: the group that one addition attaches, and where it is attached.

An addend is written with ``*`` for each cage atom that it is bonded to: ``*C(*)(C(=O)OCC)C(=O)OCC``
is the bridge that diethyl bromomalonate leaves on a [6,6] bond, ``*c1ccccc1`` a phenyl group. Equal
addends have equal ``smiles``, however they were drawn.

For searching, the cage atoms are written out: with two attachment points as two bonded carbons,
with one as a single carbon, each completed by ``*`` for the rest of the cage. A ring that is closed
through the cage (cyclopropane, pyrrolidine, cyclohexene) is then a ring to a query as well.

Source of masses: RDKit's table of IUPAC atomic weights and isotope masses.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from rdkit import Chem, rdBase
from rdkit.Chem import Descriptors, rdMolDescriptors

from reactions.chemistry.attachment import group_formula, plain_molecule, read_attached
from reactions.chemistry.structures import StructureError
from reactions.chemistry.tables import read_csv_table

_CAGE_NEIGHBOURS = 3  # every cage atom has three bonds within the cage
_MOST_ROUND_TRIPS = 12
_SMALLEST_WITH_GEOMETRY = 8  # ring size; trans-cyclooctene can be bottled


@dataclass(frozen=True)
class AddendStructure:
    """What is known of an addend from its structure alone.

    ``smiles``: canonical, attachment points as ``*``; the identity of the addend.
    ``attachment_points``: cage atoms bonded to it, 1 or 2.
    ``formula``: of the attached group, in Hill order, without the cage.
    ``mass_g_per_mol``: average mass that one addition of this addend adds to the cage. A reaction
    that attaches R and H adds two addends.
    ``monoisotopic_mass``: the same with the principal isotope of each element, in Da; electron
    masses of ions are not counted.
    ``search_smiles``: the addend with its attached cage carbons, double bonds written out (some
    aromatic forms of adducts don't parse in every version of a toolkit).
    """

    smiles: str
    attachment_points: int
    formula: str
    mass_g_per_mol: float
    monoisotopic_mass: float
    search_smiles: str


@dataclass(frozen=True)
class UsualAddend:
    """An addend that the trade has a name for; ``families`` are keys of the family table."""

    name: str
    structure: AddendStructure
    families: tuple[str, ...]
    source: str


def read_addend(structure: str) -> AddendStructure:
    """Read an addend from SMILES or from a molfile (V2000 or V3000).

    Attachment points are ``*``, with or without label (``[*:1]``), and in a molfile also ``R#``,
    ``A`` or the attachment point of an atom. Counter-ions may stand beside the group.

    Raises StructureError when the text is no structure, when nothing says where it is attached, or
    when what is drawn can't be one addend; the message says what to change.
    """
    with rdBase.BlockLogs():
        drawn = read_attached(structure)
        _forget_geometry_fixed_by_cage(drawn)
        smiles, molecule = _settled(drawn)
        return AddendStructure(
            smiles=smiles,
            attachment_points=sum(atom.GetAtomicNum() == 0 for atom in molecule.GetAtoms()),
            formula=group_formula(molecule),
            mass_g_per_mol=Descriptors.MolWt(molecule),  # type: ignore[attr-defined]
            monoisotopic_mass=rdMolDescriptors.CalcExactMolWt(molecule),
            search_smiles=_kekule_smiles(_on_cage_atoms(molecule)),
        )


@lru_cache(maxsize=1)
def usual_addends() -> tuple[UsualAddend, ...]:
    """Return the addends of the table ``addends.csv``, in its order."""
    return tuple(
        UsualAddend(
            name=row["name"],
            structure=read_addend(row["smiles"]),
            families=tuple(row["families"].split()),
            source=row["source"],
        )
        for row in read_csv_table("addends.csv")
    )


def addend_by_name(name: str) -> UsualAddend | None:
    """Return the usual addend called ``name`` (case and outer blanks don't matter), or None."""
    wanted = name.strip().casefold()
    return next((each for each in usual_addends() if each.name.casefold() == wanted), None)


def _settled(molecule: Chem.Mol) -> tuple[str, Chem.Mol]:
    """Return a canonical SMILES that reads back to itself, and the molecule read from it.

    Writing and reading can move the canonical form, so repeat until it stands; should it run in a
    circle, the first form of the circle in alphabetical order stands for all.
    """
    forms: dict[str, Chem.Mol] = {}
    form = Chem.MolToSmiles(molecule)
    while form not in forms:
        again = plain_molecule(form)
        if again is None or len(forms) > _MOST_ROUND_TRIPS:
            raise StructureError(
                "This structure changes each time it is written down; "
                "draw it with single and double bonds instead of aromatic ones."
            )
        forms[form] = again
        form = Chem.MolToSmiles(again)
    circle = list(forms)[list(forms).index(form) :]
    return min(circle), forms[min(circle)]


def _kekule_smiles(molecule: Chem.Mol) -> str:
    kekule = Chem.RWMol(molecule)
    Chem.Kekulize(kekule, clearAromaticFlags=True)
    return Chem.MolToSmiles(kekule)


def _forget_geometry_fixed_by_cage(addend: Chem.Mol) -> None:
    """Drop cis/trans marks that say nothing, because the ring closed through the cage is small.

    A diene drawn as a chain gets a geometry from its coordinates; typed, it has none.
    """
    on_cage = _on_cage_atoms(addend)
    rings = on_cage.GetRingInfo()
    for bond in addend.GetBonds():
        smallest = rings.MinBondRingSize(bond.GetIdx())  # 0 outside rings
        if bond.GetBondType() == Chem.BondType.DOUBLE and 0 < smallest < _SMALLEST_WITH_GEOMETRY:
            bond.SetStereo(Chem.BondStereo.STEREONONE)
            for end in (bond.GetBeginAtom(), bond.GetEndAtom()):
                for neighbour in end.GetBonds():
                    neighbour.SetBondDir(Chem.BondDir.NONE)


def _on_cage_atoms(addend: Chem.Mol) -> Chem.Mol:
    molecule = Chem.RWMol(addend)
    points = [atom.GetIdx() for atom in molecule.GetAtoms() if atom.GetAtomicNum() == 0]
    for point in points:
        molecule.ReplaceAtom(point, Chem.Atom(6))
    if len(points) > 1:
        molecule.AddBond(points[0], points[1], Chem.BondType.SINGLE)
    for point in points:
        for _ in range(_CAGE_NEIGHBOURS - (len(points) - 1)):
            rest_of_cage = molecule.AddAtom(Chem.Atom(0))
            molecule.AddBond(point, rest_of_cage, Chem.BondType.SINGLE)
    Chem.SanitizeMol(molecule)
    return molecule.GetMol()
