"""No wheel is built without the front-end parts."""

import importlib.util
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
PARTS = "reactions/static/reactions/parts"


@pytest.fixture(scope="module")
def wheel_parts():
    spec = importlib.util.spec_from_file_location("wheel_parts", ROOT / "deploy/wheel_parts.py")
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module.WheelParts


def prepare(hook, folder):
    hook(str(folder), {}, None, None, str(folder), "wheel").initialize("standard", {})


def test_missing_parts_are_named_with_what_brings_them(wheel_parts, tmp_path):
    (tmp_path / PARTS).mkdir(parents=True)
    (tmp_path / PARTS / "htmx.min.js").touch()
    with pytest.raises(FileNotFoundError, match=r"lacks openchemlib\.js.*Run deploy/parts") as told:
        prepare(wheel_parts, tmp_path)
    assert "htmx" not in str(told.value)


def test_it_builds_from_a_tree_that_has_them(wheel_parts):
    prepare(wheel_parts, ROOT)
