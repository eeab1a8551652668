"""Finding addends by substructure, by the cartridge where there is one, else in process.

Both ways give the same addends: what the cartridge can't decide (tiny queries, hydrogens, the rules
about the cage, addends that its older RDKit couldn't load) is decided in process.
"""

from __future__ import annotations

from django.db.models import QuerySet

from reactions.bounded import run_bounded
from reactions.chemistry.substructure import QueryKind, outline_query
from reactions.models import Addend
from reactions.search import cartridge, in_process


def addends_containing(
    query: str, kind: QueryKind = "auto", among: QuerySet[Addend] | None = None
) -> set[int]:
    """Return the keys of the addends (of those ``among``) that contain the query.

    ``query`` is SMILES, SMARTS or a molfile, read as
    :func:`reactions.chemistry.substructure.compile_query` says. Raises ``StructureError`` when it
    can't be read, ``StructureTimeoutError`` when the search takes too long.
    """
    outline = run_bounded(outline_query, query, kind)
    database = Addend.objects.db if among is None else among.db
    answer = cartridge.search(outline, among) if outline.is_for_database else None
    if answer is None:
        allowed = None if among is None else set(among.values_list("pk", flat=True))
        return in_process.matching(query, kind, outline, database, allowed)
    found, unsure = set(answer.found), set(answer.not_loaded)
    if outline.may_match_cage:
        found, unsure = set(), unsure | found
    if unsure:
        found |= in_process.matching(query, kind, outline, database, unsure)
    return found
