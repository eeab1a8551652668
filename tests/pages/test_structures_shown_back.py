import pytest
from django.urls import reverse

from reactions.models import Membership, Role
from reactions.services.addends import store_addend

pytestmark = pytest.mark.django_db
MALONATE = "*C(*)(C(=O)OCC)C(=O)OCC"
MOLFILE = """
  drawn

  3  2  0  0  0  0            999 V2000
    0.0000    0.0000    0.0000 C   0  0
    1.0000    0.0000    0.0000 C   0  0
   -1.0000    0.0000    0.0000 A   0  0
  1  2  1  0
  1  3  1  0
M  END
"""


@pytest.fixture
def show(signed_in, author):
    def show(text, enhanced=False, **others):
        return signed_in(author, enhanced=enhanced).post(
            reverse("reactions:structure"), {"field": "addend", "addend": text, **others}
        )

    return show


def test_an_addend_is_shown_with_formula_mass_and_attachment(show):
    body = show(MALONATE).content.decode()
    assert "<svg" in body
    assert "C<sub>7</sub>H<sub>10</sub>O<sub>4</sub>" in body
    # C7H10O4: 7 · 12.011 + 10 · 1.008 + 4 · 15.999; derived from abridged atomic weights.
    assert "158.15 g/mol" in body
    assert "2 cage carbons" in body


def test_a_molfile_is_understood_with_its_any_atom_as_the_cage(show):
    assert "1 cage carbon" in show(MOLFILE).content.decode()


@pytest.mark.parametrize("text", ["C(C", "CCO", "[R1]CC", "*C(*)(*)*", "not a structure"])
def test_a_bad_addend_is_told_in_words(show, text):
    response = show(text)
    assert response.status_code == 422
    assert "field-error" in response.content.decode()


def test_while_typing_the_words_go_to_the_field(show):
    response = show("C(C", enhanced=True, slot="plan_addend")
    assert response.status_code == 200
    assert '<div id="plan_addend_error"' in response.content.decode()


def test_nothing_typed_is_no_error(show):
    response = show("  ", enhanced=True, slot="plan_addend")
    assert 'field-error"' not in response.content.decode()


def test_a_query_needs_no_attachment_and_smarts_is_said_back(show):
    assert "<svg" in show("C1CCNC1", purpose="query").content.decode()
    assert "Read as a pattern" in show("[NX3;H0]", purpose="query").content.decode()
    assert show("C1CCNC1", purpose="query", addend_kind="molfile").status_code == 422


def test_only_people_who_are_logged_in_are_answered(client, db):
    assert client.post(reverse("reactions:structure"), {"text": "C"}).status_code == 302


@pytest.fixture
def picture(signed_in):
    return lambda person, key: signed_in(person).get(
        reverse("reactions:addend-picture", args=[key])
    )


def test_members_get_the_picture_of_an_addend_in_use(picture, planned, author, reader):
    for person in (author, reader):
        response = picture(person, planned.addend_id)
        assert response.status_code == 200
        assert response["Content-Type"] == "image/svg+xml"
        assert "private" in response["Cache-Control"]
        assert b"style=" not in response.content


def test_nobody_learns_what_other_campaigns_attach(picture, planned, outsider):
    assert picture(outsider, planned.addend_id).status_code == 404
    assert picture(outsider, 999_999).status_code == 404


def test_an_addend_that_no_reaction_uses_has_no_picture(picture, planned, author):
    assert picture(author, store_addend("*c1ccccc1").pk).status_code == 404


def test_a_new_member_gets_it(picture, planned, outsider, campaign):
    Membership.objects.create(campaign=campaign, user=outsider, role=Role.READER)
    assert picture(outsider, planned.addend_id).status_code == 200
