"""The command, as a person runs it."""

import io
import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from django.core.management import execute_from_command_line

ROOT = Path(__file__).parents[2]
REQUEST = {"model": "independent_sites", "sites": 30, "uptake": 1.0}


@pytest.fixture
def compute(tmp_path, monkeypatch):
    monkeypatch.setenv("LABBOOK_DATA", str(tmp_path))

    def run(*words, stdin=None, **variables):
        return subprocess.run(
            [sys.executable, "manage.py", "compute", *words],
            cwd=ROOT,
            input=stdin if isinstance(stdin, bytes) else (stdin or "").encode(),
            env={**os.environ, **variables},
            capture_output=True,
            check=False,
        )

    return run


@pytest.fixture
def refused(capsys, monkeypatch):
    """Run the command within this process; return the line with which it refuses."""

    def run(*words, stdin=b""):
        monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(stdin)))
        with pytest.raises(SystemExit) as end:
            execute_from_command_line(["manage.py", "compute", *words])
        printed = capsys.readouterr()
        assert (end.value.code, printed.out) == (2, "")
        (line,) = printed.err.splitlines()
        return line

    return run


def said(done):
    """Return the exit code, and what was said beside the answer."""
    return done.returncode, done.stderr.decode().strip()


def test_a_request_gives_its_result(compute):
    done = compute("distribution", json.dumps(REQUEST))
    assert json.loads(done.stdout)["mole_fraction"][1] == pytest.approx((29 / 30) ** 29)  # derived
    assert said(done) == (0, "")


def test_an_array_from_standard_input_gives_an_array(compute):
    done = compute("distribution", "-", stdin=json.dumps([REQUEST, REQUEST]))
    assert len(json.loads(done.stdout)) == 2


def test_an_array_with_a_bad_request_names_its_place(refused):
    line = refused("molar_mass", '[{"smiles": "C"}, {"smiles": "C(("}]')
    assert line.startswith("1.smiles: ")


def test_bad_input_ends_with_2_and_one_line(compute):
    code, reason = said(compute("distribution", '{"model": "independent_sites", "uptake": 31}'))
    assert (code, len(reason.splitlines())) == (2, 1)
    assert "31" in reason


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
def test_bad_input_is_refused_in_one_line(refused, name, request_text, words):
    assert words in refused(name, request_text)


@pytest.mark.parametrize("words", [(), ("distribution",)])
def test_what_is_missing_is_asked_for_in_one_line(refused, words):
    assert "molar_mass" in refused(*words)


@pytest.mark.parametrize("stdin", [b"", b'{"smiles": "C\xff"}', b'{"smiles": "\\u0000"}', b"\xef"])
def test_what_is_no_json_on_standard_input_is_refused(refused, stdin):
    assert refused("molar_mass", "-", stdin=stdin)


def test_a_terminal_without_unicode_gets_its_answer(compute):
    request = '{"substances": [{"name": "tölüöl"}]}'
    done = compute("cautions", request, PYTHONIOENCODING="ascii")
    assert json.loads(done.stdout.decode("ascii"))["unlisted"] == ["tölüöl"]


def test_whoever_stops_listening_gets_no_traceback(tmp_path, monkeypatch):
    monkeypatch.setenv("LABBOOK_DATA", str(tmp_path))
    reading_end, writing_end = os.pipe()
    os.close(reading_end)
    done = subprocess.run(
        [sys.executable, "manage.py", "compute", "distribution", json.dumps(REQUEST)],
        cwd=ROOT, stdout=writing_end, stderr=subprocess.PIPE, text=True, check=False,
    )  # fmt: skip
    os.close(writing_end)
    assert (done.returncode, done.stderr) == (1, "The answer can't be written: Broken pipe.\n")
