import pytest

from reactions.models import State
from reactions.services.revising import Edit
from reactions.services.states import move, sign

pytestmark = pytest.mark.django_db


def test_the_second_person_is_told_what_changed_and_loses_nothing_typed(
    signed_in, author, second_author, planned, sheet_of, typed_conditions, stored_again
):
    address = sheet_of(planned, "conditions")
    signed_in(author).post(address, typed_conditions(temperature_c="40 °C"))
    response = signed_in(second_author).post(
        address, typed_conditions(temperature_c="60 °C", solvent="xylene")
    )
    page = response.content.decode()
    assert response.status_code == 409
    assert stored_again(planned).temperature_c == 40
    assert 'value="60 °C"' in page
    assert 'value="xylene"' in page
    (change,) = response.context["parts"]["conditions"].others
    assert (change.name, change.before, change.after) == ("temperature", "22 °C", "40 °C")
    assert change.made_by == "author"
    assert "author changed this section" in page

    shown = response.context["parts"]["conditions"]
    again = typed_conditions(shown.seen_version, temperature_c="60 °C", solvent="xylene")
    assert signed_in(second_author).post(address, again).status_code == 302
    stored = stored_again(planned)
    assert (stored.temperature_c, stored.solvent) == (60, "xylene")
    assert stored.revisions.last().made_by == second_author


def test_a_change_of_another_part_stands_in_nobodys_way(
    signed_in, author, second_author, planned, sheet_of, typed_conditions, stored_again
):
    signed_in(author).post(
        sheet_of(planned, "conclusion"),
        {"seen_version": "1", "conclusion-conclusion": "done", "conclusion-title": planned.title},
    )
    response = signed_in(second_author).post(
        sheet_of(planned, "conditions"), typed_conditions(temperature_c="60 °C")
    )
    assert response.status_code == 302
    assert stored_again(planned).temperature_c == 60
    assert stored_again(planned).conclusion == "done"


def test_a_post_that_names_no_version_overrides_nobody(
    signed_in, author, planned, sheet_of, typed_conditions, stored_again
):
    address = sheet_of(planned, "conditions")
    signed_in(author).post(address, typed_conditions(temperature_c="40 °C"))
    for version in ("", "latest", "²", "-1"):
        typed = typed_conditions(version, temperature_c="60 °C")
        assert signed_in(author).post(address, typed).status_code == 409
    assert stored_again(planned).temperature_c == 40


def test_who_types_while_another_signs_keeps_the_text(
    signed_in, author, second_author, planned, sheet_of, typed_conditions, stored_again
):
    for state in (State.RUNNING, State.COMPLETED):
        move(Edit(author, planned.pk), state)
    sign(Edit(author, planned.pk))
    for enhanced in (False, True):
        response = signed_in(second_author, enhanced).post(
            sheet_of(planned, "conditions"), typed_conditions(solvent="xylene")
        )
        assert response.status_code == 409
        assert "is signed and takes no change" in response.content.decode()
        assert 'value="xylene"' in response.content.decode()
    assert stored_again(planned).solvent == "toluene"


def test_a_conflict_over_the_weighing_list_keeps_both_lists_before_the_eyes(
    signed_in, author, second_author, planned, sheet_of, typed_lines, stored_again
):
    address = sheet_of(planned, "lines")
    cage = {"role": "cage", "name": "C60"}
    reagent = {"name": "diethyl bromomalonate", "smiles": "CCOC(=O)C(Br)C(=O)OCC"}
    first = typed_lines({**cage, "charge": "400 mg"}, {**reagent, "charge": "1.1"})
    second = typed_lines({**cage, "charge": "500 mg"}, {**reagent, "charge": "0.9"})
    assert signed_in(author).post(address, first).status_code == 302
    response = signed_in(second_author).post(address, second)
    assert response.status_code == 409
    assert 'value="0.9"' in response.content.decode()
    names = {change.name for change in response.context["parts"]["lines"].others}
    assert "C60: planned mass" in names
    assert stored_again(planned).components.get(role="cage").planned_mass_mg == 400
