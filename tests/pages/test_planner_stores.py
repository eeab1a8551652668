import pytest
from django.urls import reverse

from reactions.models import Reaction

pytestmark = pytest.mark.django_db
MALONATE = "*C(*)(C(=O)OCC)C(=O)OCC"
TYPED = {
    "action": "plan", "basis": "cage", "campaign": "ACC", "family": "bingel", "cage": "C60",
    "addend": MALONATE, "cage_mass": "0.5 g", "cage_purity": "99 %", "objective": "most_of_level",
    "level": "1", "model": "sequential", "reagent_efficiency": "80 %", "solvent": "toluene",
    "temperature": "22 °C", "duration": "4 h", "atmosphere": "nitrogen",
    "lines-0-name": "diethyl bromomalonate", "lines-0-role": "reagent", "lines-0-purity": "92 %",
    "lines-1-name": "DBU", "lines-1-role": "base", "lines-1-equivalents": "2",
    "lines-1-per": "reagent", "lines-2-name": "dilute acid", "lines-2-role": "quench",
}  # fmt: skip


@pytest.fixture
def press(signed_in, author, campaign):
    def press(person=author, **changed):
        fields = {name: value for name, value in {**TYPED, **changed}.items() if value is not None}
        return signed_in(person).post(reverse("reactions:planner"), fields)

    return press


def test_one_press_makes_a_planned_reaction_with_its_lines(press, author):
    response = press()
    reaction = Reaction.objects.get()
    assert response.status_code == 302
    assert response.url == reverse("reactions:sheet", args=["ACC", reaction.number])
    assert reaction.state == "planned"
    assert reaction.created_by == author
    assert reaction.addend.smiles == MALONATE
    assert reaction.target_level == 1
    assert reaction.objective == {"kind": "most_of_level", "level": 1}
    assert reaction.composition_model["reagent_efficiency"] == 0.8
    assert sum(reaction.predicted_composition) == pytest.approx(1.0, abs=1e-6)
    assert (reaction.temperature_c, reaction.duration_min) == (22.0, 240.0)
    names = [(row.role, row.name) for row in reaction.components.all()]
    assert names == [
        ("cage", "C60"), ("reagent", "diethyl bromomalonate"), ("base", "DBU"),
        ("quench", "dilute acid"),
    ]  # fmt: skip
    assert reaction.components.get(name="DBU").equivalents_of == "diethyl bromomalonate"
    assert reaction.components.get(name="DBU").planned_mass_mg > 0
    assert reaction.solvent_volume_ml > 0


def test_a_title_is_made_where_none_is_typed(press):
    press()
    assert Reaction.objects.get().title == "diethyl malonate (methano) mono-adduct of C60"
    press(title="My own")
    assert Reaction.objects.filter(title="My own").exists()


@pytest.mark.parametrize(
    ("changed", "field"),
    [
        ({"campaign": ""}, "campaign"),
        ({"family": ""}, "family"),
        ({"cage_mass": ""}, "cage_mass"),
        ({"cage_mass": "half"}, "cage_mass"),
        ({"addend": "C(C"}, "addend"),
        ({"level": "31"}, "level"),
    ],
)
def test_what_is_missing_or_wrong_is_told_and_nothing_is_stored(press, changed, field):
    response = press(**changed)
    assert response.status_code == 422
    assert field in response.context["form"].errors
    assert b'value="diethyl bromomalonate"' in response.content
    assert not Reaction.objects.exists()


def test_a_level_above_the_highest_known_is_stored_once_confirmed(press):
    response = press(level="8")
    assert response.status_code == 422
    assert "is_level_confirmed" in response.context["form"].errors
    assert not Reaction.objects.exists()
    assert press(level="8", is_level_confirmed="7").status_code == 422
    assert press(level="8", is_level_confirmed="8").status_code == 302
    assert Reaction.objects.get().target_level == 8


@pytest.mark.parametrize("who", ["reader", "reviewer", "outsider"])
def test_only_an_author_of_the_campaign_plans_in_it(press, request, who):
    response = press(person=request.getfixturevalue(who))
    assert response.status_code == 422
    assert "campaign" in response.context["form"].errors
    assert not Reaction.objects.exists()


def test_a_reader_may_reckon_all_the_same(press, reader):
    response = press(person=reader, action="work_out")
    assert response.status_code == 200
    assert response.context["outcome"].composed is not None
    assert b"author in no campaign" in response.content


def test_a_band_is_stored_with_the_level_that_fills_it_most(press):
    press(objective="band", band_lowest="2", band_highest="3")
    reaction = Reaction.objects.get()
    assert reaction.objective == {"kind": "band", "lowest": 2, "highest": 3}
    composition = reaction.predicted_composition
    assert reaction.target_level == max((2, 3), key=lambda level: composition[level])


def test_a_usual_addend_chosen_without_script_is_taken(press):
    press(addend="", usual_addend=MALONATE)
    assert Reaction.objects.get().addend.smiles == MALONATE


def test_a_stranger_is_sent_to_log_in(client, db):
    response = client.post(reverse("reactions:planner"), TYPED)
    assert response.status_code == 302
    assert reverse("reactions:login") in response.url
