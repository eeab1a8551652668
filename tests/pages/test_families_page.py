import pytest
from django.urls import reverse

from reactions.chemistry.families import families
from reactions.models import LabFamily, known_family

pytestmark = pytest.mark.django_db
ADDRESS = "reactions:families"
OWN = {
    "name": "Stannylation of our own", "branch": "Radical addition",
    "attaches": "a trialkylstannyl group", "level_counts": "one R3Sn and one hydrogen",
    "attachment_points": "1", "sites_c60": "30", "highest_c60": "2", "model": "sequential",
    "is_forward": "on", "usual_solvents": "toluene; benzene", "temperature_lowest": "80 °C",
    "duration_lowest": "2 h", "duration_highest": "1 d", "source": "invented for this test",
    "roles-0-name": "tributyltin hydride", "roles-0-role": "reagent",
    "roles-0-equivalents_per_addition": "1.5", "by_products-0-name": "hydrogen",
    "by_products-0-smiles": "[H][H]", "by_products-0-is_gas": "on",
}  # fmt: skip


@pytest.fixture
def add(signed_in, author, campaign):
    def add(person=author, **changed):
        return signed_in(person).post(reverse(ADDRESS), {**OWN, **changed})

    return add


def test_every_family_stands_with_its_source(signed_in, author, campaign):
    body = signed_in(author).get(reverse(ADDRESS)).content.decode()
    for family in families().values():
        assert f'id="family-{family.key}"' in body
        assert f"{reverse('reactions:planner')}?family={family.key}" in body
    assert body.count("Source: ") == len(families())


def test_a_lab_adds_its_own_and_plans_with_it(add, signed_in, author):
    assert add().status_code == 302
    family = known_family("stannylation_of_our_own")
    assert family.sites == {"C60": 30}
    assert family.usual_solvents == ("toluene", "benzene")
    assert family.usual_temperature_c == (80.0, 80.0)
    assert family.usual_duration_min == (120.0, 1440.0)
    assert family.by_products[0].is_gas
    page = signed_in(author).get(reverse(ADDRESS)).content.decode()
    assert "your lab’s own" in page
    planner = signed_in(author).get(reverse("reactions:planner"), {"family": family.key})
    assert planner.context["lines"].forms[0]["name"].value() == "tributyltin hydride"


@pytest.mark.parametrize(
    ("changed", "field"),
    [
        ({"name": ""}, "name"),
        ({"source": ""}, "source"),
        ({"sites_c60": ""}, "sites_c60"),
        ({"sites_c60": "many"}, "sites_c60"),
        ({"attachment_points": ""}, "attachment_points"),
        ({"attachment_points": "3"}, "attachment_points"),
        ({"highest_c60": "31"}, "highest_c60"),
        ({"temperature_lowest": "80"}, "temperature_lowest"),
        ({"temperature_lowest": "80 °C", "temperature_highest": "20 °C"}, "temperature_lowest"),
        ({"key": "Not A Key"}, "key"),
        ({"key": "bingel"}, "key"),
        ({"model": "alchemy"}, "model"),
    ],
)
def test_what_is_wrong_is_told_at_its_field_and_kept(add, changed, field):
    response = add(**changed)
    assert response.status_code == 422
    assert list(response.context["form"].errors) == [field]
    assert b"a trialkylstannyl group" in response.content
    assert not LabFamily.objects.exists()


def test_a_bad_line_is_told_at_the_line(add):
    response = add(**{"by_products-0-smiles": "C(C"})
    assert response.context["by_products"][0].errors["smiles"]
    response = add(**{"roles-0-equivalents_per_addition": "-1"})
    assert response.context["roles"][0].errors["equivalents_per_addition"]
    assert not LabFamily.objects.exists()


def test_a_person_who_is_nobody_s_author_may_not_add(add, reader):
    assert add(person=reader).status_code == 403
    assert not LabFamily.objects.exists()


def test_a_reader_sees_no_form(signed_in, reader):
    assert b"Add the family" not in signed_in(reader).get(reverse(ADDRESS)).content
