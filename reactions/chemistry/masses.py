"""Molar masses and formulas, from the structure or from the formula.

Average masses use RDKit's table of standard atomic weights (IUPAC abridged values: C 12.011,
H 1.008, N 14.007, O 15.999); monoisotopic masses use the most abundant isotope of each element.
"""

from __future__ import annotations

import re
from functools import lru_cache

from rdkit import Chem
from rdkit.Chem import Descriptors, rdMolDescriptors

from reactions.chemistry.structures import StructureError, parse_smiles

_PART = re.compile(r"([A-Z][a-z]?)(\d*)")
_ENDOHEDRAL = re.compile(r"\s*[@＠]\s*")
# Point groups beside the formula: C60-Ih, C78-C2v, C60(Ih), Sc3N@Ih-C80.
_SYMMETRY = re.compile(r"\([^)]*\)|-(?:I|D\d|C\d|C[sip]|T|S\d|O)\w*\Z|(?<=@)[ITDCSO]\w*-")
_LARGEST_COUNT = 10_000


def formula(smiles: str) -> str:
    """Return the molecular formula in Hill order, charge last. Raises StructureError."""
    return str(rdMolDescriptors.CalcMolFormula(parse_smiles(smiles)))


def molar_mass_g_per_mol(smiles: str) -> float:
    """Return the average molar mass in g/mol, all dot-separated parts together.

    ``O=S(=O)([O-])[O-].[Cu+2].O.O.O.O.O`` is copper sulfate pentahydrate. Raises StructureError.
    """
    return _positive(Descriptors.MolWt(parse_smiles(smiles)), smiles)  # type: ignore[attr-defined]


def monoisotopic_mass(smiles: str) -> float:
    """Return the monoisotopic mass in unified atomic mass units. Raises StructureError."""
    return _positive(rdMolDescriptors.CalcExactMolWt(parse_smiles(smiles)), smiles)


def _positive(mass: float, smiles: str) -> float:
    if not mass > 0:
        raise StructureError(f"“{smiles}” weighs nothing; draw real atoms, not only marks.")
    return float(mass)


@lru_cache(maxsize=1024)
def formula_mass(text: str) -> float:
    """Return the average molar mass in g/mol of a formula such as ``C72H14O2`` or ``Sc3N@C80``.

    The cage and what it holds are joined by ``@``. Raises StructureError on anything that is not a
    formula of known elements.
    """
    table = Chem.GetPeriodicTable()
    total = 0.0
    for part in _ENDOHEDRAL.split(text.strip()):
        if not part or _PART.sub("", part):
            raise StructureError(
                f"“{text}” is not a formula; write element symbols and counts, such as C60 or "
                "Sc3N@C80."
            )
        for symbol, count in _PART.findall(part):
            total += _atomic_weight(table, symbol, text) * _count(count, text)
    return total


def _atomic_weight(table: Chem.PeriodicTable, symbol: str, text: str) -> float:
    try:
        return float(table.GetAtomicWeight(symbol))
    except RuntimeError:
        raise StructureError(f"“{symbol}” in “{text}” is not an element.") from None


def _count(digits: str, text: str) -> int:
    count = int(digits[:9]) if digits else 1
    if not 0 < count <= _LARGEST_COUNT:
        raise StructureError(f"“{text}” counts {digits} of one element; write 1 to 10000.")
    return count


def cage_molar_mass_g_per_mol(cage: str) -> float:
    """Return the average molar mass of a cage in g/mol: C60 720.66, C70 840.77.

    Takes a name such as ``C60``, ``C84``, ``C78-C2v``, ``C60-Ih``, ``C59N`` or ``Sc3N@C80``; the
    symmetry adds no mass. Raises StructureError when it holds no carbon cage.
    """
    plain = _SYMMETRY.sub("", cage.strip())
    mass = formula_mass(plain)
    cage_part = _ENDOHEDRAL.split(plain)[-1]
    carbons = sum(int(count or 1) for symbol, count in _PART.findall(cage_part) if symbol == "C")
    if carbons < 20:
        raise StructureError(
            f"“{cage}” is no fullerene: its formula has {carbons} carbons; write C60, C70 or such."
        )
    return mass
