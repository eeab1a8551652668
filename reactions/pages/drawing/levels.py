"""The names of addition levels, as chemists say them."""

from __future__ import annotations

_NAMES = (
    "unreacted",
    "mono",
    "bis",
    "tris",
    "tetrakis",
    "pentakis",
    "hexakis",
    "heptakis",
    "octakis",
    "nonakis",
    "decakis",
)


def level_name(level: int) -> str:
    """Return the name of an addition level: ``unreacted``, ``mono`` … ``decakis``, ``11-fold``."""
    return _NAMES[level] if 0 <= level < len(_NAMES) else f"{level}-fold"
