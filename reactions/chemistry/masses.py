"""Molar masses and formulas, from the structure or from the formula.

Average masses use RDKit's table of standard atomic weights (IUPAC abridged values: C 12.011,
H 1.008, N 14.007, O 15.999); monoisotopic masses use the most abundant isotope of each element, and
of an ion they count the electrons (0.00055 each) that it lacks or has beyond its atoms'.
"""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache

from rdkit import Chem, rdBase
from rdkit.Chem import Descriptors, rdMolDescriptors

from reactions.chemistry.structures import StructureError, parse_smiles

_PART = re.compile(r"([A-Z][a-z]?)(\d*)")
_HELD_IN = re.compile(r"\s*@\s*")
_LARGEST_COUNT = 10_000
_FEWEST_CARBONS = 20

# A point group with the running number of the isomer: Ih, D5h(6), C2v, Cs, D2(22).
_POINT_GROUP = r"(?:I|T|O|[CDS]\d{1,2}|C[si])[hdv]?(?:\(\d+\))?"
# C60, C60-Ih, C78-C2v(3), (C60-Ih), C60(Ih), Ih-C80, Sc3N@C80, Sc3N@Ih-C80, Li+@C60, C59N.
_CAGE = re.compile(
    rf"(?:(?P<held>[A-Z][A-Za-z0-9]*)[+-]?\s*@\s*)?\(?(?:{_POINT_GROUP}-)?"
    rf"(?P<cage>C\d{{2,3}}(?:[A-Z][a-z]?\d*)*)(?:-{_POINT_GROUP}|\({_POINT_GROUP}\))?\)?"
)


def formula(smiles: str) -> str:
    """Return the molecular formula in Hill order, charge last. Raises StructureError."""
    return str(rdMolDescriptors.CalcMolFormula(_substance(smiles)))


@lru_cache(maxsize=4096)
def molar_mass_g_per_mol(smiles: str) -> float:
    """Return the average molar mass in g/mol, all dot-separated parts together.

    ``O=S(=O)([O-])[O-].[Cu+2].O.O.O.O.O`` is copper sulfate pentahydrate. Raises StructureError.
    """
    return float(Descriptors.MolWt(_substance(smiles)))  # type: ignore[attr-defined]


def monoisotopic_mass(smiles: str) -> float:
    """Return the monoisotopic mass in unified atomic mass units. Raises StructureError."""
    return float(rdMolDescriptors.CalcExactMolWt(_substance(smiles)))


def _substance(smiles: str) -> Chem.Mol:
    """Return the molecule of something that can be weighed."""
    molecule = parse_smiles(smiles)
    if any(atom.GetAtomicNum() == 0 for atom in molecule.GetAtoms()):
        raise StructureError(
            "A structure with an open position * has no mass of its own; write the whole substance."
        )
    return molecule


@lru_cache(maxsize=1024)
def formula_mass(text: str) -> float:
    """Return the average molar mass in g/mol of a formula such as ``C72H14O2`` or ``Sc3N@C80``.

    The cage and what it holds are joined by ``@``; subscript digits are read too. Raises
    StructureError on anything that is not a formula of known elements.
    """
    table = Chem.GetPeriodicTable()
    total = 0.0
    for part in _HELD_IN.split(_typed(text)):
        if not part or _PART.sub("", part):
            raise StructureError(
                f"“{text}” is not a formula; write element symbols and counts, such as C60 or "
                "Sc3N@C80."
            )
        for symbol, count in _PART.findall(part):
            total += _atomic_weight(table, symbol, text) * _count(count, text)
    return total


def cage_formula(cage: str) -> str:
    """Return the formula of a cage by its name, without its symmetry.

    ``C60-Ih`` gives ``C60``, ``Sc3N@Ih-C80`` gives ``Sc3N@C80``. Raises StructureError for what is
    no cage, that is, for fewer than 20 carbons, or for an odd number of them.
    """
    match = _CAGE.fullmatch(_typed(cage))
    if match is None:
        raise StructureError(
            f"“{cage}” is no cage known here; write it as C60, C70, C78-C2v or Sc3N@C80."
        )
    name = match["cage"]
    carbons = sum(int(count or 1) for symbol, count in _PART.findall(name) if symbol == "C")
    if carbons < _FEWEST_CARBONS:
        raise StructureError(
            f"“{cage}” is no fullerene: it has {carbons} carbons and the smallest has "
            f"{_FEWEST_CARBONS}; write C60, C70 or such."
        )
    if carbons % 2 and name == f"C{carbons}":
        raise StructureError(
            f"“{cage}” is no fullerene: every atom of a closed cage has three neighbours, so their "
            "number is even; write C60, C70 or such."
        )
    return f"{match['held']}@{name}" if match["held"] else name


def cage_molar_mass_g_per_mol(cage: str) -> float:
    """Return the average molar mass of a cage in g/mol: C60 720.66, C70 840.77.

    Takes the names that ``cage_formula`` takes; the symmetry adds no mass. Raises StructureError.
    """
    return formula_mass(cage_formula(cage))


def _typed(text: str) -> str:
    """Return text as if typed on a plain keyboard: subscript digits and wide signs made plain."""
    return unicodedata.normalize("NFKC", text).strip()


def _atomic_weight(table: Chem.PeriodicTable, symbol: str, text: str) -> float:
    try:
        with rdBase.BlockLogs():
            return float(table.GetAtomicWeight(symbol))
    except RuntimeError:
        raise StructureError(f"“{symbol}” in “{text}” is not an element.") from None


def _count(digits: str, text: str) -> int:
    count = int(digits[:9]) if digits else 1
    if not 0 < count <= _LARGEST_COUNT:
        raise StructureError(f"“{text}” counts {digits} of one element; write 1 to 10000.")
    return count
