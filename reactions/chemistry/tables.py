"""Where the data tables lie, in a source tree and in an installed wheel.

The tables are the folder ``fixtures/`` of the source tree; the wheel carries the same files as
``reactions/tables``.
"""

from __future__ import annotations

import csv
import json
from pathlib import Path
from typing import Any

_INSTALLED = Path(__file__).parents[1] / "tables"
_SOURCE_TREE = Path(__file__).parents[2] / "fixtures"


def table_path(name: str) -> Path:
    """Return the path of the data table ``name`` (a file name such as ``families.json``)."""
    folder = _INSTALLED if _INSTALLED.is_dir() else _SOURCE_TREE
    return folder / name


def read_csv_table(name: str) -> list[dict[str, str]]:
    """Return the rows of a CSV table as dictionaries of stripped text, in file order."""
    with table_path(name).open(encoding="utf-8", newline="") as lines:
        return [
            {column: (cell or "").strip() for column, cell in row.items()}
            for row in csv.DictReader(lines)
        ]


def read_json_table(name: str) -> Any:
    """Return the content of a JSON table."""
    return json.loads(table_path(name).read_text(encoding="utf-8"))
