"""Turning a plan into a planned reaction."""

from __future__ import annotations

from django.contrib.auth.models import User
from django.db import transaction
from django.db.models import Max

from reactions.chemistry.families import Family, UnknownFamilyError, question_level
from reactions.errors import FieldErrors
from reactions.models import (
    Campaign,
    Component,
    Reaction,
    Revision,
    Role,
    Section,
    known_family,
)
from reactions.services.addends import store_addend
from reactions.services.errors import NeedsConfirmation
from reactions.services.inputs import PlanInput
from reactions.services.lines import cage_mass, work_out_lines
from reactions.services.revising import require_role


@transaction.atomic
def plan_reaction(user: User, campaign: Campaign, plan: PlanInput) -> Reaction:
    """Store a planned reaction with its weighing list worked out, and its first revision.

    Raises ``NotAllowed``, ``FieldErrors``, or ``NeedsConfirmation`` for a level above the highest
    known of the family.
    """
    require_role(user, campaign, Role.AUTHOR)
    family = family_of(plan.family_key)
    cage_mass(plan.cage)
    check_level(family, plan)
    worked_out = work_out_lines(plan.cage, plan.lines)
    addend = store_addend(plan.addend, plan.addend_name) if plan.addend else None
    reaction = Reaction(
        campaign=campaign,
        number=next_number(campaign),
        title=plan.title,
        family_key=plan.family_key,
        cage=plan.cage,
        addend=addend,
        objective=plan.objective,
        composition_model=plan.composition_model and plan.composition_model.model_dump(),
        target_level=plan.target_level,
        predicted_composition=plan.predicted_composition,
        created_by=user,
        is_invented=campaign.is_invented,
        **dict(plan.conditions),
    )
    reaction.save()
    _store_lines(reaction, worked_out.components)
    Revision.objects.create(
        reaction=reaction,
        number=reaction.version,
        section=Section.PLAN,
        action="planned",
        changes=[{"field": "reaction", "before": None, "after": plan.model_dump(mode="json")}],
        made_by=user,
    )
    return reaction


def family_of(key: str) -> Family:
    """Return the family of this key; raises ``FieldErrors`` at ``family_key``."""
    try:
        return known_family(key)
    except UnknownFamilyError as error:
        raise FieldErrors.at("family_key", str(error)) from error


def check_level(family: Family, plan: PlanInput) -> None:
    """Raise when the target level is impossible, or unusual and not confirmed."""
    if plan.target_level is None:
        return
    question = question_level(family, plan.cage, plan.target_level)
    if question is None:
        return
    if question.severity == "error":
        raise FieldErrors.at("target_level", question.reason)
    if not plan.is_level_confirmed:
        raise NeedsConfirmation("target_level", question.reason)


def next_number(campaign: Campaign) -> int:
    """Return the next running number; holds the campaign until the transaction ends."""
    Campaign.objects.select_for_update().get(pk=campaign.pk)
    highest = campaign.reactions.aggregate(highest=Max("number"))["highest"]
    return (highest or 0) + 1


def _store_lines(reaction: Reaction, components: list[Component]) -> None:
    for component in components:
        component.reaction = reaction
    Component.objects.bulk_create(components)
