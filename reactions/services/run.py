"""What is written down during and after a run: conditions, time line, readings, isolation."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from reactions.chemistry.quantity_text import format_fraction, format_mass, format_volume
from reactions.errors import FieldErrors
from reactions.models import (
    Fraction,
    IsolationStep,
    Observation,
    Reaction,
    Reading,
    ReadingLevel,
    Section,
)
from reactions.services.found import composition_of
from reactions.services.inputs import (
    ConclusionInput,
    ConditionsInput,
    IsolationStepInput,
    ObservationInput,
    ReadingInput,
)
from reactions.services.revising import ChangeList, Edit, revising


def _plain(value: Any) -> Any:
    """Return ``value`` as JSON can hold it."""
    if value is None or isinstance(value, (bool, int, float)):
        return value
    return str(value)


def _set_fields(target: Any, values: dict[str, Any], changes: ChangeList) -> None:
    for name, value in values.items():
        changes.note(name, _plain(getattr(target, name)), _plain(value))
        setattr(target, name, value)


def amend_conditions(edit: Edit, conditions: ConditionsInput) -> None:
    """Put the conditions in place of those stored."""
    with revising(edit, Section.CONDITIONS, "conditions amended") as (reaction, changes):
        _set_fields(reaction, dict(conditions), changes)


def amend_conclusion(edit: Edit, conclusion: ConclusionInput) -> None:
    """Put conclusion, recovered cage and title in place of those stored."""
    with revising(edit, Section.CONCLUSION, "conclusion amended") as (reaction, changes):
        values = {name: value for name, value in dict(conclusion).items() if name != "title"}
        if conclusion.title is not None:
            values["title"] = conclusion.title
        _set_fields(reaction, values, changes)


def add_observation(edit: Edit, observation: ObservationInput) -> Observation:
    """Add a line to the time line."""
    with revising(edit, Section.TIME_LINE, "observation added") as (reaction, changes):
        row = Observation.objects.create(
            reaction=reaction, recorded_by=edit.user, **dict(observation)
        )
        changes.note("time line", None, f"{row.at_min:g} min, {row.kind}: {row.text}")
    return row


def remove_observation(edit: Edit, observation_id: int) -> None:
    """Take a line out of the time line; the revision keeps what it said."""
    with revising(edit, Section.TIME_LINE, "observation removed") as (reaction, changes):
        row = Observation.objects.filter(reaction=reaction, pk=observation_id).first()
        if row is None:
            raise FieldErrors.at("observation", "This observation is already gone.")
        changes.note("time line", f"{row.at_min:g} min, {row.kind}: {row.text}", None)
        row.delete()


def _described(reading: Reading) -> str:
    shares = ", ".join(
        f"x{level} {100 * share:.1f} %" for level, share in enumerate(composition_of(reading))
    )
    when = "" if reading.sampled_at_min is None else f" at {reading.sampled_at_min:g} min"
    return f"{reading.get_method_display()}{when}: {shares}"


def add_reading(edit: Edit, reading: ReadingInput) -> Reading:
    """Add a composition to the readings."""
    with revising(edit, Section.READINGS, "reading added") as (reaction, changes):
        row = Reading.objects.create(
            reaction=reaction,
            recorded_by=edit.user,
            method=reading.method,
            sampled_at_min=reading.sampled_at_min,
            is_higher_lumped=reading.is_higher_lumped,
            note=reading.note,
        )
        for level, share in sorted(reading.mole_fraction_by_level.items()):
            ReadingLevel.objects.create(reading=row, level=level, mole_fraction=share)
        changes.note("reading", None, _described(row))
    return row


def remove_reading(edit: Edit, reading_id: int) -> None:
    """Take a reading out; the revision keeps what it said."""
    with revising(edit, Section.READINGS, "reading removed") as (reaction, changes):
        row = Reading.objects.filter(reaction=reaction, pk=reading_id).first()
        if row is None:
            raise FieldErrors.at("reading", "This reading is already gone.")
        changes.note("reading", _described(row), None)
        row.delete()


def _isolation_in_words(reaction: Reaction) -> list[str]:
    steps = IsolationStep.objects.filter(reaction=reaction).prefetch_related("fractions")
    return [_step_in_words(step) for step in steps]


def _step_in_words(step: IsolationStep) -> str:
    parts = [
        step.get_method_display(),
        step.medium,
        step.solvent,
        "" if step.loading_mg is None else f"{format_mass(step.loading_mg)} loaded",
        "" if step.volume_ml is None else format_volume(step.volume_ml),
        step.note,
        *(_fraction_in_words(fraction) for fraction in step.fractions.all()),
    ]
    return f"{step.position}. " + ", ".join(part for part in parts if part)


def _fraction_in_words(fraction: Fraction) -> str:
    level = "not identified" if fraction.level is None else f"level {fraction.level}"
    words = f"{fraction.name or 'fraction'} {format_mass(fraction.mass_mg)} {level}"
    if fraction.purity < 1:
        words += f" purity {format_fraction(fraction.purity)}"
    return words + (" carried on" if fraction.is_carried_on else "")


def amend_isolation(edit: Edit, steps: Sequence[IsolationStepInput]) -> None:
    """Put these steps and their fractions in place of those stored."""
    with revising(edit, Section.ISOLATION, "isolation amended") as (reaction, changes):
        before = _isolation_in_words(reaction)
        reaction.isolation_steps.all().delete()
        for position, step in enumerate(steps, 1):
            values = dict(step)
            fractions = values.pop("fractions")
            row = IsolationStep.objects.create(reaction=reaction, position=position, **values)
            Fraction.objects.bulk_create(
                Fraction(step=row, position=order, **dict(fraction))
                for order, fraction in enumerate(fractions, 1)
            )
        changes.note("isolation", before, _isolation_in_words(reaction))
