"""Rules across rows that a check constraint can't hold, kept by triggers in the database.

A signed reaction and all that hangs on it take no change; the fractions of a reading never sum to
more than 1; only a completed reaction can be signed; revisions and signatures are never altered.
The triggers are laid anew after every migration, because SQLite drops those of a table that a
migration rebuilds.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from django.db import NotSupportedError, connections
from django.db.backends.base.base import BaseDatabaseWrapper

# Percentages typed to one decimal place may sum to 100.05.
FRACTION_SUM_TOLERANCE = 0.001

_SIGNED = "a signed reaction takes no change"
_PERMANENT = "revisions and signatures are never altered"
_OVERFULL = "the fractions of a reading sum to more than 1"
_DRAFT = "only a completed reaction can be signed"
_REASONS = {_SIGNED: "signed", _PERMANENT: "permanent", _OVERFULL: "overfull", _DRAFT: "draft"}


@dataclass(frozen=True)
class Guard:
    """Refuse ``operation`` on ``table`` with ``message`` when ``condition`` holds.

    ``lock`` is a row that PostgreSQL locks first, so that two writers can't both pass.
    """

    table: str
    operation: str
    condition: str
    message: str
    lock: str = ""

    @property
    def name(self) -> str:
        """Return the name of the trigger."""
        return f"guard_{self.table}_{self.operation.lower()}_{_REASONS[self.message]}"


def _is_signed(reaction_id: str) -> str:
    return (
        f"EXISTS (SELECT 1 FROM reactions_reaction WHERE id = {reaction_id} AND state = 'signed')"
    )


def _parent_reaction(table: str, column: str, row: str) -> str:
    return f"(SELECT reaction_id FROM {table} WHERE id = {row}.{column})"


def _closed_when_signed(table: str, reaction_of: dict[str, str]) -> list[Guard]:
    """Return the guards that keep the rows of ``table`` as they are once signed."""
    rows = {"INSERT": ["NEW"], "UPDATE": ["OLD", "NEW"], "DELETE": ["OLD"]}
    return [
        Guard(
            table,
            operation,
            " OR ".join(_is_signed(reaction_of[row]) for row in affected),
            _SIGNED,
        )
        for operation, affected in rows.items()
    ]


def _guards() -> list[Guard]:
    guards = [
        Guard("reactions_reaction", operation, "OLD.state = 'signed'", _SIGNED)
        for operation in ("UPDATE", "DELETE")
    ]
    for table in ("component", "observation", "reading", "isolationstep"):
        guards += _closed_when_signed(
            f"reactions_{table}", {row: f"{row}.reaction_id" for row in ("OLD", "NEW")}
        )
    for table, parent, column in (
        ("readinglevel", "reading", "reading_id"),
        ("fraction", "isolationstep", "step_id"),
    ):
        guards += _closed_when_signed(
            f"reactions_{table}",
            {row: _parent_reaction(f"reactions_{parent}", column, row) for row in ("OLD", "NEW")},
        )
    for operation, others in (("INSERT", ""), ("UPDATE", " AND id <> OLD.id")):
        guards.append(
            Guard(
                "reactions_readinglevel",
                operation,
                "(SELECT COALESCE(SUM(mole_fraction), 0) FROM reactions_readinglevel"
                f" WHERE reading_id = NEW.reading_id{others}) + NEW.mole_fraction"
                f" > {1 + FRACTION_SUM_TOLERANCE}",
                _OVERFULL,
                lock="SELECT 1 FROM reactions_reading WHERE id = NEW.reading_id FOR UPDATE",
            )
        )
    guards.append(
        Guard(
            "reactions_signature",
            "INSERT",
            "NOT EXISTS (SELECT 1 FROM reactions_reaction WHERE id = NEW.reaction_id"
            " AND state IN ('completed', 'signed'))",
            _DRAFT,
        )
    )
    guards += [
        Guard(f"reactions_{table}", operation, "1 = 1", _PERMANENT)
        for table in ("revision", "signature")
        for operation in ("UPDATE", "DELETE")
    ]
    return guards


def _sqlite(guard: Guard) -> list[str]:
    return [
        f"CREATE TRIGGER {guard.name} BEFORE {guard.operation} ON {guard.table} FOR EACH ROW"
        f" WHEN {guard.condition} BEGIN SELECT RAISE(ABORT, '{guard.message}'); END"
    ]


def _postgresql(guard: Guard) -> list[str]:
    lock = f"PERFORM {guard.lock.removeprefix('SELECT ')};" if guard.lock else ""
    row = "OLD" if guard.operation == "DELETE" else "NEW"
    return [
        f"CREATE OR REPLACE FUNCTION {guard.name}() RETURNS trigger LANGUAGE plpgsql AS $guard$"
        f" BEGIN {lock} IF {guard.condition} THEN RAISE EXCEPTION '{guard.message}'"
        f" USING ERRCODE = 'integrity_constraint_violation'; END IF; RETURN {row}; END $guard$",
        f"CREATE TRIGGER {guard.name} BEFORE {guard.operation} ON {guard.table}"
        f" FOR EACH ROW EXECUTE FUNCTION {guard.name}()",
    ]


def _drop(guard: Guard, vendor: str) -> str:
    on_table = f" ON {guard.table}" if vendor == "postgresql" else ""
    return f"DROP TRIGGER IF EXISTS {guard.name}{on_table}"


_DIALECTS = {"sqlite": _sqlite, "postgresql": _postgresql}


def install_guards(connection: BaseDatabaseWrapper) -> None:
    """Lay all triggers anew; raises ``NotSupportedError`` on a database that is neither kind."""
    if connection.vendor not in _DIALECTS:
        raise NotSupportedError(
            f"The reactions app keeps its record on SQLite or PostgreSQL, not {connection.vendor}."
        )
    with connection.cursor() as cursor:
        for guard in _guards():
            cursor.execute(_drop(guard, connection.vendor))
            for statement in _DIALECTS[connection.vendor](guard):
                cursor.execute(statement)


def remove_guards(connection: BaseDatabaseWrapper) -> None:
    """Take the triggers away, as a test must before it empties the tables."""
    with connection.cursor() as cursor:
        for guard in _guards():
            cursor.execute(_drop(guard, connection.vendor))


def install_after_migration(*, using: str, **_signal: Any) -> None:
    """Lay the triggers when the tables stand (receiver of ``post_migrate``)."""
    connection = connections[using]
    if "reactions_signature" in connection.introspection.table_names():
        install_guards(connection)
