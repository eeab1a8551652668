"""Substructure search by PostgreSQL's RDKit cartridge.

The molecules stand in a table beside the addends, which triggers keep up to date whoever writes;
the table is made after every migration where the extension can be created. The cartridge's RDKit
may be older than Python's: a molecule that it can't load is left out, said so in the log, and found
in process.
"""

from __future__ import annotations

import logging
from dataclasses import dataclass
from typing import Any

from django.core.exceptions import EmptyResultSet
from django.db import (
    DatabaseError,
    OperationalError,
    ProgrammingError,
    connections,
    transaction,
)
from django.db.backends.base.base import BaseDatabaseWrapper
from django.db.models import QuerySet
from psycopg.errors import QueryCanceled, UndefinedFunction, UndefinedTable

from reactions.bounded import StructureTimeoutError
from reactions.chemistry.substructure import QueryOutline
from reactions.models import Addend

SEARCH_SECONDS = 10
_log = logging.getLogger(__name__)

_MAKE = """
CREATE TABLE IF NOT EXISTS reactions_addend_cartridge (
    addend_id bigint PRIMARY KEY,
    mol mol NOT NULL
);
CREATE INDEX IF NOT EXISTS reactions_addend_cartridge_mol
    ON reactions_addend_cartridge USING gist (mol);

CREATE OR REPLACE FUNCTION reactions_addend_to_cartridge() RETURNS trigger LANGUAGE plpgsql AS
$body$
DECLARE
    molecule mol;
BEGIN
    IF TG_OP = 'TRUNCATE' THEN
        DELETE FROM reactions_addend_cartridge;
        RETURN NULL;
    END IF;
    IF TG_OP IN ('UPDATE', 'DELETE') THEN
        DELETE FROM reactions_addend_cartridge WHERE addend_id = OLD.id;
    END IF;
    IF TG_OP IN ('INSERT', 'UPDATE') THEN
        BEGIN
            molecule := mol_from_smiles(NEW.search_smiles::cstring);
        EXCEPTION WHEN OTHERS THEN
            molecule := NULL;  -- an addend is never refused for the search's sake
        END;
        IF molecule IS NOT NULL THEN
            INSERT INTO reactions_addend_cartridge VALUES (NEW.id, molecule);
        END IF;
    END IF;
    RETURN NULL;
END
$body$;

DROP TRIGGER IF EXISTS reactions_addend_row_to_cartridge ON reactions_addend;
CREATE TRIGGER reactions_addend_row_to_cartridge
    AFTER INSERT OR DELETE OR UPDATE OF search_smiles ON reactions_addend
    FOR EACH ROW EXECUTE FUNCTION reactions_addend_to_cartridge();
DROP TRIGGER IF EXISTS reactions_addend_emptied_to_cartridge ON reactions_addend;
CREATE TRIGGER reactions_addend_emptied_to_cartridge
    AFTER TRUNCATE ON reactions_addend
    FOR EACH STATEMENT EXECUTE FUNCTION reactions_addend_to_cartridge();
"""

_FILL = """
INSERT INTO reactions_addend_cartridge
SELECT id, molecule
FROM (
    SELECT id, mol_from_smiles(search_smiles::cstring) AS molecule
    FROM reactions_addend
    WHERE id NOT IN (SELECT addend_id FROM reactions_addend_cartridge)
    OFFSET 0
) AS loaded
WHERE molecule IS NOT NULL
"""

_NOT_LOADED = """
SELECT id FROM reactions_addend
WHERE NOT EXISTS (SELECT 1 FROM reactions_addend_cartridge WHERE addend_id = reactions_addend.id)
"""

# One round trip: the time limit, then what is found, what isn't loaded, and whether the query is
# read at all. Django sends parameters within the text, so that two statements can go together.
_SEARCH = """
SELECT set_config('statement_timeout', %s, true);
SELECT addend_id, 'found' FROM reactions_addend_cartridge
WHERE mol @> qmol_from_smarts(%s::cstring) {among_addend_id}
UNION ALL
SELECT id, 'not loaded' FROM reactions_addend
WHERE NOT EXISTS (SELECT 1 FROM reactions_addend_cartridge WHERE addend_id = reactions_addend.id)
    {among_id}
UNION ALL
SELECT 0, 'query not read' WHERE qmol_from_smarts(%s::cstring) IS NULL
"""


@dataclass(frozen=True)
class Answer:
    """Keys of the addends ``found``, and of those ``not_loaded``, which weren't searched."""

    found: frozenset[int]
    not_loaded: frozenset[int]


def is_installed(connection: BaseDatabaseWrapper) -> bool:
    """Say whether this database has the cartridge's table."""
    if connection.vendor != "postgresql":
        return False
    with connection.cursor() as cursor:
        cursor.execute("SELECT to_regclass('reactions_addend_cartridge') IS NOT NULL")
        return bool(cursor.fetchone()[0])


def install(connection: BaseDatabaseWrapper) -> bool:
    """Create the extension, the table and its triggers, and load what isn't; False if it can't be.

    A database without the extension is no error: the search then runs in process.
    """
    try:
        with transaction.atomic(connection.alias), connection.cursor() as cursor:
            cursor.execute("CREATE EXTENSION IF NOT EXISTS rdkit")
            cursor.execute(_MAKE)
            cursor.execute(_FILL)
    except DatabaseError as error:
        reason = str(error).splitlines()[0]
        _log.info("Structure search runs in process; no RDKit cartridge here: %s", reason)
        return False
    left_out = not_loaded(connection)
    if left_out:
        _log.warning("The RDKit cartridge can't load the addends %s.", sorted(left_out))
    return True


def install_after_migration(*, using: str, **_signal: Any) -> None:
    """Install the cartridge when the table of addends stands (receiver of ``post_migrate``)."""
    connection = connections[using]
    is_postgresql = connection.vendor == "postgresql"
    if is_postgresql and "reactions_addend" in connection.introspection.table_names():
        install(connection)


def not_loaded(connection: BaseDatabaseWrapper) -> set[int]:
    """Return the keys of the addends that the cartridge doesn't hold."""
    with connection.cursor() as cursor:
        cursor.execute(_NOT_LOADED)
        return {key for (key,) in cursor.fetchall()}


def search(outline: QueryOutline, among: QuerySet[Addend] | None = None) -> Answer | None:
    """Return which addends (of those ``among``) the cartridge finds to contain the query.

    None when there is no cartridge or its RDKit can't read the query. Raises
    ``StructureTimeoutError``.
    """
    connection = connections[Addend.objects.db if among is None else among.db]
    if connection.vendor != "postgresql":
        return None
    try:
        rows = _rows(outline, among, connection)
    except EmptyResultSet:
        return Answer(frozenset(), frozenset())
    except ProgrammingError as error:
        if isinstance(error.__cause__, UndefinedTable | UndefinedFunction):
            return None
        raise
    except OperationalError as error:
        if isinstance(error.__cause__, QueryCanceled):
            raise StructureTimeoutError(
                f"The search took longer than {SEARCH_SECONDS} s; look for a larger part."
            ) from error
        raise
    if any(state == "query not read" for _, state in rows):
        return None
    return Answer(
        found=frozenset(key for key, state in rows if state == "found"),
        not_loaded=frozenset(key for key, state in rows if state == "not loaded"),
    )


def _rows(
    outline: QueryOutline, among: QuerySet[Addend] | None, connection: BaseDatabaseWrapper
) -> list[tuple[int, str]]:
    chosen, values = "", ()
    if among is not None:
        chosen, values = among.order_by().values("pk").query.sql_with_params()
    statement = _SEARCH.format(
        among_addend_id=chosen and f"AND addend_id IN ({chosen})",
        among_id=chosen and f"AND id IN ({chosen})",
    )
    limit = str(1000 * SEARCH_SECONDS)
    asked = [limit, outline.smarts, *values, *values, outline.smarts]
    with transaction.atomic(connection.alias), connection.cursor() as cursor:
        cursor.execute(statement, asked)
        cursor.nextset()
        rows = list(cursor.fetchall())
        # Nothing was written: rolling back gives the connection its own time limit again.
        transaction.set_rollback(True, using=connection.alias)
    return rows
