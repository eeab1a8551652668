"""Solvents by name, what they dissolve, and how much of them a cage takes."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.masses import cage_formula, molar_mass_g_per_mol
from reactions.chemistry.quantities import volume_ml
from reactions.chemistry.quantity_text import format_volume
from reactions.chemistry.solvent_volume import advise_volume
from reactions.chemistry.solvents import (
    UnknownSolventError,
    least_volume_ml,
    published_solubilities,
    solubilities,
    solubility_mg_per_ml,
    solvent,
    solvents,
)


@pytest.mark.parametrize(
    ("typed", "name"),
    [
        ("toluene", "toluene"),
        ("Toluene ", "toluene"),
        ("PhMe", "toluene"),
        ("ODCB", "1,2-dichlorobenzene"),
        ("o-dichlorobenzene", "1,2-dichlorobenzene"),
        ("1,2‑Dichlorobenzene", "1,2-dichlorobenzene"),  # a hyphen that doesn't break
        ("carbon disulphide", "carbon disulfide"),
        ("CS2", "carbon disulfide"),
        ("CS₂", "carbon disulfide"),
        ("DCM", "dichloromethane"),
        ("THF", "tetrahydrofuran"),
        ("hexanes", "hexane"),
        ("108-88-3", "toluene"),
        ("liquid ammonia", "ammonia"),
    ],
)
def test_a_solvent_is_known_by_its_usual_names(typed, name):
    assert solvent(typed).name == name


def test_an_unknown_solvent_is_refused_with_the_nearest_names():
    with pytest.raises(UnknownSolventError, match=r"“tolune” is not in the table.*toluene"):
        solvent("tolune")


def test_no_two_solvents_share_a_name():
    seen: dict[str, str] = {}
    for row in solvents().values():
        for name in (row.name, *row.synonyms, row.cas_number):
            assert seen.setdefault(name.casefold(), row.name) == row.name


@pytest.mark.parametrize(
    "name",
    [
        "dichloromethane", "tetrahydrofuran", "N,N-dimethylformamide", "dimethyl sulfoxide",
        "methanol", "ethanol", "water", "acetonitrile", "ethyl acetate", "hexane", "cyclohexane",
        "1,4-dioxane", "acetic acid", "ammonia", "toluene", "1,2-dichlorobenzene", "chlorobenzene",
        "carbon disulfide", "1,2,4-trimethylbenzene", "pyridine", "tetralin", "decalins",
    ],
)  # fmt: skip
def test_the_solvents_of_the_trade_are_there(name):
    assert name in solvents()


def test_every_row_has_a_source_and_sane_figures():
    for row in solvents().values():
        assert row.source
        assert row.density_g_per_ml is not None
        assert 0.5 < row.density_g_per_ml < 3
        assert row.boiling_point_c is not None
        if row.flash_point_c is not None:
            assert row.flash_point_c < row.boiling_point_c
        if row.flash_point_c is not None and row.autoignition_c is not None:
            assert row.flash_point_c < row.autoignition_c
        if row.smiles:
            assert molar_mass_g_per_mol(row.smiles) > 15


def test_every_solubility_belongs_to_a_solvent_and_a_cage_and_says_how_it_is_known():
    for row in solubilities():
        assert row.solvent in solvents()
        assert cage_formula(row.cage) == row.cage
        assert row.mg_per_ml >= 0
        assert row.temperature_c == 25
        assert row.how_known in {"read", "memory", "derived"}
        assert ("from memory" in row.source) == (row.how_known == "memory")


def test_of_several_published_solubilities_the_lowest_counts():
    published = published_solubilities("C60", "o-DCB")

    assert [row.mg_per_ml for row in published] == [24, 24.6, 27]
    assert solubility_mg_per_ml("C60", "o-DCB") == 24


def test_a_doubtful_high_value_is_kept_but_not_used():
    assert max(row.mg_per_ml for row in published_solubilities("C60", "cyclohexane")) == 1.2
    assert solubility_mg_per_ml("C60", "cyclohexane") == 0.036


@pytest.mark.parametrize(
    ("cage", "name"),
    [("C84", "toluene"), ("C60", "water glass"), ("C60", "acetic acid"), ("?", "")],
)
def test_what_is_not_known_is_not_guessed(cage, name):
    assert solubility_mg_per_ml(cage, name) is None
    assert least_volume_ml(cage, 100, name, 1.25) is None


def test_the_symmetry_of_the_cage_makes_no_difference():
    assert solubility_mg_per_ml("C70-D5h(6)", "toluene") == solubility_mg_per_ml("C70", "toluene")


def test_the_least_volume_dissolves_the_cage_with_its_margin():
    # 500 mg / 2.8 mg/mL = 178.6 mL; times 1.25. Derived from the handbook solubility.
    assert least_volume_ml("C60", 500, "toluene", 1.25) == pytest.approx(223.2, abs=0.05)


@given(st.floats(0.1, 1e6), st.floats(1, 10))
def test_the_least_volume_grows_with_mass_and_margin(mass_mg, margin):
    least = least_volume_ml("C60", mass_mg, "toluene", margin)
    assert least is not None
    assert least * 2.8 == pytest.approx(mass_mg * margin)


@pytest.mark.parametrize(("mass_mg", "margin"), [(-1, 1.25), (100, 0.9)])
def test_a_margin_below_1_and_a_negative_mass_are_refused(mass_mg, margin):
    with pytest.raises(ValueError, match="give"):
        least_volume_ml("C60", mass_mg, "toluene", margin)


def test_without_a_volume_the_least_is_advised():
    advice = advise_volume("C60", 500, "toluene", None, 1.25)

    assert advice.volume_ml == advice.least_volume_ml == pytest.approx(223.2, abs=0.05)
    assert advice.warnings == ()


def test_a_volume_that_cannot_dissolve_the_cage_is_warned_of_with_both_numbers():
    advice = advise_volume("C60", 500, "toluene", 50, 1.25)

    assert advice.volume_ml == 50
    assert advice.warnings == (
        "50 mL of toluene dissolves 140 mg of C60 at 25 °C (2.8 mg/mL), not 500 mg; take at least "
        "223.2 mL.",
    )


def test_a_volume_inside_the_margin_is_mentioned():
    (warning,) = advise_volume("C60", 500, "toluene", 180, 1.25).warnings

    assert warning == (
        "180 mL of toluene just dissolves the C60 at 25 °C; with a margin of 1.25 it takes "
        "223.2 mL."
    )


def test_a_volume_beyond_the_margin_passes():
    assert advise_volume("C60", 500, "toluene", 224, 1.25).warnings == ()


def test_exactly_what_is_advised_passes_and_exactly_what_dissolves_is_just_enough():
    # Toluene dissolves 2.8 mg/mL; 280 mg take 100 mL, with a margin of 1.25 they take 125.
    assert advise_volume("C60", 280, "toluene", 125, 1.25).warnings == ()
    (warning,) = advise_volume("C60", 280, "toluene", 100, 1.25).warnings
    assert "just dissolves" in warning


@given(st.floats(0.5, 1e5), st.floats(1, 5))
def test_the_volume_advised_may_be_typed_as_shown(mass_mg, margin):
    shown = format_volume(advise_volume("C60", mass_mg, "toluene", None, margin).volume_ml)

    assert advise_volume("C60", mass_mg, "toluene", volume_ml(shown), margin).warnings == ()


def test_a_little_soluble_is_not_practically_insoluble():
    assert advise_volume("C60", 100, "pyridine", 200, 1.25).warnings == ()  # 0.89 mg/mL


def test_an_unknown_solubility_is_said():
    advice = advise_volume("C84", 10, "toluene", None, 1.25)

    assert (advice.volume_ml, advice.least_volume_ml) == (None, None)
    assert "No solubility of C84 in toluene is on record here" in advice.warnings[0]


@pytest.mark.parametrize(
    ("name", "part"),
    [
        ("acetonitrile", "practically insoluble in acetonitrile at 25 °C: no volume"),
        ("hexane", "practically insoluble in hexane at 25 °C (0.04 mg/mL): dissolving it takes"),
    ],
)
def test_a_solvent_that_dissolves_next_to_nothing_is_warned_of(name, part):
    (warning,) = advise_volume("C60", 500, name, 100, 1.25).warnings

    assert part in warning
