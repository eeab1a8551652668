"""The examples of the README give what the README says."""

import json
import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"```console\n\$ (.*?)\n(.*?)```", README, re.DOTALL)


def close_to(value):
    """Return ``value`` with every number in it compared to twelve figures."""
    if isinstance(value, dict):
        return {key: close_to(inner) for key, inner in value.items()}
    if isinstance(value, list):
        return [close_to(inner) for inner in value]
    return pytest.approx(value, rel=1e-12) if isinstance(value, float) else value


def test_there_are_examples():
    assert len(EXAMPLES) >= 2


@pytest.mark.parametrize(("command", "expected"), EXAMPLES)
def test_the_example_gives_what_it_says(command, expected, tmp_path, monkeypatch):
    monkeypatch.setenv("LABBOOK_DATA", str(tmp_path))
    words = shlex.split(command)
    assert words[0] == "python"
    done = subprocess.run(
        [sys.executable, *words[1:]], cwd=ROOT, capture_output=True, text=True, check=True
    )
    assert json.loads(done.stdout) == close_to(json.loads(expected))


def test_every_setting_is_in_the_table():
    named = set(
        re.findall(
            r"LABBOOK_[A-Z_]+",
            (ROOT / "labbook/settings.py").read_text(encoding="utf-8"),
        )
    )
    listed = set(re.findall(r"^\| `(LABBOOK_[A-Z_]+)`", README, re.MULTILINE))
    assert named == listed
