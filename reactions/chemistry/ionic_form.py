"""One way of drawing salts and organometallics that people draw in two: as ions.

Butyllithium is drawn with a line to the lithium or as two ions, sodium hydride as ``[NaH]`` or as
``[Na+].[H-]``, aluminium chloride either way. Comparing them needs one form; for that alone, not
for what is stored or shown.
"""

from __future__ import annotations

from rdkit import Chem

_IONIC_TO_ALL = frozenset({"Li", "Na", "K", "Rb", "Cs", "Mg", "Ca"})
_IONIC_TO_HALOGENS = frozenset({"Al", "Zn", "Cu", "Ag", "Hg", "Mn", "Fe"})
_HALOGENS = frozenset({"F", "Cl", "Br", "I"})


def ionic_form(molecule: Chem.Mol) -> Chem.Mol:
    """Return the molecule with every line from a metal to a non-metal drawn as a pair of ions.

    Lines from groups 1 and 2 go whatever they lead to, hydrogens included; those from a few other
    metals where they lead to a halogen. Composition and mass don't change.
    """
    ionic = Chem.RWMol(molecule)
    for atom in list(ionic.GetAtoms()):
        if atom.GetSymbol() in _IONIC_TO_ALL:
            for _ in range(atom.GetTotalNumHs()):
                _add_hydride(ionic)
                atom.SetFormalCharge(atom.GetFormalCharge() + 1)
            atom.SetNumExplicitHs(0)
            atom.SetNoImplicit(True)
    for bond in list(ionic.GetBonds()):
        _part(ionic, bond.GetBeginAtomIdx(), bond.GetEndAtomIdx())
    Chem.SanitizeMol(ionic)
    return ionic.GetMol()


def _add_hydride(molecule: Chem.RWMol) -> None:
    hydride = Chem.Atom("H")
    hydride.SetFormalCharge(-1)
    molecule.AddAtom(hydride)


def _part(molecule: Chem.RWMol, first: int, second: int) -> None:
    if molecule.GetBondBetweenAtoms(first, second).GetBondType() != Chem.BondType.SINGLE:
        return
    for metal_index, other_index in ((first, second), (second, first)):
        metal = molecule.GetAtomWithIdx(metal_index)
        other = molecule.GetAtomWithIdx(other_index)
        if not _is_ionic(metal.GetSymbol(), other.GetSymbol()):
            continue
        molecule.RemoveBond(first, second)
        metal.SetFormalCharge(metal.GetFormalCharge() + 1)
        other.SetFormalCharge(other.GetFormalCharge() - 1)
        return


def _is_ionic(metal: str, other: str) -> bool:
    if other in _IONIC_TO_ALL or other in _IONIC_TO_HALOGENS:
        return False
    return metal in _IONIC_TO_ALL or (metal in _IONIC_TO_HALOGENS and other in _HALOGENS)
