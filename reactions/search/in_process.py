"""Substructure search over all addends without help from the database.

The fingerprints of all addends stand in memory as a bit matrix (100,000 addends: 26 MB), read anew
when an addend was added or removed. What passes the screen is matched in a bounded process.
"""

from __future__ import annotations

import threading
import time
from collections.abc import Set
from dataclasses import dataclass
from datetime import datetime

import numpy as np
import rdkit
from django.db.models import Count, Max
from numpy.typing import NDArray

from reactions.bounded import StructureTimeoutError, run_bounded
from reactions.chemistry.substructure import (
    FINGERPRINT_BITS,
    QueryKind,
    QueryOutline,
    bit_matrix,
    match_text,
    screen,
)
from reactions.models import Addend

_BATCH = 2_000
_BATCH_SECONDS = 5.0
_SEARCH_SECONDS = 20.0
# A fingerprint of another RDKit version says nothing: with all bits set it screens nothing out.
_ANY_BITS = b"\xff" * (FINGERPRINT_BITS // 8)

_State = tuple[str, int, int | None, datetime | None]


@dataclass(frozen=True)
class _Library:
    """The addends of a database as they were at ``state``; a row of each array per addend."""

    state: _State
    keys: NDArray[np.int64]
    search_smiles: tuple[str, ...]
    bits: NDArray[np.uint64]


class _Shelf:
    """Keeps the library that was read last."""

    def __init__(self) -> None:
        self._lock = threading.Lock()
        self._library: _Library | None = None

    def library(self, database: str) -> _Library:
        state = _state(database)
        with self._lock:
            if self._library is None or self._library.state != state:
                self._library = _read(database, state)
            return self._library


_shelf = _Shelf()


def matching(
    query: str,
    kind: QueryKind,
    outline: QueryOutline,
    database: str,
    among: Set[int] | None = None,
) -> set[int]:
    """Return the keys of the addends, of those ``among`` if given, that contain the query.

    Raises ``StructureTimeoutError`` after 20 s, or 5 s with one batch of addends.
    """
    library = _shelf.library(database)
    rows = screen(library.bits, outline.fingerprint)
    if among is not None:
        rows = rows[np.isin(library.keys[rows], np.fromiter(among, np.int64, len(among)))]
    until = time.monotonic() + _SEARCH_SECONDS
    found: set[int] = set()
    for start in range(0, len(rows), _BATCH):
        if time.monotonic() > until:
            raise StructureTimeoutError(
                f"The search took longer than {_SEARCH_SECONDS:g} s; look for a larger part."
            )
        batch = rows[start : start + _BATCH]
        forms = [library.search_smiles[row] for row in batch]
        hits = run_bounded(match_text, query, kind, forms, timeout_seconds=_BATCH_SECONDS)
        found.update(int(library.keys[batch[hit]]) for hit in hits)
    return found


def _state(database: str) -> _State:
    # Addends are never altered, only added and removed.
    row = Addend.objects.using(database).aggregate(
        count=Count("pk"), last=Max("pk"), latest=Max("created_at")
    )
    return database, row["count"], row["last"], row["latest"]


def _read(database: str, state: _State) -> _Library:
    keys, forms, fingerprints = [], [], []
    rows = Addend.objects.using(database).values_list(
        "pk", "search_smiles", "fingerprint", "rdkit_version"
    )
    for key, form, fingerprint, version in rows.order_by("pk").iterator(chunk_size=5_000):
        keys.append(key)
        forms.append(form)
        is_current = version == rdkit.__version__ and len(fingerprint) == len(_ANY_BITS)
        fingerprints.append(bytes(fingerprint) if is_current else _ANY_BITS)
    return _Library(state, np.array(keys, dtype=np.int64), tuple(forms), bit_matrix(fingerprints))
