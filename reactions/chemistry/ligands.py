"""Ligands drawn with an ordinary line to a metal, turned into dative bonds.

A chemist draws triphenylphosphine or pyridine on a metal with a plain line. Counted as a covalent
bond, that line gives the donor one valence too many, which a structure reader either refuses
(pyridine) or makes up for with a hydrogen that isn't there (a phosphine read as PH). The pair of
electrons is the donor's, so the bond is dative and counts for nothing in the donor's valence.
"""

from __future__ import annotations

from rdkit import Chem

# Groups 3 to 12, with lanthanoids and actinoids.
METALS = frozenset([*range(21, 31), *range(39, 49), *range(57, 81), *range(89, 113)])
_DONORS = frozenset([7, 15, 33])  # N, P, As: three bonds and one pair
_BONDS_OF_A_DONOR = 3


def bind_ligands_datively(molecule: Chem.RWMol) -> None:
    """Make the bond from each neutral N, P or As that has its three other bonds dative, in place.

    Call it before sanitising: afterwards the phantom hydrogens are already counted.
    """
    for atom in molecule.GetAtoms():
        bond = _bond_to_metal(atom)
        if bond is None or not _is_saturated_without(atom, bond):
            continue
        metal = bond.GetOtherAtom(atom).GetIdx()
        molecule.RemoveBond(atom.GetIdx(), metal)
        molecule.AddBond(atom.GetIdx(), metal, Chem.BondType.DATIVE)


def _bond_to_metal(atom: Chem.Atom) -> Chem.Bond | None:
    if atom.GetAtomicNum() not in _DONORS or atom.GetFormalCharge() or atom.GetNumExplicitHs():
        return None
    bonds = [
        bond
        for bond in atom.GetBonds()
        if bond.GetBondType() == Chem.BondType.SINGLE
        and bond.GetOtherAtom(atom).GetAtomicNum() in METALS
    ]
    return bonds[0] if len(bonds) == 1 else None


def _is_saturated_without(atom: Chem.Atom, metal_bond: Chem.Bond) -> bool:
    others = [bond for bond in atom.GetBonds() if bond.GetIdx() != metal_bond.GetIdx()]
    order: float = sum(bond.GetBondTypeAsDouble() for bond in others)
    return order == _BONDS_OF_A_DONOR
