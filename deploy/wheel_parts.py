"""Build hook: a wheel without the front-end parts would make pages that don't work."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from hatchling.builders.hooks.plugin.interface import BuildHookInterface

_FOLDER = Path("reactions/static/reactions/parts")
_NEEDED = (
    "htmx.min.js",
    "openchemlib.js",
)


class WheelParts(BuildHookInterface):  # type: ignore[type-arg]
    """Refuse to build without the parts."""

    def initialize(self, version: str, build_data: dict[str, Any]) -> None:
        """Raise ``FileNotFoundError`` naming what is missing and what brings it."""
        folder = Path(self.root) / _FOLDER
        missing = [name for name in _NEEDED if not (folder / name).is_file()]
        if missing:
            raise FileNotFoundError(
                f"{_FOLDER} lacks {', '.join(missing)}. Run deploy/parts first, then build again."
            )
