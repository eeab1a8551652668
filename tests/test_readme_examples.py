"""The examples of the README give what the README says."""

import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

from reactions.models import Reaction

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"```console\n(.*?)```", README, re.DOTALL)
# Each command with what it prints, which ends at the next command.
EXAMPLES = [
    example
    for block in BLOCKS
    for example in re.findall(r"^\$ (.*?)\n(.*?)(?=^\$ |\Z)", block, re.DOTALL | re.MULTILINE)
]

API_EXAMPLE = next(
    block for block in re.findall(r"```sh\n(.*?)```", README, re.DOTALL) if "curl" in block
)
# As much of curl as the examples use, for machines without it.
CURL = f"""#!{sys.executable}
import argparse, sys, urllib.request
reader = argparse.ArgumentParser()
reader.add_argument("address")
reader.add_argument("-s", "--silent", action="store_true")
reader.add_argument("-X", "--request")
reader.add_argument("-H", "--header", action="append", default=[])
reader.add_argument("-d", "--data")
given = reader.parse_args()
request = urllib.request.Request(
    "http://" + given.address,
    given.data and given.data.encode(),
    dict(header.split(": ", 1) for header in given.header),
    method=given.request,
)
sys.stdout.write(urllib.request.urlopen(request, timeout=30).read().decode())
"""


def close_to(value):
    """Return ``value`` with every number in it compared to twelve figures."""
    if isinstance(value, dict):
        return {key: close_to(inner) for key, inner in value.items()}
    if isinstance(value, list):
        return [close_to(inner) for inner in value]
    return pytest.approx(value, rel=1e-12) if isinstance(value, float) else value


def read(text):
    """Return JSON as its value, and any other text as it is."""
    try:
        return json.loads(text)
    except ValueError:
        return text.strip()


def in_shell(script, *folders, **variables):
    """Run a script as a person would, with the commands of ``folders`` before all others."""
    path = os.pathsep.join(
        [*map(str, folders), str(Path(sys.executable).parent), os.environ["PATH"]]
    )
    return subprocess.run(
        ["bash", "-uo", "pipefail", "-c", script],
        cwd=ROOT,
        env={**os.environ, **variables, "PATH": path},
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        text=True,
        check=False,
    )


def test_there_are_examples():
    assert len(EXAMPLES) >= 2


@pytest.mark.parametrize(("command", "expected"), EXAMPLES)
def test_the_example_gives_what_it_says(command, expected, tmp_path):
    done = in_shell(command, LABBOOK_DATA=str(tmp_path))
    assert read(done.stdout) == close_to(read(expected))


def test_the_example_of_the_api_runs_in_a_shell(live_server, campaign, author, tmp_path):
    for number, temperature_c in ((1, 25.0), (2, 130.0)):
        Reaction.objects.create(
            campaign=campaign, number=number, title="x", family_key="prato",
            temperature_c=temperature_c, created_by=author,
        )  # fmt: skip
    author.username = "chemist"
    author.set_password("gloves-half-off-17")
    author.save()
    curl = tmp_path / "curl"
    curl.write_text(CURL, encoding="utf-8")
    curl.chmod(0o755)
    address = live_server.url.removeprefix("http://")
    script = API_EXAMPLE.replace("localhost:8000", address).replace("…", "gloves-half-off-17", 1)
    done = in_shell(f"set -e\n{script}", tmp_path)
    assert done.returncode == 0, done.stdout
    decoder = json.JSONDecoder()
    found, end = decoder.raw_decode(done.stdout)
    planned, _ = decoder.raw_decode(done.stdout, end)
    assert [row["label"] for row in found["results"]] == ["ACC-2"]
    assert planned["objective_value"] == pytest.approx(5, rel=1e-9)


def test_every_setting_is_in_the_table():
    named = set(
        re.findall(
            r"LABBOOK_[A-Z_]+",
            (ROOT / "labbook/settings.py").read_text(encoding="utf-8"),
        )
    )
    listed = set(re.findall(r"^\| `(LABBOOK_[A-Z_]+)`", README, re.MULTILINE))
    assert named == listed
