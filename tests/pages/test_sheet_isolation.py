import pytest

pytestmark = pytest.mark.django_db

# Average molar masses in g/mol: C60, and what one addition of the malonate adds (C7H10O4); from
# IUPAC's abridged atomic weights.
C60 = 720.66
ADDITION = 7 * 12.011 + 10 * 1.008 + 4 * 15.999


def typed(*steps, seen_version="1", **others):
    """Return steps as a browser posts them, each a pair of its fields and its fractions."""
    data = {"seen_version": seen_version, **others}
    for place, (step, fractions) in enumerate(steps):
        prefix = f"isolation-{place}"
        data[f"{prefix}-row"] = "1"
        data |= {f"{prefix}-{name}": value for name, value in {"method": "column", **step}.items()}
        for order, fraction in enumerate(fractions):
            data[f"{prefix}-fractions-{order}-row"] = "1"
            data |= {f"{prefix}-fractions-{order}-{name}": fraction[name] for name in fraction}
    return data


@pytest.fixture
def store(signed_in, author, planned, sheet_of):
    return lambda data: signed_in(author).post(sheet_of(planned, "isolation"), data)


def form_of(response):
    return response.context["parts"]["isolation"].form


MONO = {"name": "F2", "mass_mg": "0.2 g", "level": "1", "purity": "98 %"}
CAGE = {"name": "F1", "mass_mg": "150 mg", "level": "0", "purity": ""}


def test_steps_and_fractions_are_stored_in_their_order(store, planned):
    response = store(
        typed(
            ({"medium": "silica", "solvent": "toluene", "volume_ml": "1.8 L"}, [CAGE, MONO]),
            ({"method": "precipitation", "loading_mg": "200 mg"}, []),
        )
    )
    assert response.status_code == 302
    column, precipitation = planned.isolation_steps.all()
    assert (column.volume_ml, precipitation.method) == (1800, "precipitation")
    first, second = column.fractions.all()
    assert (first.level, first.mass_mg, first.purity) == (0, 150, 1)
    assert (second.level, second.mass_mg, second.purity) == (1, 200, 0.98)


def test_balance_and_yields_are_computed_never_typed(
    store, signed_in, author, planned, sheet_of, stored_again
):
    store(typed(({}, [CAGE, MONO])))
    charged = 500 / C60
    mono = 200 * 0.98 / (C60 + ADDITION)
    recovered = 150 / C60
    again = stored_again(planned)
    assert again.yield_on_charged == pytest.approx(mono / charged)
    assert again.yield_on_consumed == pytest.approx(mono / (charged - recovered))
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    assert f"{100 * (mono + recovered) / charged:.1f} %" in page
    assert "recovered cage" in page


def test_a_fraction_that_went_on_is_not_counted_twice(store, stored_again, planned):
    store(
        typed(
            ({}, [{**MONO, "mass_mg": "300 mg", "is_carried_on": "on"}]),
            ({"method": "hplc"}, [{**MONO, "mass_mg": "200 mg"}]),
        )
    )
    mono = 200 * 0.98 / (C60 + ADDITION)
    assert stored_again(planned).yield_on_charged == pytest.approx(mono / (500 / C60))


def test_a_fraction_left_empty_is_no_fraction(store, planned):
    assert store(typed(({}, [MONO, {"name": "", "mass_mg": "", "level": ""}]))).status_code == 302
    assert planned.isolation_steps.get().fractions.count() == 1


@pytest.mark.parametrize(
    ("fraction", "field", "word"),
    [
        ({**MONO, "mass_mg": ""}, "mass_mg", "unit"),
        ({**MONO, "mass_mg": "41"}, "mass_mg", "no unit"),
        ({**MONO, "mass_mg": "-1 mg"}, "mass_mg", "below 0"),
        ({**MONO, "level": "80"}, "level", "70"),
        ({**MONO, "level": "mono"}, "level", "whole number"),
        ({**MONO, "purity": "140 %"}, "purity", "100"),
        ({**MONO, "purity": "0 %"}, "purity", "0"),
    ],
)
def test_what_is_wrong_is_said_at_its_fraction_and_nothing_is_stored(
    store, planned, fraction, field, word
):
    response = store(typed(({"medium": "silica"}, [CAGE, fraction])))
    assert response.status_code == 422
    step = form_of(response).steps[0]
    assert word in " ".join(step.fractions[1].errors[field])
    page = response.content.decode()
    assert 'value="silica"' in page
    for value in (value for value in fraction.values() if value):
        assert f'value="{value}"' in page
    assert not planned.isolation_steps.exists()


def test_buttons_add_and_take_away_steps_and_fractions_without_storing(store, planned):
    steps = [({"medium": "silica"}, [CAGE, MONO]), ({"medium": "alumina"}, [])]
    shown = form_of(store(typed(*steps, add_step="1")))
    assert [step["medium"].value() for step in shown.steps] == ["silica", "alumina", None]
    assert len(shown.steps[2].fractions) == 1
    shown = form_of(store(typed(*steps, remove_step="0")))
    assert [step["medium"].value() for step in shown.steps] == ["alumina"]
    shown = form_of(store(typed(*steps, add_fraction="0")))
    assert [len(step.fractions) for step in shown.steps] == [3, 0]
    shown = form_of(store(typed(*steps, remove_fraction="0.0")))
    assert [row["name"].value() for row in shown.steps[0].fractions] == ["F2"]
    assert not planned.isolation_steps.exists()


def test_what_a_gap_left_is_stored_without_it(store, planned):
    data = typed(({"medium": "silica"}, [CAGE]), ({"medium": "alumina"}, [MONO]))
    del data["isolation-0-row"]
    assert store(data).status_code == 302
    assert planned.isolation_steps.get().medium == "alumina"


def test_the_second_person_loses_no_step(store, planned, signed_in, second_author, sheet_of):
    store(typed(({"medium": "silica"}, [MONO])))
    response = signed_in(second_author).post(
        sheet_of(planned, "isolation"), typed(({"medium": "alumina"}, [CAGE]))
    )
    assert response.status_code == 409
    page = response.content.decode()
    assert 'value="alumina"' in page
    assert "silica" in page
    assert planned.isolation_steps.get().medium == "silica"


@pytest.mark.parametrize("who", ["reader", "reviewer"])
def test_only_authors_write(request, signed_in, planned, sheet_of, who):
    client = signed_in(request.getfixturevalue(who))
    assert client.post(sheet_of(planned, "isolation"), typed(({}, [MONO]))).status_code == 403


@pytest.mark.parametrize("eluent", ["CS2/hexane 1:1", "hexane, carbon disulfide 5 %", "CS2"])
def test_the_solvents_of_isolation_are_cautioned_against(
    store, signed_in, author, planned, sheet_of, eluent
):
    store(typed(({"solvent": eluent}, [])))
    sheet = signed_in(author).get(sheet_of(planned)).context["record"].cautions
    assert "carbon_disulfide" in {caution.key for caution in sheet.rules}
    assert not sheet.unlisted


def test_an_eluent_that_is_not_listed_is_named_so(store, signed_in, author, planned, sheet_of):
    store(typed(({"solvent": "toluene → house blend 7"}, [])))
    assert signed_in(author).get(sheet_of(planned)).context["record"].cautions.unlisted == (
        "house blend 7",
    )


def test_conversion_and_yields_say_what_they_rest_on(store, signed_in, author, planned, sheet_of):
    store(typed(({}, [CAGE, MONO])))
    sheet = signed_in(author).get(sheet_of(planned)).content.decode()
    assert "Conversion of the cage, by recovered cage" in sheet
    data = {"readings-method": "hplc", "readings-scale": "percent", "readings-level_0": "60"}
    signed_in(author).post(sheet_of(planned, "readings"), data | {"seen_version": "2"})
    sheet = signed_in(author).get(sheet_of(planned)).content.decode()
    assert "Conversion of the cage, by the latest reading" in sheet
    assert "Yield on consumed cage, by recovered cage" in sheet


def test_a_fraction_of_which_only_the_purity_is_typed_is_asked_for_its_mass(store):
    response = store(typed(({}, [{"purity": "97 %"}])))
    assert response.status_code == 422
    (fraction,) = form_of(response).steps[0].fractions
    assert fraction.errors["mass_mg"] == ["Give the mass with its unit, such as 41 mg."]
