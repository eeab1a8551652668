from xml.etree import ElementTree

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.planning import CurveRequest, curve
from reactions.pages.drawing.curves import Mark, draw_curve, table_rows, tick_values

SVG = "{http://www.w3.org/2000/svg}"


@pytest.fixture
def mono_curve():
    return curve(
        CurveRequest(model="independent_sites", sites=30, highest_equivalents=2.0, points=41)
    )


@pytest.fixture
def drawing(mono_curve):
    mark = Mark(equivalents=1.0, share=0.374, lowest=1, highest=1)
    return ElementTree.fromstring(draw_curve(mono_curve, mark))


def corners(path):
    return [tuple(map(float, pair.split())) for pair in path.get("d").strip("MZ").split("L")]


def test_the_bands_fill_the_whole_drawing(drawing):
    bands = drawing.findall(".//path[@class]")
    lowest = corners(bands[0])
    assert lowest[0] == (0.0, 0.0)  # no reagent: all cages unreacted, from 0 to 100 %
    tops = [min(y for _, y in corners(band)) for band in bands if "curve-band" in band.get("class")]
    assert min(tops) == 0.0


def test_the_line_is_what_is_wanted(drawing, mono_curve):
    (line,) = [path for path in drawing.iter("path") if path.get("class") == "curve-wanted"]
    heights = [1 - y / 1000 for _, y in corners(line)]
    assert heights == pytest.approx([row[1] for row in mono_curve.mole_fraction], abs=1e-4)


def test_the_mark_stands_at_its_equivalents_and_share(drawing):
    dot = next(drawing.iter("circle"))
    assert (dot.get("cx"), dot.get("cy")) == ("50.00%", "62.60%")
    assert "1 eq" in [text.text for text in drawing.iter("text")]


def test_it_is_said_in_words_and_needs_no_style(drawing):
    assert drawing.get("role") == "img"
    assert "37.4 %" in drawing.get("aria-label")
    assert not [element for element in drawing.iter() if element.get("style")]


def test_the_table_has_shares_that_sum_to_one(mono_curve):
    rows = table_rows(mono_curve)
    assert len(rows) == 11
    assert rows[0][0] == 0.0
    for _, shares in rows:
        assert sum(shares) == pytest.approx(1.0, abs=1e-9)


@given(st.floats(1e-3, 1e5))
def test_ticks_are_few_round_and_within(highest):
    ticks = tick_values(highest)
    assert 3 <= len(ticks) <= 7
    assert ticks[0] == 0
    assert ticks[-1] <= highest * (1 + 1e-5)
