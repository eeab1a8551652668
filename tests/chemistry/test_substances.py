"""The substance table: found by name and structure, classed consistently, complete."""

from __future__ import annotations

import pytest
from rdkit.Chem import Descriptors

from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.families import families
from reactions.chemistry.solvents import solvent, solvents
from reactions.chemistry.substances import (
    UnknownSubstanceError,
    find_substance,
    statement_texts,
    substance,
    substances,
)

KEYS = list(substances())

# Label elements by hazard statement: Regulation (EC) No 1272/2008, Annex I, parts 2 to 5 (from
# memory). H230 adds to H220 and has none of its own; H221, H412 and H413 have no pictogram.
PICTOGRAM = {
    "GHS01": "H240",
    "GHS02": "H220 H224 H225 H226 H228 H242 H250 H251 H252 H260 H261",
    "GHS03": "H270 H271 H272",
    "GHS04": "H280",
    "GHS05": "H290 H314 H318",
    "GHS06": "H300 H301 H310 H311 H330 H331",
    "GHS08": "H304 H334 H340 H341 H350 H351 H360 H360D H360F H360FD H361 H361d H361f H361fd "
    "H370 H371 H372 H373",
    "GHS09": "H400 H410 H411",
}
EXCLAMATION = {"H302", "H312", "H332", "H315", "H317", "H319", "H335", "H336", "H420"}
# H272 is Danger in category 2, H228 in category 1; the stricter is taken.
DANGER = (
    {"H220", "H224", "H225", "H228", "H240", "H242", "H250", "H251", "H260", "H261"}
    | {"H270", "H271", "H272", "H300", "H301", "H304", "H310", "H311", "H314", "H318"}
    | {"H330", "H331", "H334", "H340", "H350", "H360", "H360D", "H360F", "H360FD"}
    | {"H370", "H372"}
)


@pytest.mark.parametrize("key", KEYS)
def test_each_row_is_complete(key: str) -> None:
    row = substance(key)
    assert row.name
    assert row.source
    assert row.how_known in ("memory", "read", "common practice")
    assert row.signal_word in ("", "Danger", "Warning")
    assert set(row.hazard_statements) <= set(statement_texts())
    assert set(row.precautionary_statements) <= set(statement_texts())


@pytest.mark.parametrize("key", KEYS)
def test_the_pictograms_are_those_of_the_hazard_statements(key: str) -> None:
    row = substance(key)
    hazards = set(row.hazard_statements)
    wanted = {code for code, statements in PICTOGRAM.items() if hazards & set(statements.split())}
    assert set(row.pictograms) - {"GHS07"} == wanted
    # Article 26: the skull displaces the exclamation mark; corrosion does for skin and eyes.
    left = hazards & EXCLAMATION
    if "GHS06" in wanted:
        left = set()
    if {"H314", "H318"} & hazards:
        left -= {"H315", "H319"}
    if "H334" in hazards:
        left -= {"H315", "H317", "H319"}
    assert ("GHS07" in row.pictograms) == bool(left)


@pytest.mark.parametrize("key", KEYS)
def test_the_signal_word_is_danger_where_a_statement_asks_for_it(key: str) -> None:
    row = substance(key)
    assert (row.signal_word == "Danger") == bool(DANGER & set(row.hazard_statements))
    if row.pictograms:
        assert row.signal_word


@pytest.mark.parametrize("key", KEYS)
def test_a_hazard_comes_with_what_to_do(key: str) -> None:
    row = substance(key)
    if row.signal_word:
        assert row.precautionary_statements


def test_names_and_synonyms_belong_to_one_row_each() -> None:
    seen: dict[str, str] = {}
    for row in substances().values():
        for name in (row.name, *row.synonyms):
            assert seen.setdefault(name.casefold(), row.key) == row.key


def test_every_reagent_and_solvent_of_the_families_is_listed() -> None:
    for family in families().values():
        for role in family.roles:
            if role.substance is not None:
                assert role.substance in substances(), (family.key, role.substance)
        for usual in family.usual_solvents:
            assert find_substance(usual) is not None, (family.key, usual)


def test_roles_name_a_substance_of_the_table_where_one_serves() -> None:
    named = {role.substance for family in families().values() for role in family.roles}
    assert len(named - {None}) >= 70


@pytest.mark.parametrize("key", [row.key for row in substances().values() if row.smiles])
def test_the_structure_can_be_read_and_finds_its_row(key: str) -> None:
    row = substance(key)
    assert row.smiles is not None
    assert Descriptors.MolWt(sanitised(unsanitised(row.smiles))) > 0
    found = find_substance(smiles=row.smiles)
    # Paraformaldehyde has its repeat unit, which is formaldehyde, the more strictly classed.
    assert found is substance("formaldehyde" if key == "paraformaldehyde" else key)


@pytest.mark.parametrize(
    ("name", "key"),
    [
        ("Toluene", "toluene"),
        ("  ODCB ", "1_2_dichlorobenzene"),
        ("1,2‑Dichlorobenzene", "1_2_dichlorobenzene"),
        ("DMF", "n_n_dimethylformamide"),
        ("sarcosine", "n_methylglycine"),
        ("75-15-0", "carbon_disulfide"),
        ("paraformaldehyde", "paraformaldehyde"),
    ],
)
def test_found_by_name_whatever_the_case_spacing_or_hyphen(name: str, key: str) -> None:
    assert find_substance(name) is substance(key)


@pytest.mark.parametrize(
    ("smiles", "key"),
    [
        ("C1=CC=CC=C1C", "toluene"),
        ("[Na+].[N-]=[N+]=[N-]", "sodium_azide"),
        ("O.CC1=CC=C(C=C1)S(O)(=O)=O", "p_toluenesulfonic_acid_monohydrate"),
        ("ClC1=CC=CC=C1Cl", "1_2_dichlorobenzene"),
        ("C(=[N+]=[N-])C(=O)OCC", "ethyl_diazoacetate"),
    ],
)
def test_found_by_structure_however_drawn(smiles: str, key: str) -> None:
    assert find_substance("as drawn", smiles) is substance(key)


def test_the_name_goes_before_the_structure() -> None:
    assert find_substance("paraformaldehyde", "C=O") is substance("paraformaldehyde")


@pytest.mark.parametrize(
    ("name", "smiles"), [("unobtainium", None), (None, None), ("", "C1CC"), ("x", "CCCCCCCCCI")]
)
def test_what_is_not_listed_is_not_found(name: str | None, smiles: str | None) -> None:
    assert find_substance(name, smiles) is None


def test_an_acid_and_its_hydrate_are_told_apart() -> None:
    assert find_substance(smiles="Cc1ccc(cc1)S(=O)(=O)O") is None


def test_an_unknown_key_names_its_neighbours() -> None:
    with pytest.raises(UnknownSubstanceError, match="toluene"):
        substance("tolune")


def test_every_solvent_is_listed_with_the_same_density() -> None:
    for name, row in solvents().items():
        found = find_substance(name, row.smiles)
        assert found is not None, name
        assert found.cas_number == row.cas_number
        if found.density_g_per_ml and row.density_g_per_ml:
            assert found.density_g_per_ml == pytest.approx(row.density_g_per_ml, abs=0.006)


def test_every_usual_solvent_of_the_families_is_in_the_table_of_solvents() -> None:
    for family in families().values():
        for name in family.usual_solvents:
            assert solvent(name).name == name
