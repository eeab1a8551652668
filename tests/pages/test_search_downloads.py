import csv
import io
import json

import pytest
from django.urls import reverse

from reactions.models import Campaign, Reaction
from reactions.pages.search.downloads import harmless

pytestmark = pytest.mark.django_db


@pytest.fixture
def download(signed_in, author):
    def download(kind, address="", person=author):
        response = signed_in(person).get(f"{reverse(f'reactions:search-{kind}')}?{address}")
        content = b"".join(response.streaming_content) if response.streaming else response.content
        return response, content.decode("utf-8-sig")

    return download


def rows_of(text):
    return list(csv.DictReader(io.StringIO(text)))


def test_csv_holds_every_hit_and_nothing_else(download, planned, author, campaign):
    Reaction.objects.bulk_create(
        Reaction(campaign=campaign, number=number, title="t", family_key="prato", created_by=author)
        for number in range(2, 1203)
    )
    response, text = download("csv", "family=prato&sort=label")
    assert response["Content-Type"].startswith("text/csv")
    assert 'filename="reactions.csv"' in response["Content-Disposition"]
    assert [row["label"] for row in rows_of(text)] == [f"ACC-{n}" for n in range(2, 1203)]


def test_a_row_holds_conditions_and_composition_in_stated_units(download, planned):
    Reaction.objects.filter(pk=planned.pk).update(
        found_composition=[0.3, 0.4, 0.1, 0.0, 0.0, 0.0, 0.1, 0.1], yield_on_charged=0.38
    )
    (row,) = rows_of(download("csv")[1])
    assert row["campaign"] == "ACC"
    assert row["addend_smiles"] == planned.addend.smiles
    assert (row["temperature_c"], row["duration_min"]) == ("22.0", "240.0")
    assert row["yield_on_charged"] == "0.38"
    assert row["found_mole_fraction_1"] == "0.4"
    assert float(row["found_mole_fraction_6_and_higher"]) == pytest.approx(0.2)


def test_json_says_the_same(download, planned):
    response, text = download("json")
    assert response["Content-Type"] == "application/json"
    (row,) = json.loads(text)
    assert row["label"] == planned.label
    assert row["temperature_c"] == 22.0
    assert row["found_composition"] is None


def test_no_hits_are_an_empty_file(download, planned):
    assert json.loads(download("json", "cage=C70")[1]) == []
    assert rows_of(download("csv", "cage=C70")[1]) == []


@pytest.mark.parametrize("kind", ["csv", "json"])
def test_only_members_download(download, planned, outsider, kind):
    assert planned.title not in download(kind, person=outsider)[1]


@pytest.mark.parametrize("kind", ["csv", "json"])
def test_a_bad_question_is_refused_in_words(download, planned, kind):
    response, text = download(kind, "temperature_c_lowest=warm")
    assert response.status_code == 422
    assert "holds no number" in json.loads(text)["errors"]["temperature_c_lowest"][0]


@pytest.mark.parametrize("sign", ["=", "+", "-", "@", "\t"])
def test_no_cell_is_a_formula_to_a_spreadsheet(download, planned, sign):
    Reaction.objects.filter(pk=planned.pk).update(title=f'{sign}HYPERLINK("x")')
    Campaign.objects.update(name="=1+1")
    (row,) = rows_of(download("csv")[1])
    assert row["title"] == f'\'{sign}HYPERLINK("x")'
    assert json.loads(download("json")[1])[0]["title"] == f'{sign}HYPERLINK("x")'


@pytest.mark.parametrize(
    ("cell", "written"),
    [(-5.0, -5.0), ("-5.0", "-5.0"), ("+1e3", "+1e3"), ("-5 °C", "'-5 °C"), ("C60", "C60")],
)
def test_plain_numbers_stay_numbers(cell, written):
    assert harmless(cell) == written
