"""What can stand in the way of a change, over and above a bad field."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from reactions.models import Revision


class NotAllowed(PermissionError):
    """The person may not do this in this campaign; the message says what role may."""


class RecordClosed(ValueError):
    """The record's state does not allow the change; the message says why and what would."""


class NeedsConfirmation(ValueError):
    """Unusual but possible: the same call with the confirmation given goes through."""

    def __init__(self, field: str, reason: str) -> None:
        self.field = field
        self.reason = reason
        super().__init__(reason)


class EditConflict(ValueError):
    """Somebody else changed the same section, or the record to be signed, since it was opened.

    ``revisions`` are the changes made meanwhile, oldest first; nothing was stored.
    """

    def __init__(
        self, revisions: Sequence[Revision], version: int, what: str = "this section"
    ) -> None:
        self.revisions = list(revisions)
        self.version = version
        names = ", ".join(dict.fromkeys(str(revision.made_by) for revision in self.revisions))
        super().__init__(
            f"{names} changed {what} since you opened it. Nothing of yours is stored yet: compare "
            "below, then save again if you still mean it."
        )

    @property
    def changes(self) -> list[dict[str, Any]]:
        """Return every change made meanwhile, with who made it."""
        return [
            {**change, "made_by": str(revision.made_by)}
            for revision in self.revisions
            for change in revision.changes
        ]
