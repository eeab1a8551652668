"""The command, as a person runs it."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
REQUEST = {"model": "independent_sites", "sites": 30, "uptake": 1.0}


@pytest.fixture
def compute(tmp_path, monkeypatch):
    monkeypatch.setenv("LABBOOK_DATA", str(tmp_path))

    def run(name, request, stdin=None):
        return subprocess.run(
            [sys.executable, "manage.py", "compute", name, request],
            cwd=ROOT,
            input=stdin,
            capture_output=True,
            text=True,
            check=False,
        )

    return run


def test_a_request_gives_its_result(compute):
    done = compute("distribution", json.dumps(REQUEST))
    assert json.loads(done.stdout)["mole_fraction"][1] == pytest.approx((29 / 30) ** 29)  # derived
    assert (done.returncode, done.stderr) == (0, "")


def test_an_array_from_standard_input_gives_an_array(compute):
    done = compute("distribution", "-", stdin=json.dumps([REQUEST, REQUEST]))
    assert len(json.loads(done.stdout)) == 2


@pytest.mark.parametrize(
    ("name", "request_text", "words"),
    [
        ("distribution", '{"model": "independent_sites", "uptake": 31}', "31"),
        ("distribution", "{", "not JSON"),
        ("distribution", "[" * 100_000, "deep"),
        ("distribution", "3", "object"),
        ("distibution", "{}", "distribution"),
        ("amounts", '{"cage_mass_mg": 5, "lines": [{"name": "x", "smiles": "C(("}]}', "C(("),
        ("molar_mass", '{"smiles": "C", "colour": "red"}', "colour"),
    ],
)
def test_bad_input_ends_with_2_and_one_line(compute, name, request_text, words):
    done = compute(name, request_text)
    assert (done.returncode, done.stdout) == (2, "")
    assert words in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1
