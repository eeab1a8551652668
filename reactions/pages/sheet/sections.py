"""How a section of the sheet is posted: each is a form of its own with the version it was seen at.

A section that can't be stored comes back with everything typed still in its fields: errors at the
field, or, where somebody else changed the same section meanwhile, what they changed beside it and
a save that then overrides knowingly.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any, Protocol

from django.http import QueryDict

from reactions.errors import FieldErrors
from reactions.pages.sheet.changes import DescribedChange, describe_change
from reactions.pages.sheet.record import Record
from reactions.services.errors import EditConflict
from reactions.services.revising import Edit


class SectionForm(Protocol):
    """What a section needs of its form."""

    def is_valid(self) -> bool:
        """Return whether everything typed can be understood."""

    def place_errors(self, error: FieldErrors) -> None:
        """Put what a service objected to at the fields."""


@dataclass(frozen=True)
class SectionKind:
    """A section: its name in addresses and ids, its title, and how its form is made and stored.

    ``form`` makes the form of a record, bound when data are given. ``reshapes`` says whether
    posted data ask for another row or one fewer, which changes the form and stores nothing.
    """

    name: str
    title: str
    form: Callable[[Record, QueryDict | None], Any]
    store: Callable[[Edit, Any], object]
    only_adds: bool = False
    reshapes: Callable[[QueryDict], bool] = field(default=lambda data: False)


@dataclass
class ShownSection:
    """A section as it goes to the page.

    ``seen_version`` is what the next save will claim to have seen. ``others`` are the changes that
    somebody else made meanwhile; ``problem`` says why nothing was stored; ``note`` what was.
    """

    kind: SectionKind
    form: Any
    seen_version: int
    problem: str = ""
    others: list[DescribedChange] = field(default_factory=list)
    note: str = ""

    @property
    def has_conflict(self) -> bool:
        """Return whether somebody else changed the section meanwhile."""
        return bool(self.others)

    def take_conflict(self, conflict: EditConflict) -> None:
        """Show what others changed, and let the next save override it knowingly."""
        self.problem = str(conflict)
        self.others = [describe_change(change) for change in conflict.changes]
        self.seen_version = conflict.version


def fresh(kind: SectionKind, record: Record, note: str = "") -> ShownSection:
    """Return a section as stored."""
    return ShownSection(kind, kind.form(record, None), record.reaction.version, note=note)


def bound(kind: SectionKind, record: Record, data: QueryDict) -> ShownSection:
    """Return a section as typed."""
    return ShownSection(kind, kind.form(record, data), seen_version_in(data))


def seen_version_in(data: QueryDict) -> int:
    """Return the version that the person had before their eyes; 0, the oldest, if it is missing."""
    text = data.get("seen_version", "")
    return int(text) if text.isascii() and text.isdigit() and len(text) < 10 else 0
