"""The two ways of searching find the same addends, whatever the database."""

from __future__ import annotations

import pytest
import rdkit
from django.db import connection

from reactions.bounded import StructureTimeoutError
from reactions.chemistry.addends import read_addend, usual_addends
from reactions.chemistry.structures import StructureError
from reactions.chemistry.substructure import compile_query, fingerprint, match, outline_query
from reactions.models import Addend
from reactions.search import cartridge, in_process
from reactions.search.structures import addends_containing

pytestmark = pytest.mark.django_db

# Beside the usual addends: charges, geometry, heteroaromatic rings, rarer elements (invented).
MORE = [
    "*C[N+](C)(C)C*.[I-]",
    "*C/C=C/C",
    "*C/C=C\\C",
    "*[C@H](C)O",
    "*[2H]",
    "*N=[N+]=[N-]",
    "*c1ccncc1",
    "*C(*)c1c[nH]c2ccccc12",
    "*C(*)(C#N)C#N",
    "*C(*)(P(=O)(OCC)OCC)P(=O)(OCC)OCC",
    "*CN(CCOCCOCCO)C*",
    "*S(=O)(=O)c1ccccc1",
    "*[Si](C)(C)C",
    "*[c-]1cccc1.[cH-]1cccc1.[Fe+2]",
    "*C(*)(C(=O)OCCCCCCCC)C(=O)OCCCCCCCC",
    "*C1C=CC(*)O1",
]
QUERIES = [
    *("C1CC1", "C1CNCC1", "c1ccccc1", "C=O", "CC(=O)OC", "CC#N", "*C*", "P[Pt]", "CC=CC", "C"),
    *("CN1CCCC1", "c1ccncc1", "[nH]1cccc1", "FC(F)F", "O[Os]", "C.N", "*[H]", "C1OC1", "C=CC=C"),
    *("[CX4]", "[!#6]", "[R2]", "[#6]~[#7,#8]", "[$(C=O)]", "[C;!$(C=O)]", "c:c", "C=,:C", "[#1]"),
    *("[N+]", "C-[!#6]", "[D3]", "[r3]", "[r5]", "a1aaaaa1", "A@A@A", "O~O", "[F,Cl,Br]", "[2H]"),
    *("[CH2]O", "[OX2H]", "[NX3;H1]", "C!@C!@C", "[#6]1~[#6]~[#6]1", "[CX4]-[c]", "*~*~*~*", "N=N"),
    *("CCOP(=O)", "[O-][N+]", "cc(c)c", "[Pt,Pd,Ir]", "[C-]#[O+]", "CC(C)(C)C", "SC", "C/C=C/C"),
]


@pytest.fixture
def addends():
    structures = [each.structure for each in usual_addends()]
    structures += [read_addend(text) for text in MORE]
    return store(structures)


def store(structures):
    return Addend.objects.bulk_create(
        Addend(
            smiles=structure.smiles,
            search_smiles=structure.search_smiles,
            attachment_points=structure.attachment_points,
            formula=structure.formula,
            mass_g_per_mol=structure.mass_g_per_mol,
            fingerprint=fingerprint(structure.search_smiles),
            rdkit_version=rdkit.__version__,
        )
        for structure in structures
    )


def matched_one_by_one(addends, query, kind="auto"):
    """Find without screen, cache, batch or database."""
    compiled = compile_query(query, kind)
    return {row.pk for row in addends if match(compiled, [row.search_smiles])}


@pytest.mark.parametrize("query", QUERIES)
def test_every_engine_finds_the_same(addends, query):
    expected = matched_one_by_one(addends, query)
    outline = outline_query(query)
    assert in_process.matching(query, "auto", outline, "default") == expected
    assert addends_containing(query) == expected


def test_the_queries_find_many_few_and_none(addends):
    sizes = [len(addends_containing(query)) for query in QUERIES]
    assert min(sizes) == 0
    assert max(sizes) > len(addends) / 2
    assert len(set(sizes)) > 10


def test_postgresql_searches_by_its_cartridge_and_holds_every_addend(addends):
    assert cartridge.is_installed(connection) == (connection.vendor == "postgresql")
    expected = matched_one_by_one(addends, "C1CNCC1")
    if connection.vendor == "postgresql":
        assert cartridge.not_loaded(connection) == set()
        outline = outline_query("C1CNCC1")
        assert cartridge.search(outline).found == expected


def test_smarts_and_smiles_can_be_told_apart(addends):
    as_smarts = addends_containing("[CH3]O", "smarts")
    assert as_smarts == matched_one_by_one(addends, "[CH3]O", "smarts")
    assert as_smarts < addends_containing("[CH3]O", "smiles")


def test_the_search_can_be_kept_to_some_addends(addends):
    two = Addend.objects.filter(pk__in=[row.pk for row in addends[:2]])
    for query in ("C1CC1", "C", "*C*"):
        assert addends_containing(query, among=two) == (
            matched_one_by_one(addends, query) & set(two.values_list("pk", flat=True))
        )
    assert addends_containing("C1CC1", among=Addend.objects.none()) == set()


def test_an_addend_is_found_as_soon_as_stored_and_no_longer_when_removed(addends):
    before = addends_containing("C1CC1")
    gone = Addend.objects.get(pk=min(before))
    kept = {"search_smiles": gone.search_smiles, "smiles": gone.smiles}
    gone.delete()
    assert addends_containing("C1CC1") == before - {min(before)}
    again = Addend.objects.create(
        **kept, attachment_points=2, formula="", mass_g_per_mol=1.0, fingerprint=b""
    )
    assert addends_containing("C1CC1") == before - {min(before)} | {again.pk}


def test_a_fingerprint_of_another_version_hides_nothing(addends):
    before = addends_containing("C1CC1")
    Addend.objects.update(fingerprint=bytes(256), rdkit_version="2019.09.1")
    Addend.objects.filter(pk=addends[-1].pk).delete()  # the library is read anew
    outline = outline_query("C1CC1")
    assert in_process.matching("C1CC1", "auto", outline, "default") == before


def test_a_search_that_runs_away_is_cut_off(addends, monkeypatch):
    # No carbon of this addend is in a ring: found out only after every order of the others.
    branched = "*" + "C(C(C)(C)C)(C(C)(C)C)C(C)(C)C"
    store([read_addend(branched)])
    monkeypatch.setattr(in_process, "_BATCH_SECONDS", 0.5)
    with pytest.raises(StructureTimeoutError, match="simpler or more specific"):
        addends_containing("C.C.C.C.C.C.C.C.C.[CR]", "smarts")
    assert addends_containing("C1CC1")


def test_an_empty_book_finds_nothing(db):
    assert addends_containing("c1ccccc1") == set()
    assert addends_containing("C") == set()


def test_a_bad_query_is_an_error_in_words(db):
    with pytest.raises(StructureError, match="neither as SMILES nor as SMARTS"):
        addends_containing("C((")
