import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db


def typed(*shares, scale="percent", **others):
    data = {"readings-method": "hplc", "readings-scale": scale, "readings-sampled_at_min": "40 min"}
    data |= {f"readings-level_{level}": share for level, share in enumerate(shares)}
    return data | {f"readings-{name}": value for name, value in others.items()}


@pytest.fixture
def add(signed_in, author, planned, sheet_of):
    return lambda data: signed_in(author).post(sheet_of(planned, "readings"), data)


def composition(planned):
    reading = planned.readings.get()
    return {row.level: row.mole_fraction for row in reading.levels.all()}


@pytest.mark.parametrize(
    "data",
    [
        typed("50", "40", "10"),
        typed("50 %", "40.0", "10"),
        typed("0.5", "0.4", "0.1", scale="fraction"),
        typed("50 %", ".4", "0,1", scale="fraction"),
    ],
)
def test_shares_are_typed_in_percent_or_as_fractions(add, planned, data):
    assert add(data).status_code == 302
    assert composition(planned) == pytest.approx({0: 0.5, 1: 0.4, 2: 0.1})
    assert planned.readings.get().sampled_at_min == 40


def test_what_was_found_follows_at_once(add, planned, stored_again):
    add(typed("41", "43", "12", "3"))
    again = stored_again(planned)
    assert again.found_composition == pytest.approx([0.41, 0.43, 0.12, 0.03])
    assert again.conversion == pytest.approx(0.59)
    assert again.level_reached == 3


def test_levels_left_empty_are_not_read_as_nothing_found(add, planned):
    add(typed("", "60", "", "20"))
    assert composition(planned) == pytest.approx({1: 0.6, 3: 0.2})


def test_high_levels_have_fields_of_their_own(add, planned):
    add(
        typed(
            "10",
            further_level_0="18",
            further_share_0="55 %",
            further_level_1="36",
            further_share_1="30",
            is_higher_lumped="on",
        )
    )
    assert composition(planned) == pytest.approx({0: 0.1, 18: 0.55, 36: 0.3})
    assert planned.readings.get().is_higher_lumped


@pytest.mark.parametrize(
    ("data", "field", "word"),
    [
        (typed("60", "50"), "__all__", "110.0 %"),
        (typed("101"), "level_0", "101 %"),
        (typed("", "-2"), "level_1", "-2 %"),
        (typed("1.2", scale="fraction"), "level_0", "more than 1"),
        (typed("some"), "level_0", "some"),
        (typed("nan"), "level_0", "nan"),
        (typed("0", "0"), "__all__", "All fractions are 0"),
        (typed(), "__all__", "at least one level"),
        (typed("50", method="nose"), "method", "nose"),
        (typed("50", sampled_at_min="40"), "sampled_at_min", "no unit"),
        (typed("50", further_share_0="5"), "further_level_0", "which level"),
        (typed("50", further_level_0="8"), "further_share_0", "level 8"),
        (typed("50", further_level_0="0", further_share_0="5"), "further_level_0", "above"),
        (typed("50", further_level_0="71", further_share_0="5"), "further_level_0", "70"),
    ],
)
def test_what_is_wrong_is_said_at_its_field_and_stays_typed(add, planned, data, field, word):
    response = add(data)
    assert response.status_code == 422
    form = response.context["parts"]["readings"].form
    assert word in " ".join(form.errors[field])
    page = response.content.decode()
    for name, value in data.items():
        if value and name not in ("readings-method", "readings-scale"):
            assert f'value="{value}"' in page
    assert not planned.readings.exists()


def test_the_strip_is_drawn_while_shares_are_typed(signed_in, author, planned):
    address = reverse("reactions:preview-reading", args=["ACC", planned.number])
    client = signed_in(author, enhanced=True)
    page = client.post(address, typed("50", "30")).content.decode()
    assert 'aria-label="as typed: unreacted 50.0 %, mono 30.0 %, not assigned 20.0 %"' in page
    assert "Sum 80.0 %" in page
    assert "exceed 100 %" in client.post(address, typed("80", "30")).content.decode()
    assert not planned.readings.exists()


def test_a_reading_is_removed_and_what_was_found_with_it(
    add, signed_in, author, planned, stored_again
):
    add(typed("50", "50"))
    reading = planned.readings.get()
    address = reverse("reactions:remove-row", args=["ACC", planned.number, "readings", reading.pk])
    signed_in(author).post(address, {"seen_version": "2"})
    assert not planned.readings.exists()
    assert stored_again(planned).found_composition is None


@pytest.mark.parametrize("who", ["reader", "reviewer"])
def test_only_authors_write(request, signed_in, planned, sheet_of, who):
    client = signed_in(request.getfixturevalue(who))
    assert client.post(sheet_of(planned, "readings"), typed("50")).status_code == 403
    address = reverse("reactions:preview-reading", args=["ACC", planned.number])
    assert client.post(address, typed("50")).status_code == 403


def test_fractions_typed_under_percent_are_questioned(add, planned):
    response = add(typed("0.71", "0.245", "0.04", "0.005"))
    assert response.status_code == 422
    form = response.context["parts"]["readings"].form
    assert "sum to 1 %" in form.errors["scale"][0]
    assert form["level_0"].value() == "0.71"
    assert not planned.readings.exists()


def test_a_trace_beside_a_main_level_is_taken(add, planned):
    assert add(typed("99.5", "0.5 %")).status_code == 302
    assert composition(planned) == pytest.approx({0: 0.995, 1: 0.005})
