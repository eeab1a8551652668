from itertools import pairwise
from xml.etree import ElementTree

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.pages.drawing.levels import level_name
from reactions.pages.drawing.strips import draw_strip, in_words, segments

compositions = st.lists(st.floats(0, 1), min_size=1, max_size=12).map(
    lambda weights: [weight / max(sum(weights), 1.0) for weight in weights]
)


@given(compositions)
def test_the_segments_of_a_strip_fill_it_without_gap_or_overlap(composition):
    pieces = segments(composition)
    for before, after in pairwise(pieces):
        assert after.start == pytest.approx(before.start + before.share)
    if pieces:
        end = pieces[-1].start + pieces[-1].share
        assert end == pytest.approx(1, abs=0.0021)


@given(compositions, st.booleans())
def test_a_strip_is_well_formed_and_says_what_it_shows(composition, is_lumped):
    drawing = ElementTree.fromstring(
        draw_strip(composition, name="found", is_higher_lumped=is_lumped)
    )
    words = in_words(composition, is_higher_lumped=is_lumped)
    assert drawing.get("role") == "img"
    assert drawing.get("aria-label") == f"found: {words}"
    assert not any("style" in part.attrib for part in drawing.iter())


def test_colour_never_stands_alone():
    pieces = segments([0.3, 0.3, 0.2, 0.1, 0.05, 0.05])
    assert [piece.label for piece in pieces] == ["0", "1", "2", "3", "4", "5"]
    drawn = draw_strip([0.3, 0.3, 0.2, 0.1, 0.05, 0.05], name="found")
    for piece in pieces:
        assert f"<title>{piece.reading}</title>" in drawn
        assert f">{piece.label}<" in drawn


def test_the_last_level_may_stand_for_all_above():
    assert segments([0.5, 0.3, 0.2], is_higher_lumped=True)[-1].label == "2+"
    assert in_words([0.5, 0.5], is_higher_lumped=True) == "unreacted 50.0 %, mono and higher 50.0 %"


def test_what_is_not_assigned_is_shown_as_such():
    assert in_words([0.5, 0.3]) == "unreacted 50.0 %, mono 30.0 %, not assigned 20.0 %"


def test_levels_above_six_share_a_colour_but_keep_their_number():
    piece = segments([0.0] * 18 + [1.0])[0]
    assert (piece.label, piece.colour, piece.name) == ("18", "6", "18-fold")


def test_levels_are_named_as_chemists_say():
    assert [level_name(level) for level in (0, 1, 2, 3, 6, 12)] == [
        "unreacted",
        "mono",
        "bis",
        "tris",
        "hexakis",
        "12-fold",
    ]


def test_the_name_of_a_strip_is_escaped():
    assert "<b>" not in draw_strip([1.0], name="<b>")
