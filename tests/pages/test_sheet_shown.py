import pytest

from reactions.models import State
from reactions.services.inputs import ObservationInput, ReadingInput
from reactions.services.revising import Edit
from reactions.services.run import add_observation, add_reading
from reactions.services.states import move, sign

pytestmark = pytest.mark.django_db


@pytest.fixture
def signed(planned, author):
    for state in (State.RUNNING, State.COMPLETED):
        move(Edit(author, planned.pk), state)
    sign(Edit(author, planned.pk))
    return planned


def test_an_author_sees_every_section_and_its_forms(signed_in, author, planned, sheet_of):
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    for title in ("Cautions", "Plan", "Run", "Readout", "Sign-off"):
        assert f">{title}</h2>" in page
    for part in ("lines", "conditions", "time-line", "readings", "isolation", "conclusion"):
        assert f'action="{sheet_of(planned, part)}"' in page


def test_amounts_stand_with_units_and_planned_beside_actual(signed_in, author, planned, sheet_of):
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    # 500 mg / 720.66 g/mol; derived.
    assert "0.6938 mmol" in page
    assert 'value="500 mg"' in page
    assert 'value="1.1 eq"' in page
    assert 'value="250 mL"' in page
    assert 'value="4 h"' in page


def test_cautions_head_the_sheet_and_unlisted_is_never_silent(signed_in, author, planned, sheet_of):
    planned.components.filter(role="reagent").update(name="an ester of our own", smiles="")
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    assert page.index("licensed practice come first") < page.index(">Plan</h2>")
    assert 'alt="GHS02: flame"' in page
    assert "Highly flammable liquid and vapour" in page
    assert "<b>an ester of our own</b>: not listed here: read its safety data sheet" in page


def test_predicted_stands_above_found_with_a_table_of_values(signed_in, author, planned, sheet_of):
    add_reading(
        Edit(author, planned.pk),
        ReadingInput(method="hplc", mole_fraction_by_level={0: 0.5, 1: 0.4, 2: 0.1}),
    )
    page = signed_in(author).get(sheet_of(planned)).content.decode()
    predicted = page.index('aria-label="predicted: unreacted 45.0 %')
    found = page.index('aria-label="found: unreacted 50.0 %, mono 40.0 %, bis 10.0 %"')
    assert predicted < found
    assert '<td class="number">40.0 %</td>' in page


def test_a_reader_sees_everything_and_no_form(signed_in, reader, planned, sheet_of):
    page = signed_in(reader).get(sheet_of(planned)).content.decode()
    assert "diethyl bromomalonate" in page
    assert "data-part" not in page
    assert "/remove/" not in page
    assert sheet_of(planned, name="state") not in page


def test_a_signed_sheet_shows_no_edit_controls_even_to_its_author(
    signed_in, author, signed, sheet_of
):
    page = signed_in(author).get(sheet_of(signed)).content.decode()
    assert "data-part" not in page
    assert "The record says today what was signed." in page
    assert page.count("<form") == 1  # log out


def test_who_is_no_member_is_told_there_is_no_such_reaction(signed_in, outsider, planned, sheet_of):
    client = signed_in(outsider)
    assert client.get(sheet_of(planned)).status_code == 404
    assert client.get(sheet_of(planned, name="print")).status_code == 404
    assert client.post(sheet_of(planned, "conditions")).status_code == 404


def test_what_people_type_is_text_never_markup(signed_in, author, planned, sheet_of):
    hostile = "<script>alert(1)</script><img src=x onerror=alert(1)>"
    planned.title = hostile
    planned.conclusion = hostile
    planned.solvent = hostile[:80]
    planned.save()
    planned.components.update(batch=hostile[:80])
    planned.components.filter(role="reagent").update(name=hostile)
    add_observation(Edit(author, planned.pk), ObservationInput(at_min=1, text=hostile))
    client = signed_in(author)
    for address in (sheet_of(planned), sheet_of(planned, name="print")):
        page = client.get(address).content.decode()
        assert "<script>alert" not in page
        assert "<img src=x" not in page
        assert "&lt;script&gt;alert" in page


def test_no_inline_script_or_style_which_the_policy_would_refuse(
    signed_in, author, planned, sheet_of
):
    for address in (sheet_of(planned), sheet_of(planned, name="print")):
        page = signed_in(author).get(address).content.decode()
        assert "<style" not in page
        assert " style=" not in page
        assert " onclick=" not in page
        assert (
            page.count("<script")
            == page.count("<script ")
            == page.count(" src=") - page.count("<img src=")
        )


def test_getting_a_part_goes_to_it_on_its_sheet(signed_in, author, planned, sheet_of):
    response = signed_in(author).get(sheet_of(planned, "conditions"))
    assert response.url == f"{sheet_of(planned)}#conditions"
    assert signed_in(author).get(sheet_of(planned, "nonsense")).status_code == 404
