"""No door can store what the rules forbid: every case writes past the services, with raw rows."""

import pytest
from django.db import IntegrityError, connection, transaction
from django.utils import timezone

from reactions.models import (
    Component,
    Fraction,
    IsolationStep,
    Observation,
    Reaction,
    Reading,
    ReadingLevel,
    Revision,
    Signature,
    State,
)

pytestmark = pytest.mark.django_db


def refused(write):
    with pytest.raises(IntegrityError), transaction.atomic():
        write()


@pytest.fixture
def signed(completed):
    step = IsolationStep.objects.create(reaction=completed, position=1, method="column")
    Fraction.objects.create(step=step, position=1, mass_mg=3)
    Component.objects.create(reaction=completed, position=9, role="base", name="DBU")
    Observation.objects.create(
        reaction=completed, at_min=5, text="dark brown", recorded_by=completed.created_by
    )
    reading = Reading.objects.create(
        reaction=completed, method="hplc", recorded_by=completed.created_by
    )
    ReadingLevel.objects.create(reading=reading, level=1, mole_fraction=0.4)
    Reaction.objects.filter(pk=completed.pk).update(state=State.SIGNED, signed_at=timezone.now())
    completed.refresh_from_db()
    return completed


@pytest.mark.parametrize(
    ("field", "value"),
    [
        ("planned_mass_mg", -1),
        ("actual_mass_mg", -0.001),
        ("actual_volume_ml", -1),
        ("purity", 1.2),
        ("purity", 0),
        ("planned_mass_mg", 1e12),
        ("planned_mass_mg", float("inf")),
        ("equivalents", -2),
    ],
)
def test_a_line_with_an_impossible_amount_is_refused(planned, field, value):
    values = {"reaction": planned, "position": 9, "role": "base", "name": "DBU", field: value}
    refused(lambda: Component.objects.create(**values))
    line = Component.objects.create(reaction=planned, position=9, role="base", name="DBU")
    refused(lambda: Component.objects.filter(pk=line.pk).update(**{field: value}))


def test_a_second_cage_is_refused(planned):
    refused(
        lambda: Component.objects.bulk_create(
            Component(reaction=planned, position=at, role="cage", name="C60") for at in (8, 9)
        )
    )


@pytest.mark.parametrize("share", [-0.01, 1.01])
def test_a_fraction_outside_0_to_1_is_refused(planned, share):
    reading = Reading.objects.create(
        reaction=planned, method="hplc", recorded_by=planned.created_by
    )
    refused(lambda: ReadingLevel.objects.create(reading=reading, level=1, mole_fraction=share))


def test_a_reading_whose_fractions_exceed_1_is_refused_by_every_kind_of_write(planned):
    reading = Reading.objects.create(
        reaction=planned, method="hplc", recorded_by=planned.created_by
    )
    first = ReadingLevel.objects.create(reading=reading, level=0, mole_fraction=0.6)
    second = ReadingLevel(reading=reading, level=1, mole_fraction=0.5)
    refused(second.save)
    refused(lambda: ReadingLevel.objects.bulk_create([second]))
    second.mole_fraction = 0.4
    second.save()
    refused(lambda: ReadingLevel.objects.filter(pk=first.pk).update(mole_fraction=0.7))
    refused(lambda: _run("UPDATE reactions_readinglevel SET mole_fraction = 0.9 WHERE level = 1"))


def _run(statement):
    with connection.cursor() as cursor:
        cursor.execute(statement)


@pytest.mark.parametrize("state", [State.PLANNED, State.RUNNING])
def test_a_sign_off_of_a_draft_is_refused(planned, state):
    Reaction.objects.filter(pk=planned.pk).update(state=state)
    refused(
        lambda: Signature.objects.create(
            reaction=planned, signed_by=planned.created_by, role="author", digest="0" * 64
        )
    )
    refused(
        lambda: Reaction.objects.filter(pk=planned.pk).update(
            state=State.SIGNED, signed_at=timezone.now()
        )
    )
    refused(lambda: Reaction.objects.filter(pk=planned.pk).update(signed_at=timezone.now()))


def test_an_unknown_state_is_refused(planned):
    refused(lambda: Reaction.objects.filter(pk=planned.pk).update(state="abandoned"))


def test_a_signed_reaction_takes_no_change(signed):
    refused(lambda: Reaction.objects.filter(pk=signed.pk).update(title="another"))
    refused(lambda: Reaction.objects.filter(pk=signed.pk).update(state="completed", signed_at=None))
    refused(lambda: _run(f"DELETE FROM reactions_reaction WHERE id = {signed.pk}"))


@pytest.mark.parametrize("kind", [Component, Observation, Reading, IsolationStep])
def test_nothing_that_hangs_on_a_signed_reaction_changes(signed, planned, kind):
    row = kind.objects.filter(reaction=signed).first()
    column = {Component: "name", Observation: "text", Reading: "note", IsolationStep: "note"}[kind]
    refused(lambda: kind.objects.filter(pk=row.pk).update(**{column: "changed"}))
    refused(lambda: kind.objects.filter(pk=row.pk).update(reaction=planned))
    refused(lambda: _run(f"DELETE FROM {kind._meta.db_table} WHERE id = {row.pk}"))
    row.pk, row._state.adding = None, True
    row.position = 50
    refused(row.save)


def test_no_fraction_or_level_of_a_signed_reaction_changes(signed):
    for kind in (Fraction, ReadingLevel):
        row = kind.objects.first()
        refused(lambda row=row: type(row).objects.filter(pk=row.pk).delete())
        column = "mass_mg" if kind is Fraction else "mole_fraction"
        refused(
            lambda row=row, column=column: type(row).objects.filter(pk=row.pk).update(**{column: 0})
        )
    refused(
        lambda: Fraction.objects.create(step=IsolationStep.objects.get(), position=2, mass_mg=1)
    )


def test_revisions_and_signatures_are_permanent(signed):
    Revision.objects.create(
        reaction=signed, number=2, section="state", action="signed", made_by=signed.created_by
    )
    signature = Signature.objects.create(
        reaction=signed, signed_by=signed.created_by, role="author", digest="0" * 64
    )
    refused(lambda: Revision.objects.update(action="nothing happened"))
    refused(lambda: _run("DELETE FROM reactions_revision"))
    refused(lambda: Signature.objects.filter(pk=signature.pk).update(digest="1" * 64))
    refused(lambda: _run("DELETE FROM reactions_signature"))


def test_two_reactions_never_share_a_number(planned):
    refused(
        lambda: Reaction.objects.create(
            campaign=planned.campaign,
            number=planned.number,
            title="a second",
            family_key="bingel",
            created_by=planned.created_by,
        )
    )
