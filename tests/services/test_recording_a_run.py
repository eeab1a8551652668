import pytest
from pydantic import ValidationError

from reactions.errors import FieldErrors
from reactions.models import Revision
from reactions.services.inputs import (
    ConclusionInput,
    ConditionsInput,
    FractionInput,
    IsolationStepInput,
    ObservationInput,
    ReadingInput,
)
from reactions.services.lines import amend_lines, lines_of
from reactions.services.revising import Edit
from reactions.services.run import (
    add_observation,
    add_reading,
    amend_conclusion,
    amend_conditions,
    amend_isolation,
    remove_observation,
    remove_reading,
)

pytestmark = pytest.mark.django_db


def with_actual_masses(reaction, **mass_by_name):
    return [
        line.model_copy(update={"actual_mass_mg": mass_by_name.get(line.name)})
        for line in lines_of(reaction)
    ]


def test_actual_amounts_give_actual_equivalents(reaction, edit):
    amend_lines(edit, with_actual_masses(reaction, C60=102.0, DBU=40.0))
    cage, _, base = reaction.components.all()
    assert cage.actual_mmol == pytest.approx(102.0 * 0.99 / 720.66, rel=1e-4)
    assert base.actual_mmol == pytest.approx(40 / 152.241, rel=1e-4)
    assert reaction.revisions.count() == 2


def test_an_unchanged_list_writes_no_revision(reaction, edit):
    amend_lines(edit, lines_of(reaction))
    assert reaction.revisions.count() == 1


def test_conditions_are_kept_with_what_they_were(reaction, edit):
    amend_conditions(edit, ConditionsInput(solvent="toluene", temperature_c=25, duration_min=90))
    reaction.refresh_from_db()
    assert (reaction.solvent, reaction.temperature_c, reaction.version) == ("toluene", 25, 2)
    changes = {row["field"]: row for row in reaction.revisions.get(number=2).changes}
    assert changes["temperature_c"] == {"field": "temperature_c", "before": None, "after": 25}


def test_a_reading_sets_what_was_found(reaction, edit):
    add_reading(edit, ReadingInput(method="hplc", mole_fraction_by_level={0: 0.4, 1: 0.5, 2: 0.1}))
    reaction.refresh_from_db()
    assert reaction.found_composition == [0.4, 0.5, 0.1]
    assert (reaction.level_reached, reaction.conversion) == (2, pytest.approx(0.6))


def test_the_latest_sample_is_what_was_found(reaction, author):
    edit = Edit(author, reaction.pk)
    for at_min, share in ((60, 0.5), (20, 0.2)):
        add_reading(
            edit,
            ReadingInput(
                method="hplc",
                sampled_at_min=at_min,
                mole_fraction_by_level={0: 1 - share, 1: share},
            ),
        )
    reaction.refresh_from_db()
    assert reaction.found_composition == [0.5, 0.5]


def test_a_reading_taken_out_is_found_no_more(reaction, author):
    edit = Edit(author, reaction.pk)
    row = add_reading(edit, ReadingInput(method="nmr", mole_fraction_by_level={1: 0.5}))
    remove_reading(edit, row.pk)
    reaction.refresh_from_db()
    assert reaction.found_composition is None
    assert "50.0 %" in reaction.revisions.last().changes[0]["before"]


def test_a_reading_above_100_percent_is_refused_before_it_reaches_the_database():
    with pytest.raises(ValidationError, match=r"110\.0 %"):
        ReadingInput(method="hplc", mole_fraction_by_level={0: 0.6, 1: 0.5})


def test_yields_follow_from_fractions(reaction, author):
    edit = Edit(author, reaction.pk)
    amend_lines(edit, with_actual_masses(reaction, C60=100.0))
    amend_isolation(
        edit,
        [
            IsolationStepInput(
                method="column",
                fractions=[
                    FractionInput(name="C60", mass_mg=30.0, level=0),
                    FractionInput(name="mono", mass_mg=48.0, level=1),
                    FractionInput(name="to HPLC", mass_mg=20.0, level=2, is_carried_on=True),
                ],
            )
        ],
    )
    reaction.refresh_from_db()
    # Derived: mono-adduct 878.81 g/mol.
    charged, mono, left = 99 / 720.66, 48 / 878.813, 30 / 720.66
    assert reaction.yield_on_charged == pytest.approx(mono / charged, rel=1e-4)
    assert reaction.yield_on_consumed == pytest.approx(mono / (charged - left), rel=1e-4)
    assert reaction.level_reached == 1


def test_recovered_cage_outside_the_fractions_counts(reaction, author):
    amend_conclusion(
        Edit(author, reaction.pk), ConclusionInput(conclusion="half left", recovered_cage_mg=49.5)
    )
    reaction.refresh_from_db()
    assert reaction.conversion == pytest.approx(0.5, abs=1e-6)


def test_the_time_line_keeps_what_was_taken_out(reaction, author):
    edit = Edit(author, reaction.pk)
    row = add_observation(edit, ObservationInput(at_min=40, kind="sample", text="spot on TLC"))
    remove_observation(edit, row.pk)
    assert not reaction.observations.exists()
    assert Revision.objects.filter(reaction=reaction, section="time_line").count() == 2


def test_equivalents_that_refer_in_a_circle_are_an_error_at_their_line(reaction, edit):
    circle = [
        line.model_copy(update={"equivalents_of": other})
        for line, other in zip(
            lines_of(reaction), ("", "DBU", "diethyl bromomalonate"), strict=True
        )
    ]
    with pytest.raises(FieldErrors) as caught:
        amend_lines(edit, circle)
    assert list(caught.value.messages) == ["lines.1.equivalents_of"]
