"""What is understood of a structure that was drawn or typed."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from django.utils.safestring import SafeString

from reactions.bounded import run_bounded
from reactions.chemistry.addends import AddendStructure, read_addend
from reactions.chemistry.depiction import depict
from reactions.chemistry.structures import StructureError
from reactions.chemistry.substructure import QueryKind, outline_query

_ADDEND_SIZE, _QUERY_SIZE = (240, 150), (180, 110)


@dataclass(frozen=True)
class ShownStructure:
    """A structure as understood: its drawing, and what is known of it as an addend.

    ``picture`` is empty for a query in SMARTS, which has no single drawing; ``smarts`` is then how
    it was read.
    """

    picture: SafeString
    addend: AddendStructure | None = None
    smarts: str = ""


@lru_cache(maxsize=2048)
def drawn(smiles: str, width: int, height: int, title: str = "") -> SafeString:
    """Return the drawing of a structure as SVG; raises ``StructureError``."""
    # The SVG comes from our own drawing, which escapes the words in it.
    return SafeString(run_bounded(depict, smiles, width, height, title))


def show_addend(text: str) -> ShownStructure:
    """Return what is understood of an addend; raises ``StructureError``."""
    addend = run_bounded(read_addend, text)
    return ShownStructure(drawn(addend.smiles, *_ADDEND_SIZE), addend)


def show_query(text: str, kind: QueryKind) -> ShownStructure:
    """Return what is understood of a part to look for; raises ``StructureError``."""
    smarts = run_bounded(outline_query, text, kind).smarts
    if kind == "smarts":
        return ShownStructure(SafeString(""), smarts=smarts)
    try:
        return ShownStructure(drawn(text, *_QUERY_SIZE))
    except StructureError:
        return ShownStructure(SafeString(""), smarts=smarts)
