"""Finding addends by a part of their structure.

A query is matched against the search form of an addend (:mod:`reactions.chemistry.addends`): the
addend with the one or two cage carbons that carry it. A match has to hold at least one atom of the
addend itself, and the rest of the cage, ``*`` in the search form, matches nothing: so benzene finds
phenyl groups and not the cage.

Screening: RDKit's pattern fingerprint, where every bit that the query sets is set by each structure
that contains it. On addends it screens well; whole adducts set nearly every bit.

Limit: a query that looks at neighbours of the attached cage carbons (``[$(C~[!#6])]`` on such a
carbon) sees ``*`` there.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal, get_args

import numpy as np
from numpy.typing import NDArray
from rdkit import Chem, DataStructs, rdBase

from reactions.chemistry.attachment import plain_molecule
from reactions.chemistry.drawings import LONGEST_TEXT, is_molfile, sanitised, short, unsanitised
from reactions.chemistry.ligands import METALS
from reactions.chemistry.structures import StructureError

QueryKind = Literal["auto", "smiles", "smarts", "molfile"]
FINGERPRINT_BITS = 2048
MOST_QUERY_ATOMS = 100
_WORD_BITS = 64
_MOLECULES_KEPT = 20_000  # about 200 MB at most
_MOST_ATTACHED_CARBONS = 2


@dataclass(frozen=True)
class QueryOutline:
    """What a search has to know of a query before it matches anything.

    ``smarts`` says the query in SMARTS, for a database, and ``fingerprint`` holds the bits that
    every structure containing it sets. A database doesn't know the rules about the cage:
    ``may_match_cage`` says that it could find more than is right. ``is_for_database`` says that it
    neither finds less nor runs away: databases drop the hydrogen of ``*[H]``, a query of one or two
    atoms screens nothing, and one in several parts can take minutes that no time limit of a
    database cuts short.
    """

    smarts: str
    fingerprint: bytes
    may_match_cage: bool
    is_for_database: bool


@dataclass(frozen=True)
class Query:
    """A substructure to look for."""

    molecule: Chem.Mol
    outline: QueryOutline


def compile_query(text: str, kind: QueryKind = "auto") -> Query:
    """Read a query.

    SMILES and molfiles are read as drawn parts of a structure: hydrogens aren't counted,
    aromaticity is perceived, ``*`` (``R#``, ``A``) is any atom, a line to a metal any bond. SMARTS
    means what it says. ``auto`` takes a molfile for what it is, then tries SMILES, then SMARTS.

    Raises StructureError saying what is wrong.
    """
    if kind not in get_args(QueryKind):
        raise StructureError(f"“{kind}” is no kind of query; choose auto, smiles, smarts, molfile.")
    if not text.strip():
        raise StructureError("No structure is given to look for; draw one or type its SMILES.")
    if len(text) > LONGEST_TEXT:
        raise StructureError("The query is too long to read; look for a smaller part.")
    with rdBase.BlockLogs():
        molecule = _READERS[kind](text)
        if molecule.GetNumAtoms() > MOST_QUERY_ATOMS:
            raise StructureError(
                f"The query has {molecule.GetNumAtoms()} atoms, more than {MOST_QUERY_ATOMS}; "
                "look for a smaller part."
            )
        outline = QueryOutline(
            smarts=Chem.MolToSmarts(molecule),
            fingerprint=_bits(molecule),
            may_match_cage=_may_match_cage(molecule),
            is_for_database=_is_for_database(molecule),
        )
    return Query(molecule, outline)


def fingerprint(search_smiles: str) -> bytes:
    """Return the bits that screen an addend: 2048 of them as 256 bytes."""
    return _bits(_search_form(search_smiles).molecule)


def outline_query(text: str, kind: QueryKind = "auto") -> QueryOutline:
    """Read a query as ``compile_query`` does, and return its outline."""
    return compile_query(text, kind).outline


def match(query: Query, search_smiles: Iterable[str]) -> list[int]:
    """Return the places, counted from 0, of the search forms that contain the query."""
    rules = _CageRules()
    parameters = Chem.SubstructMatchParameters()
    parameters.maxMatches = 1  # type: ignore[assignment]
    parameters.uniquify = False  # type: ignore[assignment]
    parameters.setExtraFinalCheck(rules.allow)
    found = []
    for place, smiles in enumerate(search_smiles):
        rules.form = _search_form(smiles)
        if rules.form.molecule.HasSubstructMatch(query.molecule, parameters):
            found.append(place)
    return found


def match_text(text: str, kind: QueryKind, search_smiles: Sequence[str]) -> list[int]:
    """Return what ``match`` returns, for a query still to be read."""
    return match(compile_query(text, kind), search_smiles)


def bit_matrix(fingerprints: Sequence[bytes]) -> NDArray[np.uint64]:
    """Return fingerprints as a matrix with one row each, 64 bits to a word."""
    words = FINGERPRINT_BITS // _WORD_BITS
    joined = np.frombuffer(b"".join(fingerprints), dtype=np.uint64)
    return joined.reshape(len(fingerprints), words)


def screen(matrix: NDArray[np.uint64], query_fingerprint: bytes) -> NDArray[np.intp]:
    """Return the rows that set every bit of the query; only those can contain it."""
    wanted = np.frombuffer(query_fingerprint, dtype=np.uint64)
    rows = np.arange(len(matrix))
    for word in np.flatnonzero(wanted):
        rows = rows[(matrix[rows, word] & wanted[word]) == wanted[word]]
    return rows


@dataclass(frozen=True)
class _SearchForm:
    molecule: Chem.Mol
    rest_of_cage: frozenset[int]
    attached_carbons: frozenset[int]


class _CageRules:
    """What a match may use of the search form at hand."""

    form: _SearchForm

    def allow(self, _molecule: Chem.Mol, atoms: Iterable[int]) -> bool:
        used = frozenset(atoms)
        if used & self.form.rest_of_cage:
            return False
        return not used <= self.form.attached_carbons


@lru_cache(maxsize=_MOLECULES_KEPT)
def _search_form(search_smiles: str) -> _SearchForm:
    molecule = plain_molecule(search_smiles)
    if molecule is None:
        raise StructureError(f"“{short(search_smiles)}” can't be read back.")
    rest_of_cage = [atom for atom in molecule.GetAtoms() if atom.GetAtomicNum() == 0]
    attached = {atom.GetNeighbors()[0].GetIdx() for atom in rest_of_cage}
    return _SearchForm(
        molecule, frozenset(atom.GetIdx() for atom in rest_of_cage), frozenset(attached)
    )


def _bits(molecule: Chem.Mol) -> bytes:
    bits = Chem.PatternFingerprint(molecule, fpSize=FINGERPRINT_BITS)
    return bytes(DataStructs.BitVectToBinaryText(bits))


def _from_drawing(text: str) -> Chem.Mol:
    molecule = sanitised(unsanitised(text))
    wildcards = Chem.AdjustQueryParameters.NoAdjustments()
    wildcards.makeDummiesQueries = True  # type: ignore[assignment]
    query = Chem.RWMol(Chem.AdjustQueryProperties(molecule, wildcards))
    any_bond = Chem.MolFromSmarts("*~*").GetBondWithIdx(0)
    for bond in list(query.GetBonds()):
        if {bond.GetBeginAtom().GetAtomicNum(), bond.GetEndAtom().GetAtomicNum()} & METALS:
            query.ReplaceBond(bond.GetIdx(), any_bond)
    return query.GetMol()


def _from_smiles(text: str) -> Chem.Mol:
    if is_molfile(text):
        raise StructureError("This is a molfile, not SMILES; choose molfile.")
    return _from_drawing(text)


def _from_molfile(text: str) -> Chem.Mol:
    if not is_molfile(text):
        raise StructureError("This isn't a molfile; choose SMILES or SMARTS, or draw it.")
    return _from_drawing(text)


def _from_smarts(text: str) -> Chem.Mol:
    molecule = Chem.MolFromSmarts(text.strip())
    if molecule is None or molecule.GetNumAtoms() == 0:
        raise StructureError(
            f"“{short(text.strip())}” can't be read as SMARTS; check its brackets and ring numbers."
        )
    molecule.UpdatePropertyCache(strict=False)
    Chem.FastFindRings(molecule)
    return molecule


def _from_any(text: str) -> Chem.Mol:
    if is_molfile(text):
        return _from_drawing(text)
    if _looks_like_smiles(text.strip()):
        return _from_drawing(text)
    try:
        return _from_smarts(text)
    except StructureError:
        raise StructureError(
            f"“{short(text.strip())}” can't be read, neither as SMILES nor as SMARTS; "
            "check its brackets and ring numbers."
        ) from None


def _looks_like_smiles(text: str) -> bool:
    has_query_bonds = re.search(r"[~:@!]", re.sub(r"\[[^\]]*\]", "", text)) is not None
    molecule = None if has_query_bonds else Chem.MolFromSmiles(text, sanitize=False)
    if molecule is None:
        return False
    problems = [problem.GetType() for problem in Chem.DetectChemistryProblems(molecule)]
    return "AtomKekulizeException" not in problems  # an aromatic atom in no ring: cc, c(c)n


_READERS: dict[QueryKind, Callable[[str], Chem.Mol]] = {
    "auto": _from_any,
    "smiles": _from_smiles,
    "smarts": _from_smarts,
    "molfile": _from_molfile,
}


def _may_match_cage(query: Chem.Mol) -> bool:
    # Two atoms can lie on the two cage carbons; three can't unless one is on the rest of the cage.
    if query.GetNumAtoms() <= _MOST_ATTACHED_CARBONS or "$" in Chem.MolToSmarts(query):
        return True
    rest_of_cage = Chem.MolFromSmiles("*C(*)(*)C").GetAtomWithIdx(0)
    return any(atom.Match(rest_of_cage) for atom in query.GetAtoms())


def _is_for_database(query: Chem.Mol) -> bool:
    if query.GetNumAtoms() <= _MOST_ATTACHED_CARBONS or len(Chem.GetMolFrags(query)) > 1:
        return False
    methane = Chem.AddHs(Chem.MolFromSmiles("C"))
    carbon, hydrogen = methane.GetAtomWithIdx(0), methane.GetAtomWithIdx(1)
    return not any(atom.Match(hydrogen) and not atom.Match(carbon) for atom in query.GetAtoms())
