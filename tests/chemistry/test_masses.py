"""Formulas and molar masses from structures, formulas and cage names."""

from __future__ import annotations

import pytest

from reactions.chemistry.masses import (
    cage_formula,
    cage_molar_mass_g_per_mol,
    formula,
    formula_mass,
    molar_mass_g_per_mol,
    monoisotopic_mass,
)
from reactions.chemistry.structures import StructureError


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        ("CCOC(=O)C(Br)C(=O)OCC", "C7H11BrO4"),
        ("[Na+].[H-]", "HNa"),
        ("O=S(=O)([O-])[O-].[Cu+2].O.O.O.O.O", "H10CuO9S"),
        ("[NH4+].[Cl-]", "H4ClN"),
        ("[N-]=[N+]=[N-].[Na+]", "N3Na"),
        ("CN(=O)=O", "CH3NO2"),
        ("[2H]O[2H]", "H2O"),
        ("[NH4+]", "H4N+"),
    ],
)
def test_the_formula_follows_from_the_structure(smiles, expected):
    assert formula(smiles) == expected


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # IUPAC abridged atomic weights; derived.
        ("O=S(=O)([O-])[O-].[Cu+2].O.O.O.O.O", 249.68),
        ("[Na+].[H-]", 23.998),
        ("CC1=CC=C(C=C1)S(O)(=O)=O.O", 190.22),
        ("O", 18.015),
        ("[2H]O[2H]", 20.028),
    ],
)
def test_salts_hydrates_and_isotopes_weigh_with_all_their_parts(smiles, expected):
    assert molar_mass_g_per_mol(smiles) == pytest.approx(expected, abs=0.006)


def test_a_phosphine_drawn_with_a_plain_line_gains_no_hydrogen():
    drawn_plainly = "Cl[Ir](C=O)(P(c1ccccc1)(c1ccccc1)c1ccccc1)P(c1ccccc1)(c1ccccc1)c1ccccc1"

    assert formula(drawn_plainly) == "C37H31ClIrOP2"


def test_an_open_position_has_no_mass_of_its_own():
    with pytest.raises(StructureError, match="open position"):
        molar_mass_g_per_mol("*C(*)(C(=O)OCC)C(=O)OCC")


def test_monoisotopic_mass_takes_the_most_abundant_isotopes():
    assert monoisotopic_mass("BrBr") == pytest.approx(157.8367, abs=1e-4)  # 2 × 79Br, IUPAC


@pytest.mark.parametrize(
    ("cage", "bare"),
    [
        ("C60", "C60"),
        ("C60-Ih", "C60"),
        ("(C60-Ih)", "C60"),
        ("C70-D5h(6)", "C70"),
        ("C78-C2v(3)", "C78"),
        ("C2-C82", "C82"),
        ("C₆₀", "C60"),
        (" C84 ", "C84"),
        ("C59N", "C59N"),
        ("Sc3N@C80", "Sc3N@C80"),
        ("Sc3N@Ih-C80", "Sc3N@C80"),
        ("Lu3N@Ih(7)-C80", "Lu3N@C80"),
        ("Li+@C60", "Li@C60"),
        ("H2O @ C60", "H2O@C60"),
    ],
)
def test_a_cage_is_known_by_its_formula_with_or_without_symmetry(cage, bare):
    assert cage_formula(cage) == bare
    assert cage_molar_mass_g_per_mol(cage) == formula_mass(bare)


@pytest.mark.parametrize(
    ("cage", "expected"),
    [
        ("C60", 720.660),  # IUPAC atomic weight of carbon, 12.011
        ("C70", 840.770),
        ("C76", 912.836),
        ("C84", 1008.924),
        ("Sc3N@C80", 1109.755),  # Sc 44.956, N 14.007; derived
        ("C59N", 722.656),
    ],
)
def test_cages_weigh_what_their_atoms_weigh(cage, expected):
    assert cage_molar_mass_g_per_mol(cage) == pytest.approx(expected, abs=0.002)


@pytest.mark.parametrize(
    ("cage", "reason"),
    [
        ("c60", "is no cage known here"),
        ("buckyball", "is no cage known here"),
        ("", "is no cage known here"),
        ("C10", "the smallest has 20"),
        ("C61", "their number is even"),
        ("C60(OH)24", "is no cage known here"),
        ("C60Xx", "“Xx” in “C60Xx” is not an element"),
        ("Xx@C60", "“Xx” in “Xx@C60” is not an element"),
    ],
)
def test_what_is_no_cage_is_refused_with_the_reason(cage, reason):
    with pytest.raises(StructureError, match=reason.replace("(", r"\(")):
        cage_molar_mass_g_per_mol(cage)


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        ("C60H0", "counts 0 of one element"),
        ("C99999999999", "write 1 to 10000"),
        ("60", "is not a formula"),
        ("C60@", "is not a formula"),
        ("Zz", "is not an element"),
    ],
)
def test_what_is_no_formula_is_refused_with_the_reason(text, reason):
    with pytest.raises(StructureError, match=reason):
        formula_mass(text)
