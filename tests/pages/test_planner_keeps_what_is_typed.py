import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db


@pytest.fixture
def choose(signed_in, author, campaign):
    """Return a function that chooses a family over what stands in the fields."""

    def choose(family, fields, action="family"):
        data = {name: value for name, value in fields.items() if value is not None}
        response = signed_in(author, enhanced=True).post(
            reverse("reactions:planner"), {**data, "family": family, "action": action}
        )
        form, lines = response.context["form"], response.context["lines"]
        return {name: form[name].value() for name in form.fields} | {
            line.add_prefix(name): line[name].value() for line in lines for name in line.fields
        }

    return choose


def names_in(fields):
    return [value for name, value in fields.items() if name.endswith("-name") and value]


def test_a_family_fills_what_is_blank(choose):
    fields = choose("prato", {"basis": "cage", "objective": "most_of_level"})
    assert fields["solvent"] == "toluene"
    assert fields["temperature"] == "110 °C"
    assert fields["filled_for"] == "prato"
    assert names_in(fields) == ["N-methylglycine", "paraformaldehyde"]
    assert fields["lines-1-equivalents"] == "2.5"


def test_another_family_replaces_what_the_last_one_filled(choose):
    first = choose("prato", {"basis": "cage"})
    second = choose("bingel", first)
    assert second["temperature"] == "20 °C"
    assert "N-methylglycine" not in names_in(second)


def test_what_a_person_changed_stays(choose):
    first = choose("prato", {"basis": "cage", "cage_mass": "0.5 g"})
    changed = first | {
        "temperature": "150 °C",
        "solvent": "1,2-dichlorobenzene",
        "lines-1-name": "4-methoxybenzaldehyde",
    }
    second = choose("bingel", changed)
    assert second["temperature"] == "150 °C"
    assert second["solvent"] == "1,2-dichlorobenzene"
    assert second["cage_mass"] == "0.5 g"
    assert "4-methoxybenzaldehyde" in names_in(second)


def test_a_family_that_takes_off_asks_for_equivalents(choose):
    fields = choose("retro_diels_alder", choose("prato", {"basis": "cage"}))
    assert (fields["objective"], fields["equivalents"]) == ("equivalents", "10")
    assert choose("prato", fields)["objective"] == "most_of_level"


def test_a_line_more_keeps_the_others(choose):
    first = choose("prato", {"basis": "cage"})
    fields = choose("prato", first, action="add_line")
    assert names_in(fields) == names_in(first)
    assert fields["lines-2-name"] == ""
