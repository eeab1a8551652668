"""What a substructure query finds among addends, and that screening never loses a hit."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from rdkit import Chem
from rdkit.Chem import rdDepictor

from reactions.chemistry.addends import read_addend, usual_addends
from reactions.chemistry.structures import StructureError
from reactions.chemistry.substructure import (
    MOST_QUERY_ATOMS,
    bit_matrix,
    compile_query,
    fingerprint,
    match,
    match_text,
    outline_query,
    screen,
)

FORMS = {each.name: each.structure.search_smiles for each in usual_addends()}
MALONATES = {
    "diethyl malonate (methano)",
    "dimethyl malonate (methano)",
    "di-tert-butyl malonate (methano)",
    "dibenzyl malonate (methano)",
}
METHANO = MALONATES | {
    "methano",
    "diphenylmethano",
    "methyl 4-phenylbutanoate (methano; PCBM type)",
    "methyl 4-(2-thienyl)butanoate (methano)",
    "ethyl acetate (methano)",
    "dichloromethano",
    "dibromomethano",
}
PYRROLIDINES = {
    "N-methylpyrrolidine",
    "pyrrolidine",
    "2-phenyl-N-methylpyrrolidine",
    "2,5-bis(ethoxycarbonyl)pyrrolidine",
}
PHOSPHINES = {
    "bis(triphenylphosphine)platinum",
    "bis(triphenylphosphine)palladium",
    "carbonylchlorobis(triphenylphosphine)iridium",
    "tricarbonyl[1,2-bis(diphenylphosphino)ethane]tungsten",
}


def found(text: str, kind: str = "auto") -> set[str]:
    places = match(compile_query(text, kind), FORMS.values())
    return {list(FORMS)[place] for place in places}


# Which addends of the table hold the part, read off their formulas by hand (derived).
@pytest.mark.parametrize(
    ("text", "kind", "expected"),
    [
        ("C1CC1", "smiles", METHANO),
        ("C1CNCC1", "smiles", PYRROLIDINES),
        ("CN1CCCC1", "smiles", {"N-methylpyrrolidine", "2-phenyl-N-methylpyrrolidine"}),
        (
            "C1CN1",
            "smiles",
            {"N-benzylaza bridge", "N-ethoxycarbonylaziridine", "aziridine"},
        ),
        ("C1CO1", "smiles", {"epoxide"}),
        (
            "C1CC=CCC1",
            "smiles",
            {
                "buta-1,3-diene",
                "2,3-dimethylbuta-1,3-diene",
                "cyclopentadiene",
            },
        ),
        ("C1CON=C1", "smiles", {"3-phenylisoxazoline"}),
        ("s1cccc1", "smiles", {"methyl 4-(2-thienyl)butanoate (methano)"}),
        ("FC(F)F", "smiles", {"trifluoromethyl", "pentafluoroethyl"}),
        ("P[Pt]", "smiles", {"bis(triphenylphosphine)platinum"}),
        ("c1ccccc1P", "smiles", PHOSPHINES),
        ("[C-]#[O+]", "smiles", PHOSPHINES - {"bis(triphenylphosphine)platinum"}
         - {"bis(triphenylphosphine)palladium"}),
        ("[Cl,Br,F]", "smarts", {
            "dichloromethano", "dibromomethano", "trifluoromethyl", "pentafluoroethyl", "bromine",
            "chlorine", "fluorine", "carbonylchlorobis(triphenylphosphine)iridium",
        }),
        ("[NX3;H1]", "smarts", {"pyrrolidine", "2,5-bis(ethoxycarbonyl)pyrrolidine", "aziridine"}),
        ("[#1]", "smarts", {"hydrogen"}),
        ("[OX2H]", "smarts", {"hydroxyl"}),
        ("C(=O)OC(C)(C)C", "smiles", {"di-tert-butyl malonate (methano)"}),
        ("[C;R](C(=O)O)C(=O)O", "smarts", MALONATES),
        ("*C(*)(C(=O)OCC)C(=O)OCC", "smiles", {
            "diethyl malonate (methano)", "dibenzyl malonate (methano)",
            "di-tert-butyl malonate (methano)",
        }),
        ("CC#N", "smiles", {"cyano"}),
        ("c1ccc2ccccc2c1", "smiles", set()),
        ("C1=CC=CC=C1C=O", "smiles", set()),
    ],
)  # fmt: skip
def test_a_query_finds_the_addends_that_hold_it(text, kind, expected):
    assert found(text, kind) == expected


def test_benzene_finds_aryl_groups_and_never_the_cage():
    hits = found("c1ccccc1")
    assert {"phenyl", "benzyl", "indene", "anthracene", "benzyne"} <= hits
    assert not {"methyl", "methano", "hydrogen", "N-methylpyrrolidine", "epoxide"} & hits


def test_a_match_needs_an_atom_of_the_addend():
    # The attached cage carbons are sp3 too, but every addend has them.
    assert "phenyl" not in found("[CX4]", "smarts")
    assert "methyl" in found("[CX4]", "smarts")
    assert "epoxide" not in found("CC")
    assert "methano" in found("CC")


def test_the_rest_of_the_cage_matches_nothing():
    assert found("[#0]", "smarts") == set()
    assert "methyl" not in found("[!#6;!#1]", "smarts")
    assert "methyl" not in found("[!#6]~*", "smarts")
    assert found("*~*~*~*~*~*~*~*~*~*", "smarts") < set(FORMS)


def test_a_wildcard_finds_every_addend():
    assert found("*", "smarts") == set(FORMS)


def test_drawing_as_kekule_or_aromatic_ring_is_the_same_query():
    assert found("C1=CC=CC=C1") == found("c1ccccc1")


def test_hydrogens_of_a_drawn_query_are_not_counted_and_those_of_smarts_are():
    assert "methyl 4-phenylbutanoate (methano; PCBM type)" in found("[CH3]OC=O", "smiles")
    assert "diethyl malonate (methano)" in found("[CH3]OC=O", "smiles")
    assert "diethyl malonate (methano)" not in found("[CH3]OC=O", "smarts")


def test_a_molfile_query_finds_what_its_smiles_finds():
    drawn = Chem.MolFromSmiles("C1CNCC1")
    rdDepictor.Compute2DCoords(drawn)
    assert found(Chem.MolToMolBlock(drawn), "molfile") == PYRROLIDINES
    assert found(Chem.MolToV3KMolBlock(drawn)) == PYRROLIDINES


def test_auto_tells_smiles_from_smarts():
    assert found("[CX4]") == found("[CX4]", "smarts")
    assert found("ccc") == found("ccc", "smarts") != set()
    assert found("C~N") == found("C~N", "smarts")
    assert found("[CH3]OC=O") == found("[CH3]OC=O", "smiles")


KINDS = ("auto", "smiles", "smarts", "molfile")
QUERIES = [
    *("C", "C1CC1", "C1CNCC1", "c1ccccc1", "C=O", "CC(=O)OC", "C#N", "*C*", "P[Pt]", "[Os]"),
    *("[CX4]", "[!#6]", "[R2]", "[#6]~[#7,#8]", "[$(C=O)]", "[C;!$(C=O)]", "c:c", "C=,:C", "[#1]"),
    *("[N+]", "C-[!#6]", "[D3]", "[r3]", "[r5]", "a1aaaaa1", "A@A@A", "O~O", "F", "[2H]", "C.N"),
]  # fmt: skip
MORE = [
    *("*C[N+](C)(C)C*.[I-]", "*C1=CC=CC1", "*c1ccncc1", "*C(*)c1c[nH]c2ccccc12", "*[2H]"),
    *("*C/C=C/C", "*[C@H](C)O", "*N=[N+]=[N-]", "*[Si](C)(C)C", "*B(O)O", "*OOC(C)(C)C", "*C=O"),
]  # fmt: skip


@given(st.sampled_from(QUERIES), st.sampled_from([*FORMS.values(), *MORE]))
def test_screening_never_loses_a_hit(text, structure):
    form = structure if structure in FORMS.values() else read_addend(structure).search_smiles
    query = compile_query(text)
    passes = screen(bit_matrix([fingerprint(form)]), query.outline.fingerprint).tolist()
    assert match(query, [form]) in ([], passes)


def test_screening_leaves_few_to_match():
    matrix = bit_matrix([fingerprint(form) for form in FORMS.values()])
    query = compile_query("C1CNCC1")
    survivors = screen(matrix, query.outline.fingerprint)
    assert len(survivors) < len(FORMS) / 4
    assert set(match(query, FORMS.values())) <= set(survivors.tolist())


@given(st.lists(st.binary(min_size=256, max_size=256), max_size=20), st.data())
def test_screen_keeps_the_rows_that_set_every_bit_of_the_query(rows, data):
    query = data.draw(st.sampled_from(rows) if rows else st.just(bytes(256)))
    mask = data.draw(st.binary(min_size=256, max_size=256))
    query = bytes(a & b for a, b in zip(query, mask, strict=True))
    expected = [
        place
        for place, row in enumerate(rows)
        if all(have & want == want for have, want in zip(row, query, strict=True))
    ]
    assert screen(bit_matrix(rows), query).tolist() == expected
    assert bit_matrix(rows).dtype == np.uint64


def test_a_fingerprint_has_256_bytes():
    assert all(len(fingerprint(form)) == 256 for form in FORMS.values())


def test_an_outline_says_what_its_query_is():
    assert outline_query("C1CC1") == compile_query("C1CC1").outline


def test_text_is_matched_as_its_query_is():
    forms = list(FORMS.values())
    assert match_text("C1CC1", "auto", forms) == match(compile_query("C1CC1"), forms)


def test_hydrogen_named_in_smarts_is_not_for_a_database():
    assert not outline_query("[#1]OC", "smarts").is_for_database


@pytest.mark.parametrize(
    ("text", "cage", "database"),
    [
        ("C1CNCC1", False, True),
        ("C", True, False),
        ("CC", True, False),
        ("*CC", True, True),
        ("[!#6]CC", True, False),
        ("[$(C=O)]OC", True, True),
        ("CCO.CCN", False, False),
        ("[#1]OC", True, False),
        ("[#1]OCC", False, True),
    ],
)
def test_a_query_says_what_a_database_would_get_wrong(text, cage, database):
    query = outline_query(text)
    assert (query.may_match_cage, query.is_for_database) == (cage, database)


@given(st.text("CcNnO*[]()#=:~@!$&;,.123HX+-RA", max_size=12), st.sampled_from(KINDS))
def test_whatever_is_typed_is_a_query_or_refused_in_words(text, kind):
    refusal = ""
    try:
        query = compile_query(text, kind)
    except StructureError as error:
        refusal = str(error)
    assert refusal.endswith(".") or len(match(query, FORMS.values())) <= len(FORMS)


@pytest.mark.parametrize(
    ("text", "kind", "message"),
    [
        ("", "auto", "No structure is given"),
        ("   ", "smiles", "No structure is given"),
        ("C1CC", "smiles", "can't be read as SMILES"),
        ("[CX4", "smarts", "can't be read as SMARTS"),
        ("C((", "auto", "neither as SMILES nor as SMARTS"),
        ("CC(C)(C)(C)C", "smiles", r"C \(atom 2\) has too many bonds"),
        ("c1cccc1", "smiles", "alternating bonds"),
        ("CCO", "molfile", "isn't a molfile"),
        ("\n\n\n  0  0  0  0  0  0  0  0  0  0999 V2000\nM  END\n", "molfile", "empty"),
        ("\n\n\n  0  0  0  0  0  0  0  0  0  0999 V2000\nM  END\n", "smiles", "choose molfile"),
        ("C" * (MOST_QUERY_ATOMS + 1), "auto", "more than 100"),
        ("C" * 30_000, "auto", "too long"),
        ("CCO", "inchi", "no kind of query"),
    ],
)
def test_a_bad_query_is_refused_in_words(text, kind, message):
    with pytest.raises(StructureError, match=message):
        compile_query(text, kind)
