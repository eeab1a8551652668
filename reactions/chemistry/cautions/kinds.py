"""Kinds of substance that the rules speak of, recognised by structure or, failing that, by name.

A kind is a row of ``caution_rules.json``: SMARTS patterns, any of which makes a structure one of
the kind, and regular expressions over the folded name for what is planned without a structure.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType

from rdkit import Chem

from reactions.chemistry.tables import read_json_table


@dataclass(frozen=True)
class Kind:
    """How to recognise one kind of substance."""

    name: str
    patterns: tuple[Chem.Mol, ...]
    names: tuple[re.Pattern[str], ...]

    def covers(self, name: str, molecule: Chem.Mol | None) -> bool:
        """Say whether a substance is of this kind, by its structure or by its name."""
        if molecule is not None and any(molecule.HasSubstructMatch(row) for row in self.patterns):
            return True
        return any(pattern.search(name.casefold()) for pattern in self.names)


@cache
def kinds() -> Mapping[str, Kind]:
    """Return every kind of the table by its name."""
    rows = read_json_table("caution_rules.json")["kinds"]
    return MappingProxyType(
        {
            name: Kind(
                name,
                tuple(Chem.MolFromSmarts(smarts) for smarts in row.get("smarts", ())),
                tuple(re.compile(expression) for expression in row.get("names", ())),
            )
            for name, row in rows.items()
        }
    )


def kinds_of(name: str, molecule: Chem.Mol | None) -> frozenset[str]:
    """Return the names of the kinds that a substance is of."""
    return frozenset(kind.name for kind in kinds().values() if kind.covers(name, molecule))
