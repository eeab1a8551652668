"""The locks pin and hash everything, and name no registry."""

import json
import re
import tomllib
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
LOCKS = ["requirements.lock", "tests/requirements.lock", "deploy/npm.lock", "deploy/uv.lock"]
_PIN = re.compile(r"^([a-z0-9-]+)==([^ ;]+)")


def pinned(name):
    """Return the versions a lock pins, by package; several where the Python version decides."""
    pins = {}
    for line in (ROOT / name).read_text(encoding="utf-8").splitlines():
        if found := _PIN.match(line):
            pins.setdefault(found[1], set()).add(found[2])
    return pins


def wanted(*extras):
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    lines = project["dependencies"] + [
        line for extra in extras for line in project["optional-dependencies"][extra]
    ]
    return {re.match(r"[A-Za-z0-9-]+", line)[0].lower() for line in lines}


@pytest.mark.parametrize("name", LOCKS)
def test_every_entry_is_pinned_and_hashed(name):
    entries = re.split(r"\n(?=\S)", (ROOT / name).read_text(encoding="utf-8").strip())
    assert entries
    for entry in entries:
        assert _PIN.match(entry), entry
        assert "--hash=sha256:" in entry, entry


@pytest.mark.parametrize("name", [*LOCKS, "reactions/parts/package-lock.json"])
def test_no_address_of_a_registry_is_kept(name):
    assert "://" not in (ROOT / name).read_text(encoding="utf-8")


def test_the_locks_hold_what_the_project_asks_for():
    assert wanted("site") <= pinned("requirements.lock").keys()
    assert wanted("site", "check") <= pinned("tests/requirements.lock").keys()


def test_the_check_runs_on_the_versions_that_are_served():
    served, checked = pinned("requirements.lock"), pinned("tests/requirements.lock")
    assert {name: checked[name] for name in served} == served


def test_front_end_parts_are_hashed():
    lock = json.loads((ROOT / "reactions/parts/package-lock.json").read_text(encoding="utf-8"))
    parts = {path: part for path, part in lock["packages"].items() if path}
    assert parts
    assert all(part["integrity"].startswith("sha512-") for part in parts.values())
