"""Structural formulas fit a strict content policy, both colour schemes and a screen reader."""

from __future__ import annotations

import re
from xml.etree import ElementTree

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.addends import addend_by_name, usual_addends
from reactions.chemistry.depiction import MOST_ATOMS, depict
from reactions.chemistry.structures import StructureError

STRUCTURES = [each.structure.smiles for each in usual_addends()]
STRUCTURES += ["CCOC(=O)C(Br)C(=O)OCC", "CN(C)C=O", "[Na+].[H-]", "*[C@H](C)O", "C", "*[2H]"]
SVG = "{http://www.w3.org/2000/svg}"
NUMBER = re.compile(r"-?\d+\.?\d*")


def shapes(drawing: str) -> list[ElementTree.Element]:
    return [part for part in ElementTree.fromstring(drawing) if part.tag != f"{SVG}title"]


@pytest.mark.parametrize("smiles", STRUCTURES)
def test_a_drawing_has_no_style_script_colour_or_background(smiles):
    drawing = depict(smiles)
    assert drawing.startswith("<svg ")
    for part in ElementTree.fromstring(drawing).iter():
        assert part.tag in {f"{SVG}{tag}" for tag in ("svg", "title", "path", "ellipse")}
        assert not {"style", "class", "id"} & set(part.attrib)
        assert {part.get("fill", "none"), part.get("stroke", "none")} <= {"none", "currentColor"}
    assert len(shapes(drawing)) > 0


@given(st.sampled_from(STRUCTURES), st.integers(60, 600), st.integers(60, 600))
def test_a_drawing_stays_within_its_frame(smiles, width, height):
    drawing = depict(smiles, width, height)
    root = ElementTree.fromstring(drawing)
    assert (root.get("width"), root.get("height")) == (str(width), str(height))
    assert root.get("viewBox") == f"0 0 {width} {height}"
    for part in root.iter(f"{SVG}path"):
        numbers = [float(number) for number in NUMBER.findall(part.get("d"))]
        assert all(-2 <= x <= width + 2 for x in numbers[::2])
        assert all(-2 <= y <= height + 2 for y in numbers[1::2])


def test_a_screen_reader_hears_formula_and_attachment():
    root = ElementTree.fromstring(depict("*C(*)(C(=O)OCC)C(=O)OCC"))
    title = root.find(f"{SVG}title")
    assert title.text == "Structural formula of C7H10O4, attached at 2 points"
    assert root.get("role") == "img"
    assert root.get("aria-label") == title.text
    assert "attached at 1 point<" in depict("*C")
    assert "attached" not in depict("CCO")


def test_a_title_of_one_s_own_is_escaped():
    drawing = depict("CCO", title='a < b & "c"')
    assert ElementTree.fromstring(drawing).find(f"{SVG}title").text == 'a < b & "c"'


def test_each_attachment_point_ends_in_a_wavy_line():
    # A wavy line is the only shape here made of curves or many corners.
    def wavy(smiles):
        return [part for part in shapes(depict(smiles)) if len(part.get("d").split()) > 8]

    assert len(wavy("CCC")) == 0
    assert len(wavy("*CCC")) == 1
    assert len(wavy("*CCC*")) == 2


def test_an_addend_stands_with_its_cage_bonds_to_the_left():
    drawing = depict(addend_by_name("pyrrolidine").structure.smiles)
    wave = [part for part in shapes(drawing) if len(part.get("d").split()) > 8]
    everything = [float(x) for part in shapes(drawing) for x in NUMBER.findall(part.get("d"))[::2]]
    for part in wave[:2]:
        at = [float(x) for x in NUMBER.findall(part.get("d"))[::2]]
        assert sum(at) / len(at) < sum(everything) / len(everything)


@pytest.mark.parametrize(("width", "height"), [(0, 100), (100, 10_000), (-1, 100)])
def test_an_impossible_size_is_refused(width, height):
    with pytest.raises(ValueError, match="outside 40 to 2000"):
        depict("C", width, height)


@pytest.mark.parametrize("text", ["", "C(", "C" * (MOST_ATOMS + 1), "CC(C)(C)(C)C"])
def test_what_is_no_structure_is_not_drawn(text):
    with pytest.raises(StructureError):
        depict(text)
