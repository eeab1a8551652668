"""The family table, the levels it questions and the gas it reckons with."""

from __future__ import annotations

import pickle
from itertools import combinations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.families import (
    MODELS,
    FamilyError,
    UnknownFamilyError,
    branches,
    families,
    family,
    family_from_data,
    gas_evolved_ml,
    question_level,
)
from reactions.chemistry.tables import read_json_table
from reactions.models import ComponentRole

KEYS = list(families())


def own_family(**changes: object) -> dict[str, object]:
    data: dict[str, object] = {
        "key": "silylene",
        "name": "Silylene addition",
        "branch": "Cyclopropanation",
        "attaches": "a silirane ring",
        "attachment_points": 2,
        "sites": {"C60": 30},
        "level_counts": "one silirane ring",
        "source": "invented",
    }
    return data | changes


@pytest.mark.parametrize(
    "kind",
    [
        "bingel",
        "diazoalkane",
        "dihalocarbene",
        "tosylhydrazone",
        "prato",
        "diels_alder_diene",
        "diels_alder_anthracene",
        "diels_alder_o_quinodimethane",
        "diels_alder_indene",
        "benzyne",
        "enone",
        "azide",
        "nitrene",
        "grignard",
        "organolithium",
        "organocopper_five_fold",
        "amine",
        "hydroarylation",
        "radical_alkyl",
        "radical_perfluoroalkyl",
        "hydrogenation_birch",
        "hydroxylation",
        "epoxidation",
        "osmylation",
        "bromination",
        "chlorination",
        "fluorination",
        "platinum",
        "palladium",
        "iridium",
        "tungsten_carbonyl",
        "dimerisation",
        "retro_bingel",
        "retro_prato",
        "retro_diels_alder",
        "cage_opening",
        "cage_filling",
        "heteroatom_substitution",
        "precursor_closing",
    ],
)
def test_every_kind_of_addition_asked_for_is_in_the_table(kind: str) -> None:
    assert family(kind).key == kind


@pytest.mark.parametrize("key", KEYS)
def test_each_family_is_complete(key: str) -> None:
    row = family(key)
    assert row.source
    assert row.level_counts
    assert row.reversibility
    assert row.model in MODELS
    assert row.usual_duration_min is not None
    assert row.usual_temperature_c is not None
    assert row.roles
    assert row.highest_level


@pytest.mark.parametrize("key", KEYS)
def test_roles_are_those_of_a_weighing_list(key: str) -> None:
    assert {role.role for role in family(key).roles} <= set(ComponentRole.values)


@pytest.mark.parametrize("key", KEYS)
def test_by_products_with_a_structure_can_be_read(key: str) -> None:
    for product in family(key).by_products:
        if product.smiles:
            assert sanitised(unsanitised(product.smiles)).GetNumAtoms() > 0


def test_keys_are_unique_and_the_tree_holds_every_family_once_in_table_order() -> None:
    keys = [row["key"] for row in read_json_table("families.json")["families"]]
    assert len(set(keys)) == len(keys)
    assert [row.key for rows in branches().values() for row in rows] == keys


# Sites. C60 has 30 [6,6] bonds, which share no atom (FACTS: 90 bonds, 30 of them [6,6]). C70 has 45
# [6,6] bonds (10 a–b, 10 c–c, 20 d–e, 5 e–e), but only 30 that share no atom: derived below from
# the equatorial part, where each of ten e atoms holds one e and two d atoms.
def most_disjoint_bonds(bonds: list[tuple[str, str]]) -> int:
    if not bonds:
        return 0
    (first, second), rest = bonds[0], bonds[1:]
    clear = [bond for bond in rest if not {first, second} & set(bond)]
    return max(1 + most_disjoint_bonds(clear), most_disjoint_bonds(rest))


def test_c70_can_carry_thirty_additions_on_bonds() -> None:
    one_equatorial_unit = [("e1", "e2"), ("e1", "d1"), ("e1", "d2"), ("e2", "d3"), ("e2", "d4")]
    assert 10 + 10 + 5 * most_disjoint_bonds(one_equatorial_unit) == 30
    assert family("prato").sites == {"C60": 30, "C70": 30}


def test_three_pentagons_of_c60_at_most_take_the_five_fold_addition() -> None:
    # Pentagons of C60 are the vertices of an icosahedron, joined where a [6,6] bond joins them.
    top, bottom = 0, 11
    upper, lower = range(1, 6), range(6, 11)
    joined = {frozenset((top, p)) for p in upper} | {frozenset((bottom, p)) for p in lower}
    joined |= {frozenset((1 + i, 1 + (i + 1) % 5)) for i in range(5)}
    joined |= {frozenset((6 + i, 6 + (i + 1) % 5)) for i in range(5)}
    joined |= {frozenset((1 + i, 6 + (i + s) % 5)) for i in range(5) for s in (0, 1)}
    assert len(joined) == 30
    apart = max(
        size
        for size in range(1, 6)
        for group in combinations(range(12), size)
        if not any(frozenset(pair) in joined for pair in combinations(group, 2))
    )
    assert apart == family("organocopper_five_fold").sites["C60"] == 3


@pytest.mark.parametrize("key", KEYS)
def test_sites_never_need_more_atoms_than_the_cage_has(key: str) -> None:
    row = family(key)
    for cage, sites in row.sites.items():
        if row.key != "cage_filling":  # a guest binds to no cage atom
            assert sites * row.attachment_points <= int(cage.removeprefix("C"))


# Highest levels: common practice, collected beside the check values of the project.
@pytest.mark.parametrize(
    ("key", "cage", "highest"),
    [
        ("bromination", "C60", 24),
        ("fluorination", "C60", 48),
        ("hydrogenation_birch", "C60", 36),
        ("hydroxylation", "C60", 40),
        ("organocopper_five_fold", "C60", 1),
        ("dihalocarbene", "C60", 1),
        ("bingel", "C60", 6),  # octahedral hexakis-adduct
        ("bingel", "C70", 8),  # octakis, abstract read
        ("radical_alkyl", "C60", 34),  # Krusic et al., Science 1991, 254, 1183 (abstract)
        ("fluorination", "C70", 52),  # abstract read
    ],
)
def test_highest_levels_known(key: str, cage: str, highest: int) -> None:
    row = family(key)
    assert row.highest_level[cage] == highest
    assert question_level(row, cage, highest) is None
    question = question_level(row, cage, highest + 1)
    assert question is not None
    assert str(highest) in question.reason


def test_a_level_above_the_highest_known_is_to_be_confirmed() -> None:
    question = question_level(family("bromination"), "C60", 25)
    assert question is not None
    assert question.severity == "warning"
    assert "24" in question.reason


def test_a_level_above_the_sites_is_an_error() -> None:
    question = question_level(family("prato"), "C60", 31)
    assert question is not None
    assert question.severity == "error"
    assert "30" in question.reason
    assert question_level(family("hydrogenation_birch"), "C60", 61).severity == "error"


def test_a_level_below_one_is_an_error() -> None:
    question = question_level(family("prato"), "C60", 0)
    assert question is not None
    assert question.severity == "error"


def test_a_cage_or_level_not_on_record_is_to_be_confirmed() -> None:
    assert question_level(family("diazoalkane"), "C70", 1) is None
    assert question_level(family("diazoalkane"), "C70", 2).severity == "warning"
    assert question_level(family("organocopper_five_fold"), "C70", 1).severity == "warning"
    assert question_level(family("prato"), "Sc3N@C80", 1).severity == "warning"


def test_retro_additions_and_cage_surgery_are_not_forward() -> None:
    backward = {row.branch for row in families().values() if not row.is_forward}
    assert backward == {"Retro-addition", "Cage surgery"}


def test_an_unknown_family_names_its_neighbours() -> None:
    with pytest.raises(UnknownFamilyError, match="bingel") as caught:
        family("bingle")
    assert "bingel" in caught.value.near


# One CO2 per ylide, one N2 per carbene or nitrene: common practice; 24.5 mL per mmol at 25 °C.
def test_gas_of_prato_and_diazo() -> None:
    assert gas_evolved_ml(family("prato"), 0.5, 2) == pytest.approx({"carbon dioxide": 24.5})
    assert gas_evolved_ml(family("diazoalkane"), 1.0, 1) == pytest.approx({"nitrogen": 24.5})
    assert gas_evolved_ml(family("diels_alder_indene"), 1.0, 2) == {}


def test_an_excess_of_reagent_gives_gas_too() -> None:
    assert gas_evolved_ml(family("azide"), 1.0, 1, equivalents=3) == pytest.approx(
        {"nitrogen": 73.5}
    )


def test_precursor_with_three_chlorines_loses_fifteen_molecules() -> None:
    # C60H27Cl3 -> C60 + 3 HCl + 12 H2, derived.
    gases = gas_evolved_ml(family("precursor_closing"), 1.0, 1)
    assert gases == pytest.approx({"hydrogen": 12 * 24.5, "hydrogen chloride": 3 * 24.5})


@given(cage_mmol=st.floats(0, 100), level=st.floats(0, 6), temperature_c=st.floats(-100, 400))
def test_gas_grows_with_the_absolute_temperature(
    cage_mmol: float, level: float, temperature_c: float
) -> None:
    at_25 = gas_evolved_ml(family("prato"), cage_mmol, level)["carbon dioxide"]
    hot = gas_evolved_ml(family("prato"), cage_mmol, level, temperature_c)["carbon dioxide"]
    assert hot == pytest.approx(at_25 * (temperature_c + 273.15) / 298.15)


def test_gas_of_a_negative_amount_is_refused() -> None:
    with pytest.raises(ValueError, match="negative"):
        gas_evolved_ml(family("prato"), -1.0, 1)


def test_a_labs_own_family_needs_only_the_essentials() -> None:
    row = family_from_data(own_family())
    assert row.model == "sequential"
    assert row.is_forward
    assert row.roles == ()
    assert question_level(row, "C60", 2).severity == "warning"


def test_a_labs_own_family_with_everything_comes_back_as_given() -> None:
    row = family_from_data(
        own_family(
            roles=[
                {
                    "role": "reagent",
                    "name": "disilirane",
                    "equivalents_per_addition": 1.2,
                    "substance": None,
                }
            ],
            by_products=[{"name": "ethylene", "smiles": "C=C", "per_addition": 1, "is_gas": True}],
            usual_temperature_c=[20, 30],
            highest_level={"C60": 2},
        )
    )
    assert row.roles[0].equivalents_per_addition == 1.2
    assert row.usual_temperature_c == (20.0, 30.0)
    assert gas_evolved_ml(row, 1.0, 1) == pytest.approx({"ethylene": 24.5})


@pytest.mark.parametrize(
    ("field", "value", "message"),
    [
        ("key", "Sili lene", "lower-case"),
        ("name", "  ", "text"),
        ("sites", {"C60": 0}, "whole number"),
        ("sites", {}, "at least one cage"),
        ("sites", 30, "each cage"),
        ("attachment_points", 1.5, "whole number"),
        ("usual_temperature_c", [80, 20], "lower first"),
        ("usual_temperature_c", [float("nan"), 20], "not a number"),
        ("usual_duration_min", [-5, 20], "not below 0"),
        ("usual_solvents", "toluene", "list"),
        ("highest_level", {"C60": 31}, "30 sites"),
        ("thermally_reversible", "yes", "true nor false"),
        ("model", "guess", "independent_sites"),
        ("roles", "base", "list"),
        ("colour", "brown", "not a field"),
    ],
)
def test_a_faulty_field_is_named_with_the_reason(field: str, value: object, message: str) -> None:
    with pytest.raises(FamilyError) as caught:
        family_from_data(own_family(**{field: value}))
    assert list(caught.value.errors) == [field]
    assert message in caught.value.errors[field]


def test_faulty_roles_and_by_products_are_named_by_their_place() -> None:
    with pytest.raises(FamilyError) as caught:
        family_from_data(
            own_family(
                roles=[
                    {"role": "base", "name": "pyridine"},
                    {"role": "reagent", "equivalents_per_addition": float("inf")},
                    {"role": "bystander", "name": "argon"},
                ],
                by_products=[{"name": "gas", "smiles": "C1CC", "per_addition": 0}],
            )
        )
    assert set(caught.value.errors) == {
        "roles.1.name",
        "roles.1.equivalents_per_addition",
        "roles.2.role",
        "by_products.0.smiles",
        "by_products.0.per_addition",
    }


def test_all_missing_fields_are_reported_at_once() -> None:
    with pytest.raises(FamilyError) as caught:
        family_from_data({})
    assert set(caught.value.errors) == set(own_family())


@pytest.mark.parametrize("row", families().values(), ids=lambda row: row.key)
def test_a_family_goes_to_another_process_and_back(row):
    assert pickle.loads(pickle.dumps(row)) == row
