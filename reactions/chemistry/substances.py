"""Reagents and solvents with their hazard statements, found by key, name or structure.

The tables are ``substances.csv`` and ``hazard_statements.csv``. Classifications follow the
harmonised ones of Regulation (EC) No 1272/2008 where there is one; each row names its source and
how it is known. None of it stands in for the safety data sheet of the bottle in hand.
"""

from __future__ import annotations

import difflib
import unicodedata
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType

from rdkit import Chem

from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.ionic_form import ionic_form
from reactions.chemistry.structures import StructureError
from reactions.chemistry.tables import read_csv_table


class UnknownSubstanceError(LookupError):
    """No substance has the key asked for; ``near`` holds the keys nearest to it."""

    def __init__(self, key: str, near: tuple[str, ...]) -> None:
        self.key = key
        self.near = near
        hint = f" Did you mean {' or '.join(near)}?" if near else ""
        super().__init__(f"There is no substance {key!r} in the table.{hint}")


@dataclass(frozen=True)
class Substance:
    """A row of the substance table.

    ``smiles`` is None where the row is a mixture of isomers or a cage; a polymer has its repeat
    unit. ``density_g_per_ml`` is that of the neat liquid at 20 to 25 °C. Hazard and precautionary
    statements, signal word and pictograms (GHS01 to GHS09) are codes of the Globally Harmonized
    System; the precautionary ones are a selection.
    """

    key: str
    name: str
    synonyms: tuple[str, ...]
    smiles: str | None
    cas_number: str
    density_g_per_ml: float | None
    signal_word: str
    pictograms: tuple[str, ...]
    hazard_statements: tuple[str, ...]
    precautionary_statements: tuple[str, ...]
    source: str
    how_known: str


@cache
def substances() -> Mapping[str, Substance]:
    """Return every substance of the table by key, in table order."""
    rows = (_from_row(row) for row in read_csv_table("substances.csv"))
    return MappingProxyType({row.key: row for row in rows})


def substance(key: str) -> Substance:
    """Return the substance with this key; raise :class:`UnknownSubstanceError` if there is none."""
    try:
        return substances()[key]
    except KeyError:
        near = tuple(difflib.get_close_matches(key, substances(), n=3))
        raise UnknownSubstanceError(key, near) from None


def find_substance(name: str | None = None, smiles: str | None = None) -> Substance | None:
    """Return the substance with this name or synonym, else with this structure, else None.

    Names are compared without regard to case, spacing and kind of hyphen. Structures are compared
    with all parts of a salt or hydrate, metals drawn with lines or as ions. Where several rows
    share a structure, the one first in the table, the more strictly classed, answers. A structure
    that can't be read finds nothing.
    """
    if name:
        found = _by_name().get(_folded(name))
        if found is not None:
            return found
    if not smiles:
        return None
    try:
        identities = tuple(_identities(smiles))
    except StructureError:
        return None
    by_structure = _by_structure()
    return next((by_structure[key] for key in identities if key in by_structure), None)


@cache
def statement_texts() -> Mapping[str, str]:
    """Return the wording of each hazard and precautionary statement by its code."""
    rows = read_csv_table("hazard_statements.csv")
    return MappingProxyType({row["code"]: row["text"] for row in rows})


def _from_row(row: Mapping[str, str]) -> Substance:
    return Substance(
        key=row["key"],
        name=row["name"],
        synonyms=_parts(row["synonyms"]),
        smiles=row["smiles"] or None,
        cas_number=row["cas_number"],
        density_g_per_ml=float(row["density_g_per_ml"]) if row["density_g_per_ml"] else None,
        signal_word=row["signal_word"],
        pictograms=_parts(row["pictograms"]),
        hazard_statements=_parts(row["hazard_statements"]),
        precautionary_statements=_parts(row["precautionary_statements"]),
        source=row["source"],
        how_known=row["how_known"],
    )


def _parts(cell: str) -> tuple[str, ...]:
    return tuple(part.strip() for part in cell.split("|") if part.strip())


@cache
def _by_name() -> Mapping[str, Substance]:
    names: dict[str, Substance] = {}
    for row in substances().values():
        for name in (row.name, *row.synonyms, row.cas_number):
            names.setdefault(_folded(name), row)
    return MappingProxyType(names)


@cache
def _by_structure() -> Mapping[str, Substance]:
    structures: dict[str, Substance] = {}
    for row in substances().values():
        if row.smiles:
            for identity in _identities(row.smiles):
                structures.setdefault(identity, row)
    return MappingProxyType(structures)


def _identities(smiles: str) -> Iterator[str]:
    """Yield the keys by which a structure is known: canonical SMILES, then InChIKey.

    The InChIKey also knows a structure drawn as another tautomer; a few metal complexes have none.
    """
    molecule = ionic_form(sanitised(unsanitised(smiles)))
    yield str(Chem.MolToSmiles(molecule))
    inchi_key = str(Chem.MolToInchiKey(molecule))  # type: ignore[no-untyped-call]
    if inchi_key:
        yield inchi_key


def _folded(name: str) -> str:
    text = unicodedata.normalize("NFKC", name).casefold()
    for dash in "‐‑‒–—−":
        text = text.replace(dash, "-")
    return "".join(text.split())
