import pytest

from reactions.errors import FieldErrors
from reactions.models import Addend, Reaction
from reactions.services.errors import NeedsConfirmation, NotAllowed
from reactions.services.planning import plan_reaction

pytestmark = pytest.mark.django_db


def test_the_lines_are_worked_out_from_the_mass_of_cage(reaction):
    cage, reagent, base = reaction.components.all()
    # Derived: 100 mg · 0.99 / 720.66 g/mol; bromomalonate 239.065 g/mol, DBU 152.241 g/mol.
    assert cage.planned_mmol == pytest.approx(99 / 720.66, rel=1e-4)
    assert reagent.planned_mmol == pytest.approx(1.2 * 99 / 720.66, rel=1e-4)
    assert reagent.planned_mass_mg == pytest.approx(reagent.planned_mmol * 239.065 / 0.92, rel=1e-4)
    assert reagent.planned_volume_ml == pytest.approx(reagent.planned_mass_mg / 1402, rel=1e-4)
    assert base.planned_mmol == pytest.approx(2 * reagent.planned_mmol, rel=1e-9)


def test_numbers_run_from_1_in_each_campaign(author, campaign, plan):
    numbers = [plan_reaction(author, campaign, plan).number for _ in range(3)]
    assert numbers == [1, 2, 3]


def test_the_first_revision_holds_the_plan(reaction, author):
    revision = reaction.revisions.get()
    assert (revision.number, revision.made_by, revision.section) == (1, author, "plan")
    assert revision.changes[0]["after"]["title"] == reaction.title


def test_one_addend_serves_every_drawing_of_it(author, campaign, plan):
    other = plan.model_copy(update={"addend": "CCOC(=O)C(*)(*)C(=O)OCC"})
    assert (
        plan_reaction(author, campaign, plan).addend
        == plan_reaction(author, campaign, other).addend
    )
    assert Addend.objects.count() == 1


@pytest.mark.parametrize("who", ["reader", "reviewer", "outsider"])
def test_only_an_author_plans(request, campaign, plan, who):
    with pytest.raises(NotAllowed):
        plan_reaction(request.getfixturevalue(who), campaign, plan)
    assert not Reaction.objects.exists()


def test_a_level_above_the_sites_is_an_error_at_the_field(author, campaign, plan):
    with pytest.raises(FieldErrors) as caught:
        plan_reaction(author, campaign, plan.model_copy(update={"target_level": 31}))
    assert "30" in caught.value.messages["target_level"][0]


def test_a_level_above_the_highest_known_asks_to_be_confirmed(author, campaign, plan):
    high = plan.model_copy(update={"target_level": 20})
    with pytest.raises(NeedsConfirmation) as caught:
        plan_reaction(author, campaign, high)
    assert caught.value.field == "target_level"
    confirmed = high.model_copy(update={"is_level_confirmed": True})
    assert plan_reaction(author, campaign, confirmed).target_level == 20


def test_a_bad_addend_stores_nothing(author, campaign, plan):
    with pytest.raises(FieldErrors) as caught:
        plan_reaction(author, campaign, plan.model_copy(update={"addend": "C(C"}))
    assert list(caught.value.messages) == ["addend"]
    assert not Reaction.objects.exists()


def test_an_unknown_family_is_an_error_at_the_field(author, campaign, plan):
    with pytest.raises(FieldErrors) as caught:
        plan_reaction(author, campaign, plan.model_copy(update={"family_key": "bingle"}))
    assert "bingel" in caught.value.messages["family_key"][0]
