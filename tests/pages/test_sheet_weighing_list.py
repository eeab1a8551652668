import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db

CAGE = {"role": "cage", "name": "C60", "charge": "500 mg"}
REAGENT = {
    "name": "diethyl bromomalonate",
    "smiles": "CCOC(=O)C(Br)C(=O)OCC",
    "charge": "1.1",
    "purity": "92 %",
    "density_g_per_ml": "1.402 g/mL",
}
# Molar masses of C60 and of diethyl bromomalonate, average, in g/mol; from IUPAC's abridged
# atomic weights (C 12.011, H 1.008, O 15.999, Br 79.904).
C60 = 720.66
BROMOMALONATE = 7 * 12.011 + 11 * 1.008 + 4 * 15.999 + 79.904


@pytest.fixture
def store(signed_in, author, planned, sheet_of, typed_lines):
    def store(*lines, person=author, **others):
        return signed_in(person).post(sheet_of(planned, "lines"), typed_lines(*lines, **others))

    return store


@pytest.fixture
def preview(signed_in, author, planned, typed_lines):
    address = reverse("reactions:preview-lines", args=[planned.campaign.code, planned.number])

    def preview(*lines):
        return signed_in(author, enhanced=True).post(address, typed_lines(*lines))

    return preview


def errors_of(response):
    return [dict(line.errors) for line in response.context["parts"]["lines"].form.lines]


def test_from_one_mass_and_equivalents_all_else_follows(store, planned):
    assert store(CAGE, REAGENT).status_code == 302
    cage, reagent = planned.components.all()
    assert cage.planned_mmol == pytest.approx(500 / C60)
    assert reagent.planned_mmol == pytest.approx(1.1 * 500 / C60)
    assert reagent.planned_mass_mg == pytest.approx(1.1 * 500 / C60 * BROMOMALONATE / 0.92)
    assert reagent.planned_volume_ml == pytest.approx(reagent.planned_mass_mg / 1402)


@pytest.mark.parametrize(
    ("typed", "mmol"),
    [
        ("250 mg", 250 * 0.92 / BROMOMALONATE),
        ("0.25 g", 250 * 0.92 / BROMOMALONATE),
        ("0.2 mL", 0.2 * 1402 * 0.92 / BROMOMALONATE),
        ("1.5 mmol", 1.5),
        ("1.2 eq", 1.2 * 500 / C60),
        ("1,2", 1.2 * 500 / C60),
    ],
)
def test_a_reagent_may_be_planned_by_any_amount(store, planned, typed, mmol):
    assert store(CAGE, {**REAGENT, "charge": typed}).status_code == 302
    reagent = planned.components.get(role="reagent")
    assert reagent.planned_mmol == pytest.approx(mmol)
    assert reagent.equivalents == pytest.approx(mmol / (500 / C60))


def test_the_cage_may_be_planned_by_mmol(store, planned):
    store({**CAGE, "charge": "0.7 mmol", "purity": "99 %"}, {**REAGENT, "charge": "1.4 mmol"})
    cage, reagent = planned.components.all()
    assert cage.planned_mass_mg == pytest.approx(0.7 * C60 / 0.99)
    assert reagent.equivalents == pytest.approx(2)


def test_an_amount_is_turned_into_equivalents_of_the_line_it_refers_to(store, planned):
    base = {
        "role": "base",
        "name": "DBU",
        "smiles": "C1CCC2=NCCCN2CC1",
        "charge": "0.9 mmol",
        "equivalents_of": "diethyl bromomalonate",
    }
    assert store(CAGE, {**REAGENT, "charge": "0.6 mmol"}, base).status_code == 302
    assert planned.components.get(role="base").equivalents == pytest.approx(1.5)


def test_actual_amounts_give_actual_equivalents(store, planned):
    store({**CAGE, "actual": "0.5013 g"}, {**REAGENT, "actual": "0.142 mL"})
    reagent = planned.components.get(role="reagent")
    mmol = 0.142 * 1402 * 0.92 / BROMOMALONATE
    assert reagent.actual_mmol == pytest.approx(mmol)
    assert reagent.actual_equivalents == pytest.approx(mmol / (501.3 / C60))
    assert reagent.equivalents == pytest.approx(1.1)


def test_an_unplanned_reagent_goes_on_the_list_during_the_run(store, planned):
    more = {
        "role": "base",
        "name": "triethylamine",
        "smiles": "CCN(CC)CC",
        "actual": "0.1 mmol",
    }
    assert store({**CAGE, "actual": "505 mg"}, REAGENT, more).status_code == 302
    added = planned.components.get(name="triethylamine")
    assert added.equivalents is None
    assert added.actual_equivalents == pytest.approx(0.1 / (505 / C60))


@pytest.mark.parametrize(
    ("line", "field", "word"),
    [
        ({**REAGENT, "charge": "a spoonful"}, "charge", "a spoonful"),
        ({**REAGENT, "charge": "0"}, "charge", "above 0"),
        ({**REAGENT, "charge": "-1 eq"}, "charge", "below 0"),
        ({**REAGENT, "charge": "1,250"}, "charge", "two ways"),
        ({**REAGENT, "charge": "1.6 M"}, "charge", "concentration"),
        ({**REAGENT, "actual": "250"}, "actual", "no unit"),
        ({**REAGENT, "purity": "120 %"}, "purity", "outside 0 to 100"),
        ({**REAGENT, "purity": "0 %"}, "purity", "0"),
        ({**REAGENT, "smiles": "C1CC"}, "smiles", "C1CC"),
        ({**REAGENT, "name": ""}, "name", "Name the substance"),
        ({**REAGENT, "equivalents_of": "tea"}, "equivalents_of", "tea"),
        ({**REAGENT, "name": "C60"}, "name", "already"),
        ({**REAGENT, "role": "cage", "charge": "1 g"}, "role", "one cage"),
        ({**REAGENT, "density_g_per_ml": "1.4"}, "density_g_per_ml", "no unit"),
        ({**REAGENT, "smiles": "", "molar_mass_g_per_mol": "239"}, "molar_mass_g_per_mol", "g/mol"),
        ({"name": "brine", "charge": "5 mL"}, "charge", "molar mass"),
    ],
)
def test_what_is_wrong_is_said_at_its_field_and_nothing_is_stored(
    store, planned, line, field, word
):
    response = store(CAGE, line)
    assert response.status_code == 422
    assert word in " ".join(errors_of(response)[1][field])
    page = response.content.decode()
    for typed in (value for value in line.values() if value and value != "cage"):
        assert f'value="{typed}"' in page
    assert planned.components.get(role="reagent").equivalents == 1.1


def test_a_volume_of_cage_is_refused(store):
    assert "mmol" in str(errors_of(store({**CAGE, "charge": "5 mL"}))[0]["charge"])


def test_lines_left_as_shown_make_no_revision(signed_in, author, planned, sheet_of, stored_again):
    client = signed_in(author)
    planned.components.filter(role="reagent").update(equivalents=1.123456)
    form = client.get(sheet_of(planned)).context["parts"]["lines"].form
    data = {"seen_version": "1"}
    for line in form.lines:
        data[f"{line.prefix}-row"] = "1"
        data |= {field.html_name: field.value() or "" for field in line}
        for name in ("purity", "density_g_per_ml", "molar_mass_g_per_mol"):
            field = line[name]
            data[field.html_name] = field.field.prepare_value(field.initial) or ""
    assert client.post(sheet_of(planned, "lines"), data).status_code == 302
    assert stored_again(planned).version == 1
    assert planned.components.get(role="reagent").equivalents == 1.123456


def test_typing_is_answered_with_what_follows_and_stores_nothing(preview, planned):
    response = preview({**CAGE, "charge": "1 g"}, {**REAGENT, "charge": "2", "actual": "0.3 mL"})
    page = response.content.decode()
    # 2 · 1000 mg / 720.66 g/mol = 2.775 mmol; derived.
    assert "2.775 mmol" in page
    assert 'id="lines-1-planned" hx-swap-oob="true"' in page
    assert 'id="lines-1-found" hx-swap-oob="true"' in page
    assert "<input" not in page
    assert planned.components.get(role="cage").planned_mass_mg == 500


def test_half_typed_lines_hold_up_none_of_the_others(preview):
    response = preview(
        CAGE, {**REAGENT, "charge": "1."}, {"name": "DBU", "smiles": "C1CCC"}, REAGENT
    )
    page = response.content.decode()
    assert response.status_code == 200
    assert "0.6938 mmol" in page
    assert "C1CCC" in page


def test_an_amount_typed_says_the_equivalents_it_makes(preview):
    page = preview(CAGE, {**REAGENT, "charge": "0.6938 mmol"}).content.decode()
    assert "1 eq" in page


def test_a_button_adds_a_line_and_another_takes_it_away_without_storing(
    store, signed_in, author, planned
):
    more = {"name": "DBU", "charge": "1.5 eq"}
    response = store(CAGE, REAGENT, more, add_line="1")
    assert response.status_code == 200
    form = response.context["parts"]["lines"].form
    assert [line.title for line in form.lines] == ["C60", "diethyl bromomalonate", "DBU", ""]
    response = store(CAGE, REAGENT, more, remove_line="1")
    form = response.context["parts"]["lines"].form
    assert [(line.title, line.place) for line in form.lines] == [("C60", "0"), ("DBU", "2")]
    assert 'value="1.5 eq"' in response.content.decode()
    assert planned.components.count() == 2


def test_work_out_without_a_script_shows_the_amounts_and_stores_nothing(store, planned):
    response = store({**CAGE, "charge": "1 g"}, REAGENT, work_out="1")
    assert response.status_code == 200
    assert "1.388 mmol" in response.content.decode()  # 1000 / 720.66; derived
    assert planned.components.get(role="cage").planned_mass_mg == 500


@pytest.mark.parametrize("who", ["reader", "reviewer"])
def test_only_authors_write_or_preview(request, signed_in, planned, sheet_of, typed_lines, who):
    client = signed_in(request.getfixturevalue(who))
    typed = typed_lines(CAGE, REAGENT)
    assert client.post(sheet_of(planned, "lines"), typed).status_code == 403
    address = reverse("reactions:preview-lines", args=["ACC", planned.number])
    assert client.post(address, typed).status_code == 403
