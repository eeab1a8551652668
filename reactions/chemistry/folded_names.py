"""Names of substances as people write them, made comparable."""

from __future__ import annotations

import unicodedata

_DASHES = str.maketrans(dict.fromkeys("‐‑‒–—−", "-"))


def folded(name: str) -> str:
    """Return ``name`` without regard to case, spacing and kind of hyphen."""
    text = unicodedata.normalize("NFKC", name).casefold().translate(_DASHES)
    return "".join(text.split())
