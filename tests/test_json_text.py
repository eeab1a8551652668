"""What anyone may have written is read, or refused at its field."""

import json
import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.errors import WHOLE, FieldErrors
from reactions.json_text import DEEPEST, read_json

# Whole texts and numbers of JSON (RFC 8259): no halves of characters, no NUL.
LEAVES = (
    st.none()
    | st.booleans()
    | st.integers(-(10**17), 10**17)
    | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(st.characters(codec="utf-8", exclude_characters="\x00"))
)
VALUES = st.recursive(
    LEAVES,
    lambda inner: (
        st.lists(inner, max_size=4)
        | st.dictionaries(st.text(st.characters(codec="ascii", exclude_characters="\x00")), inner)
    ),
    max_leaves=20,
)


@given(VALUES)
def test_ordinary_json_is_read_as_it_stands(value):
    assert read_json(json.dumps(value)) == value


@pytest.mark.parametrize(
    ("text", "path"),
    [
        ('{"lines": [{"purity": NaN}]}', "lines.0.purity"),
        ('[1, {"a": 1e999}]', "1.a"),
        ('{"a": -Infinity}', "a"),
        (f'{{"a": {"1" * 400}}}', "a"),
        ('{"note": "a\\u0000b"}', "note"),
        ('{"note": "\\ud83d"}', "note"),
        ('{"lines": {"\\udead": 1}}', "lines"),
        ('{"a\\u0000": 1}', WHOLE),
        ("NaN", WHOLE),
    ],
)
def test_what_no_record_can_hold_is_refused_at_its_field(text, path):
    with pytest.raises(FieldErrors) as refusal:
        read_json(text)
    assert list(refusal.value.messages) == [path]
    str(refusal.value).encode()


@pytest.mark.parametrize("text", ["", "{", "nul", '{"a": 1,}', "[" * 100_000, '{"a":' * 50_000])
def test_what_is_not_json_is_refused_in_words(text):
    with pytest.raises(FieldErrors) as refusal:
        read_json(text)
    assert list(refusal.value.messages) == [WHOLE]


@pytest.mark.parametrize("repeats", [DEEPEST + 1, 500, 900])
def test_nesting_ends_somewhere(repeats):
    with pytest.raises(FieldErrors, match="nested"):
        read_json("[" * (repeats + 1) + "]" * (repeats + 1))
    assert read_json("[" * DEEPEST + "]" * DEEPEST)


def test_a_field_given_twice_is_not_quietly_decided():
    with pytest.raises(FieldErrors, match='"purity" stands in it twice'):
        read_json('{"lines": [{"purity": 0.9, "purity": 0.99}]}')


def test_a_long_whole_number_is_a_number():
    assert math.isclose(read_json("1" + "0" * 40), 1e40)


def test_a_whole_character_is_read():
    assert read_json('"\\ud83d\\ude00"') == "\U0001f600"
