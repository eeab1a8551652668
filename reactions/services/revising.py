"""Changing one reaction: lock it, check, change, compute what was found, write the revision.

Every service that changes a reaction goes through ``revising``, so that no change is without its
revision and none slips past a signature or over a colleague's edit.
"""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from typing import Any

from django.contrib.auth.models import User
from django.db import transaction

from reactions.models import Campaign, Reaction, Revision, Role, Section, State
from reactions.services.errors import EditConflict, NotAllowed, RecordClosed
from reactions.services.found import refresh_found

# The sections that composition, conversion and yields are computed from.
_FOUND_FOLLOWS_FROM = {
    Section.LINES,
    Section.READINGS,
    Section.ISOLATION,
    Section.CONCLUSION,
}


@dataclass(frozen=True)
class Edit:
    """Which reaction, who changes it, and the version they had before their eyes.

    ``seen_version`` None means that the change only adds and can't run over anyone's.
    """

    user: User
    reaction_id: int
    seen_version: int | None = None


@dataclass
class ChangeList:
    """The changes of one revision, in the words of the sheet."""

    rows: list[dict[str, Any]] = field(default_factory=list)

    def note(self, name: str, before: Any, after: Any) -> None:
        """Note a change of ``name``; nothing when both sides are equal."""
        if before != after:
            self.rows.append({"field": name, "before": before, "after": after})


def require_role(user: User, campaign: Campaign, *roles: Role) -> Role:
    """Return the role of ``user`` in ``campaign``; raises ``NotAllowed`` for any but ``roles``."""
    role = campaign.role_of(user)
    if role is None:
        raise NotAllowed("You are not a member of this campaign; ask one of its authors.")
    if role not in roles:
        names = " or ".join(wanted.value for wanted in roles)
        raise NotAllowed(f"You are {role.value} in this campaign; this takes a {names}.")
    return role


@contextmanager
def revising(edit: Edit, section: Section, action: str) -> Iterator[tuple[Reaction, ChangeList]]:
    """Yield the locked reaction and the list to note changes in; then store the revision.

    One transaction. Raises ``NotAllowed``, ``RecordClosed`` or ``EditConflict``. Without any noted
    change nothing is written.
    """
    with transaction.atomic():
        reaction = (
            Reaction.objects.select_for_update(of=("self",))
            .select_related("campaign", "addend")
            .get(pk=edit.reaction_id)
        )
        require_role(edit.user, reaction.campaign, Role.AUTHOR)
        if reaction.state == State.SIGNED:
            raise RecordClosed(f"{reaction.label} is signed and takes no change.")
        _refuse_to_run_over(edit, reaction, None if section == Section.STATE else section)
        changes = ChangeList()
        yield reaction, changes
        if not changes.rows:
            return
        reaction.version += 1
        if section in _FOUND_FOLLOWS_FROM:
            refresh_found(reaction)
        reaction.save()
        Revision.objects.create(
            reaction=reaction,
            number=reaction.version,
            section=section,
            action=action,
            changes=changes.rows,
            made_by=edit.user,
        )


def _refuse_to_run_over(edit: Edit, reaction: Reaction, section: Section | None) -> None:
    """Raise ``EditConflict`` when others changed the same section since ``edit.seen_version``.

    Without a section any change counts: whoever moves or signs a record stands by all of it.
    """
    if edit.seen_version is None or edit.seen_version >= reaction.version:
        return
    newer = reaction.revisions.filter(number__gt=edit.seen_version)
    if section is not None:
        newer = newer.filter(section=section)
    meanwhile = list(newer.select_related("made_by"))
    if meanwhile:
        what = "this section" if section else "this record"
        raise EditConflict(meanwhile, reaction.version, what)
