"""What the cartridge does where there is one, and that its absence harms nothing."""

from __future__ import annotations

import logging
from dataclasses import replace

import pytest
from django.db import connection

from reactions.bounded import StructureTimeoutError
from reactions.chemistry.substructure import outline_query
from reactions.models import Addend
from reactions.search import cartridge
from reactions.search.structures import addends_containing

pytestmark = pytest.mark.django_db
ON_POSTGRESQL = connection.vendor == "postgresql"


def stored(smiles, search_smiles):
    return Addend.objects.create(
        smiles=smiles,
        search_smiles=search_smiles,
        attachment_points=1,
        formula="",
        mass_g_per_mol=1.0,
    )


def test_without_the_extension_the_search_runs_in_process_and_the_log_says_so(caplog):
    with caplog.at_level(logging.INFO, logger="reactions.search.cartridge"):
        installed = cartridge.install(connection)
    assert installed == ON_POSTGRESQL
    assert ("runs in process" in caplog.text) == (not ON_POSTGRESQL)


def test_an_addend_that_the_cartridge_cannot_load_is_stored_found_and_reported(caplog):
    # Hexavalent carbon stands for whatever a newer RDKit reads and an older one refuses (invented).
    good = stored("*C#N", "*C(*)(*)C#N")
    broken = stored("*X", "*C(*)(*)C(C)(C)(C)(C)C#N")
    if ON_POSTGRESQL:
        assert cartridge.not_loaded(connection) == {broken.pk}
        with caplog.at_level(logging.WARNING, logger="reactions.search.cartridge"):
            assert cartridge.install(connection)
        assert str(broken.pk) in caplog.text
        broken.search_smiles = "*C(*)(*)CC#N"
        broken.save()
        assert cartridge.not_loaded(connection) == set()
    else:
        broken.search_smiles = "*C(*)(*)CC#N"
        broken.save()
    assert addends_containing("CC#N") == {good.pk, broken.pk}


def test_addends_stored_before_the_cartridge_are_loaded_by_the_next_migration():
    row = stored("*CC#N", "*C(*)(*)CC#N")
    if ON_POSTGRESQL:
        with connection.cursor() as cursor:
            cursor.execute("DELETE FROM reactions_addend_cartridge")
        assert addends_containing("CC#N") == {row.pk}  # found in process meanwhile
        cartridge.install_after_migration(using="default")
        assert cartridge.not_loaded(connection) == set()
    assert addends_containing("CC#N") == {row.pk}


def test_the_time_limit_is_the_search_s_own():
    stored("*CC#N", "*C(*)(*)CC#N")
    with connection.cursor() as cursor:
        if ON_POSTGRESQL:
            cursor.execute("SHOW statement_timeout")
            before = cursor.fetchone()
        assert addends_containing("CC#N")
        if ON_POSTGRESQL:
            cursor.execute("SHOW statement_timeout")
            assert cursor.fetchone() == before


def test_a_search_in_the_database_that_takes_too_long_is_cut_off(monkeypatch):
    if not ON_POSTGRESQL:
        assert not cartridge.is_installed(connection)
        return
    slow = cartridge._SEARCH.replace("mol @>", "pg_sleep(60) IS NULL AND mol @>")
    monkeypatch.setattr(cartridge, "_SEARCH", slow)
    monkeypatch.setattr(cartridge, "SEARCH_SECONDS", 1)
    row = stored("*CC#N", "*C(*)(*)CC#N")
    with pytest.raises(StructureTimeoutError, match="longer than 1 s"):
        cartridge.search(outline_query("CC#N"))
    assert Addend.objects.get() == row  # the transaction is still good


def test_without_the_table_the_search_runs_in_process():
    row = stored("*CC#N", "*C(*)(*)CC#N")
    if ON_POSTGRESQL:
        with connection.cursor() as cursor:
            cursor.execute("DROP TABLE reactions_addend_cartridge")
    assert cartridge.search(outline_query("CC#N")) is None
    assert addends_containing("CC#N") == {row.pk}


def test_a_query_that_only_a_newer_cartridge_reads_runs_in_process():
    row = stored("*CC#N", "*C(*)(*)CC#N")
    unread = replace(outline_query("CC#N"), smarts="[CX")
    assert cartridge.search(unread) is None
    assert addends_containing("CC#N") == {row.pk}
