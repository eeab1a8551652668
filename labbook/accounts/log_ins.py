"""Generated passwords and the file that keeps them.

A generated password is shown once and kept in ``log-ins`` in the data folder, readable by its
owner only. The file is a convenience of the first start: once people have set passwords of their
own it can be deleted.
"""

from __future__ import annotations

import os
import secrets
from collections.abc import Mapping
from pathlib import Path

FILE_NAME = "log-ins"

# Without the letters and figures that are mistaken for each other: 31 signs.
_ALPHABET = "abcdefghjkmnpqrstuvwxyz23456789"
_GROUPS = 4
_GROUP_LENGTH = 4


def generated_password() -> str:
    """Return a random password such as ``k7fm-2vqx-hh4d-wz9p`` (about 79 bits)."""
    return "-".join(
        "".join(secrets.choice(_ALPHABET) for _ in range(_GROUP_LENGTH)) for _ in range(_GROUPS)
    )


def keep_log_ins(folder: Path, passwords: Mapping[str, str]) -> Path:
    """Add ``passwords`` by user name to the log-in file in ``folder``; return its path.

    The file is made readable by its owner only before anything is written to it.
    """
    path = folder / FILE_NAME
    handle = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_APPEND, 0o600)
    with os.fdopen(handle, "a", encoding="utf-8") as file:
        os.fchmod(file.fileno(), 0o600)
        file.writelines(f"{name}\t{password}\n" for name, password in passwords.items())
    return path


def kept_log_ins(folder: Path) -> dict[str, str]:
    """Return the passwords kept in ``folder`` by user name; empty when none are kept."""
    path = folder / FILE_NAME
    if not path.exists():
        return {}
    lines = path.read_text(encoding="utf-8").splitlines()
    return dict(line.split("\t", 1) for line in lines if "\t" in line)
