import datetime

import pytest
from django.http import QueryDict
from hypothesis import given
from hypothesis import strategies as st

from reactions.errors import FieldErrors
from reactions.models import State
from reactions.search.language import SearchQuery, sort_keys


def errors_of(address):
    with pytest.raises(FieldErrors) as caught:
        SearchQuery.from_address(QueryDict(address))
    return caught.value.messages


def test_an_empty_address_asks_nothing(asked):
    assert asked() == SearchQuery()
    assert asked("cage=&text=+&family=") == SearchQuery()
    assert SearchQuery().to_address() == ""


def test_values_are_read_with_and_without_their_unit(asked):
    query = asked(
        "temperature_c_lowest=120&temperature_c_highest=150+°C&duration_min_lowest=0.5+h"
        "&duration_min_highest=90&yield_percent_lowest=40+%25&yield_percent_highest=55.5"
    )
    assert (query.temperature_c_lowest, query.temperature_c_highest) == (120.0, 150.0)
    assert (query.duration_min_lowest, query.duration_min_highest) == (30.0, 90.0)
    assert (query.yield_percent_lowest, query.yield_percent_highest) == (40.0, 55.5)


def test_many_families_one_of_the_rest(asked):
    query = asked("family=prato&family=Cyclopropanation&cage=C60&cage=C70&state=signed")
    assert query.family == ("prato", "Cyclopropanation")
    assert query.cage == "C70"
    assert query.state == State.SIGNED


def test_what_belongs_to_the_page_is_passed_over(asked):
    assert asked("page=3&page_size=50&format=csv") == SearchQuery()


def test_dates_are_read(asked):
    query = asked("performed_from=2026-03-01&performed_to=2026-03-31")
    assert query.performed_from == datetime.date(2026, 3, 1)
    assert query.performed_to == datetime.date(2026, 3, 31)


@pytest.mark.parametrize(
    ("address", "field", "words"),
    [
        ("temperature_c_lowest=warm", "temperature_c_lowest", "warm"),
        ("temperature_c_lowest=nan", "temperature_c_lowest", "finite"),
        ("temperature_c_lowest=-300", "temperature_c_lowest", "-273.15"),
        ("duration_min_lowest=-1", "duration_min_lowest", "0"),
        ("duration_min_lowest=3 kg", "duration_min_lowest", "kg"),
        ("yield_percent_lowest=lots", "yield_percent_lowest", "lots"),
        ("level_lowest=1.5", "level_lowest", "whole"),
        ("level_lowest=99", "level_lowest", "70"),
        ("state=lost", "state", "planned"),
        ("sort=colour", "sort", "temperature"),
        ("performed_from=soon", "performed_from", "2026-03-31"),
        ("addend=x", "addend", "x"),
        ("substructure_kind=inchi", "substructure_kind", "smarts"),
        ("colour=red", "colour", "not a field"),
        ("temperature_c_lowest=50&temperature_c_highest=40", "temperature_c_highest", "swap"),
        ("performed_from=2026-02-02&performed_to=2026-01-01", "performed_to", "swap"),
    ],
)
def test_a_bad_value_is_an_error_at_its_field(address, field, words):
    messages = errors_of(address)
    assert list(messages) == [field]
    assert words in messages[field][0]


def test_every_bad_value_is_told_at_once():
    assert set(errors_of("level_lowest=x&state=y&sort=z")) == {"level_lowest", "state", "sort"}


_NUMBERS = st.none() | st.floats(0, 1000, allow_nan=False)
_LEVELS = st.none() | st.integers(0, 70)
_TEXTS = st.text(st.characters(exclude_categories=("Cs", "Cc", "Z")), max_size=12)


@given(
    st.builds(
        SearchQuery,
        family=st.lists(_TEXTS.filter(bool), max_size=3).map(tuple),
        addend=st.none() | st.integers(1, 2**40),
        substructure=_TEXTS,
        cage=_TEXTS,
        temperature_c_lowest=_NUMBERS,
        duration_min_highest=_NUMBERS,
        yield_percent_lowest=_NUMBERS,
        level_highest=_LEVELS,
        state=st.none() | st.sampled_from(State),
        performed_to=st.none() | st.dates(),
        sort=st.sampled_from(sort_keys()),
    )
)
def test_a_query_comes_back_from_its_address(query):
    assert SearchQuery.from_address(QueryDict(query.to_address())) == query
