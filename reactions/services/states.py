"""Moving a reaction through its states, and standing by it."""

from __future__ import annotations

import hashlib
import json

from django.core.serializers.json import DjangoJSONEncoder
from django.db import transaction
from django.forms.models import model_to_dict
from django.utils import timezone

from reactions.models import (
    Fraction,
    Reaction,
    ReadingLevel,
    Revision,
    Role,
    Section,
    Signature,
    State,
)
from reactions.services.errors import RecordClosed
from reactions.services.revising import Edit, require_role, revising

# Where each state may go; signing has its own function.
_MOVES = {
    (State.PLANNED, State.RUNNING): "started",
    (State.RUNNING, State.COMPLETED): "completed",
    (State.RUNNING, State.PLANNED): "taken back to planned",
    (State.COMPLETED, State.RUNNING): "reopened",
}


def move(edit: Edit, state: State) -> None:
    """Move a reaction to ``state``; raises ``RecordClosed`` when it can't go there from here."""
    with revising(edit, Section.STATE, f"moved to {state.label}") as (reaction, changes):
        before = State(reaction.state)
        if before == state:
            return
        if (before, state) not in _MOVES:
            raise RecordClosed(
                f"{reaction.label} is {before.label}; it can't go to {state.label} from there."
            )
        changes.note("state", before.value, state.value)
        reaction.state = state
        now = timezone.now()
        reaction.completed_at = now if state == State.COMPLETED else None
        if state == State.RUNNING and reaction.performed_on is None:
            reaction.performed_on = timezone.localdate(now)


def sign(edit: Edit) -> Signature:
    """Sign a completed reaction as its author; from then on it takes no change."""
    with revising(edit, Section.STATE, "signed") as (reaction, changes):
        if reaction.state != State.COMPLETED:
            raise RecordClosed(
                f"{reaction.label} is {reaction.get_state_display()}; complete it before you sign."
            )
        signature = Signature.objects.create(
            reaction=reaction,
            signed_by=edit.user,
            role=Role.AUTHOR,
            digest=digest_of(reaction),
        )
        changes.note("state", State.COMPLETED.value, State.SIGNED.value)
        reaction.state = State.SIGNED
        reaction.signed_at = signature.signed_at
    return signature


@transaction.atomic
def countersign(edit: Edit) -> Signature:
    """Countersign a signed reaction as a reviewer who did not sign it."""
    reaction = Reaction.objects.select_for_update(of=("self",)).get(pk=edit.reaction_id)
    require_role(edit.user, reaction.campaign, Role.REVIEWER)
    if reaction.state != State.SIGNED:
        raise RecordClosed(f"{reaction.label} is not signed yet; its author signs first.")
    if reaction.signatures.filter(signed_by=edit.user).exists():
        raise RecordClosed("You have signed this reaction already.")
    signature = Signature.objects.create(
        reaction=reaction, signed_by=edit.user, role=Role.REVIEWER, digest=digest_of(reaction)
    )
    last = reaction.revisions.order_by("number").last()
    Revision.objects.create(
        reaction=reaction,
        number=(last.number if last else reaction.version) + 1,
        section=Section.STATE,
        action="countersigned",
        changes=[{"field": "signature", "before": None, "after": str(edit.user)}],
        made_by=edit.user,
    )
    return signature


def digest_of(reaction: Reaction) -> str:
    """Return the SHA-256 of what the record says, apart from its state and signatures."""
    own = model_to_dict(reaction)
    for column in ("state", "signed_at", "version"):
        own.pop(column, None)
    content = {
        "reaction": own,
        "addend": reaction.addend.smiles if reaction.addend else None,
        "components": list(reaction.components.order_by("position").values()),
        "observations": list(reaction.observations.order_by("id").values()),
        "readings": list(reaction.readings.order_by("id").values()),
        "levels": list(
            ReadingLevel.objects.filter(reading__reaction=reaction).order_by("id").values()
        ),
        "isolation": list(reaction.isolation_steps.order_by("position").values()),
        "fractions": list(Fraction.objects.filter(step__reaction=reaction).order_by("id").values()),
    }
    text = json.dumps(content, sort_keys=True, cls=DjangoJSONEncoder)
    return hashlib.sha256(text.encode()).hexdigest()
