"""How much of a molecule is energetic: two rules of thumb for organic azides and their like."""

from __future__ import annotations

from functools import cache

from rdkit import Chem

_CARBON = 6
_AZIDE = "[#7]~[#7+;D2]~[#7;D1]"
_ENERGETIC_GROUPS = (
    _AZIDE,
    "[#6]=[#7+]=[#7-]",  # diazo, in both ways of drawing it
    "[#6-][#7+]#[#7]",
    "[#6;+0][#7+]#[#7]",  # diazonium
    "[NX3+](=O)[O-]",  # nitro, nitrate ester, nitramine
    "[OX2][OX2]",  # peroxide, peracid
    "Cl(=O)(=O)=O",  # perchlorate
)


def azide_ratio(molecule: Chem.Mol) -> float | None:
    """Return (N_C + N_O) / N_N over the atoms of a molecule that holds an organic azide, else None.

    At 3 or more an organic azide may be isolated with care; below, it may explode (from memory,
    after Bräse, Gil, Knepper, Zimmermann, Angew. Chem. Int. Ed. 2005, 44, 5188). Ionic azides have
    no carbon bound to the azide and give None.
    """
    if not molecule.HasSubstructMatch(_pattern(f"[#6]~{_AZIDE}")):
        return None
    symbols = [atom.GetSymbol() for atom in molecule.GetAtoms()]
    return (symbols.count("C") + symbols.count("O")) / symbols.count("N")


def carbons_per_energetic_group(molecule: Chem.Mol) -> float | None:
    """Return the carbon atoms per energetic group (azide, diazo, nitro, peroxide …), or None.

    The rule of six asks for at least six. None means that no such group was recognised, or that
    the substance has no carbon (sodium azide, hydrogen peroxide), of which the rule doesn't speak.
    """
    groups = sum(
        len(molecule.GetSubstructMatches(_pattern(smarts))) for smarts in _ENERGETIC_GROUPS
    )
    carbons = [atom for atom in molecule.GetAtoms() if atom.GetAtomicNum() == _CARBON]
    return len(carbons) / groups if groups and carbons else None


@cache
def _pattern(smarts: str) -> Chem.Mol:
    return Chem.MolFromSmarts(smarts)
