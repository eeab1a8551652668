"""Turning stored records into what the API answers."""

from __future__ import annotations

from django.contrib.auth.models import AbstractBaseUser

from reactions.api.outputs import (
    AddendOutput,
    CampaignOutput,
    IsolationStepOutput,
    LineOutput,
    MassBalanceOutput,
    ObservationOutput,
    ReactionOutput,
    ReactionSummary,
    ReadingOutput,
    RevisionOutput,
    SignatureOutput,
)
from reactions.models import Addend, Campaign, Reaction
from reactions.services.found import balance_of
from reactions.services.states import digest_of

_OWN = tuple(
    name
    for name in ReactionSummary.model_fields
    if name not in {"campaign", "addend", "created_by", "label"}
)
_WHOLE = ("objective", "composition_model", "recovered_cage_mg", "conclusion", "completed_at")


def show_addend(addend: Addend) -> AddendOutput:
    """Return an addend."""
    return AddendOutput.model_validate(addend)


def show_campaign(campaign: Campaign, user: AbstractBaseUser) -> CampaignOutput:
    """Return a campaign with its members and the role of ``user``."""
    roles = {
        membership.user.get_username(): membership.role
        for membership in campaign.memberships.select_related("user")
    }
    return CampaignOutput(
        code=campaign.code,
        name=campaign.name,
        purpose=campaign.purpose,
        is_invented=campaign.is_invented,
        role=roles.get(user.get_username(), ""),
        members=roles,
    )


def _summary(reaction: Reaction) -> dict[str, object]:
    return {
        **{name: getattr(reaction, name) for name in _OWN},
        "label": reaction.label,
        "campaign": reaction.campaign.code,
        "addend": show_addend(reaction.addend) if reaction.addend else None,
        "created_by": reaction.created_by.get_username(),
    }


def show_summary(reaction: Reaction) -> ReactionSummary:
    """Return a reaction as a list shows it; wants campaign, addend and author fetched with it."""
    return ReactionSummary.model_validate(_summary(reaction))


def show_reaction(reaction: Reaction) -> ReactionOutput:
    """Return everything that a record holds."""
    balance = balance_of(reaction)
    return ReactionOutput.model_validate(
        {
            **_summary(reaction),
            **{name: getattr(reaction, name) for name in _WHOLE},
            "signed_at": reaction.signed_at,
            "lines": [LineOutput.model_validate(row) for row in reaction.components.all()],
            "observations": _observations(reaction),
            "readings": _readings(reaction),
            "isolation": _isolation(reaction),
            "mass_balance": balance and MassBalanceOutput.model_validate(balance),
            "signatures": _signatures(reaction),
            "revisions": _revisions(reaction),
        }
    )


def _observations(reaction: Reaction) -> list[ObservationOutput]:
    return [
        ObservationOutput(
            id=row.pk,
            at_min=row.at_min,
            kind=row.kind,
            text=row.text,
            recorded_by=row.recorded_by.get_username(),
            recorded_at=row.recorded_at,
        )
        for row in reaction.observations.select_related("recorded_by")
    ]


def _readings(reaction: Reaction) -> list[ReadingOutput]:
    return [
        ReadingOutput(
            id=row.pk,
            method=row.method,
            sampled_at_min=row.sampled_at_min,
            is_higher_lumped=row.is_higher_lumped,
            mole_fraction_by_level={level.level: level.mole_fraction for level in row.levels.all()},
            note=row.note,
            recorded_by=row.recorded_by.get_username(),
            recorded_at=row.recorded_at,
        )
        for row in reaction.readings.select_related("recorded_by").prefetch_related("levels")
    ]


def _isolation(reaction: Reaction) -> list[IsolationStepOutput]:
    return [
        IsolationStepOutput.model_validate(
            {
                **{
                    name: getattr(step, name)
                    for name in IsolationStepOutput.model_fields
                    if name != "fractions"
                },
                "fractions": list(step.fractions.all()),
            }
        )
        for step in reaction.isolation_steps.prefetch_related("fractions")
    ]


def _signatures(reaction: Reaction) -> list[SignatureOutput]:
    signatures = list(reaction.signatures.select_related("signed_by"))
    digest = digest_of(reaction) if signatures else ""
    return [
        SignatureOutput(
            signed_by=row.signed_by.get_username(),
            role=row.role,
            signed_at=row.signed_at,
            digest=row.digest,
            is_true_today=row.digest == digest,
        )
        for row in signatures
    ]


def _revisions(reaction: Reaction) -> list[RevisionOutput]:
    return [
        RevisionOutput(
            number=row.number,
            section=row.section,
            action=row.action,
            changes=row.changes,
            made_by=row.made_by.get_username(),
            made_at=row.made_at,
        )
        for row in reaction.revisions.select_related("made_by")
    ]
