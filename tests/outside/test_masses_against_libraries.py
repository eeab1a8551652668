"""Formulas and masses against molmass, pyteomics and published values."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st
from molmass import Formula
from pyteomics import mass as pyteomics_mass

from reactions.chemistry.masses import (
    cage_molar_mass_g_per_mol,
    formula,
    formula_mass,
    molar_mass_g_per_mol,
    monoisotopic_mass,
)

# Reagents, salts, hydrates and metal complexes of the trade.
SUBSTANCES = {
    "diethyl bromomalonate": "CCOC(=O)C(Br)C(=O)OCC",
    "DBU": "C1CCC2=NCCCN2CC1",
    "sodium hydride": "[Na+].[H-]",
    "N-methylglycine": "CNCC(=O)O",
    "paraformaldehyde unit": "C=O",
    "carbon tetrabromide": "BrC(Br)(Br)Br",
    "sodium azide": "[Na+].[N-]=[N+]=[N-]",
    "tosylhydrazone": "COC(=O)CCCC(=NNS(=O)(=O)c1ccc(C)cc1)c1ccccc1",
    "anthracene": "c1ccc2cc3ccccc3cc2c1",
    "indene": "C1C=Cc2ccccc12",
    "n-butyllithium": "[Li]CCCC",
    "phenylmagnesium bromide": "Br[Mg]c1ccccc1",
    "copper bromide dimethyl sulfide": "Br[Cu].CSC",
    "copper sulfate pentahydrate": "O=S(=O)([O-])[O-].[Cu+2].O.O.O.O.O",
    "manganese(III) acetate dihydrate": "CC(=O)[O-].CC(=O)[O-].CC(=O)[O-].[Mn+3].O.O",
    "toluenesulfonic acid monohydrate": "Cc1ccc(cc1)S(=O)(=O)O.O",
    "osmium tetroxide": "O=[Os](=O)(=O)=O",
    "tungsten hexacarbonyl": "[C-]#[O+].[C-]#[O+].[C-]#[O+].[C-]#[O+].[C-]#[O+].[C-]#[O+].[W]",
    "Vaska's complex": "Cl[Ir](C=O)(P(c1ccccc1)(c1ccccc1)c1ccccc1)P(c1ccccc1)(c1ccccc1)c1ccccc1",
    "antimony pentachloride": "Cl[Sb](Cl)(Cl)(Cl)Cl",
    "3-chloroperbenzoic acid": "OOC(=O)c1cccc(Cl)c1",
    "trifluoroiodomethane": "FC(F)(F)I",
    "18-crown-6": "C1COCCOCCOCCOCCOCCO1",
}


@pytest.mark.parametrize("name", SUBSTANCES)
def test_the_average_mass_is_that_of_molmass(name):
    smiles = SUBSTANCES[name]

    # Both follow IUPAC; the two tables round and renew their atomic weights differently.
    assert molar_mass_g_per_mol(smiles) == pytest.approx(Formula(formula(smiles)).mass, rel=1e-4)


@pytest.mark.parametrize("name", SUBSTANCES)
def test_the_formula_is_that_of_molmass(name):
    written = formula(SUBSTANCES[name])

    assert atoms(Formula(written).formula) == atoms(written)


@pytest.mark.parametrize("name", SUBSTANCES)
def test_the_monoisotopic_mass_is_that_of_pyteomics(name):
    smiles = SUBSTANCES[name]
    theirs = pyteomics_mass.calculate_mass(composition=atoms(formula(smiles)))

    assert monoisotopic_mass(smiles) == pytest.approx(theirs, abs=2e-4)


def atoms(written):
    """Return how many atoms of each element a formula counts."""
    counts: dict[str, int] = {}
    for symbol, count in re.findall(r"([A-Z][a-z]?)(\d*)", written):
        counts[symbol] = counts.get(symbol, 0) + int(count or 1)
    return counts


ELEMENTS = ["C", "H", "N", "O", "F", "Na", "Si", "P", "S", "Cl", "K", "Sc", "Cu", "Br", "La", "Pt"]


@given(st.dictionaries(st.sampled_from(ELEMENTS), st.integers(1, 200), min_size=1, max_size=6))
def test_any_formula_weighs_what_molmass_says(counts):
    written = "".join(f"{symbol}{count}" for symbol, count in counts.items())

    assert formula_mass(written) == pytest.approx(Formula(written).mass, rel=1e-4)


@pytest.mark.parametrize("carbons", [60, 70, 76, 78, 84, 90])
def test_a_cage_weighs_what_molmass_says(carbons):
    assert cage_molar_mass_g_per_mol(f"C{carbons}") == pytest.approx(
        Formula(f"C{carbons}").mass, rel=5e-5
    )


@pytest.mark.parametrize("held", ["Sc3N", "Lu3N", "La", "Li", "H2O"])
def test_an_endohedral_cage_weighs_cage_and_contents(held):
    assert cage_molar_mass_g_per_mol(f"{held}@C80") == pytest.approx(
        Formula(f"{held}C80").mass, rel=5e-5
    )


@pytest.mark.parametrize(
    ("written", "average"),
    [
        ("C60", 720.660),  # read: encyclopaedia article on C60; IUPAC atomic weights
        ("C66H14N2", 834.852),  # read: Marchesan, Da Ros, Prato, J. Org. Chem. 2005
        # Derived from IUPAC atomic weights (C 12.011, H 1.008, N 14.007, O 15.999):
        ("C70", 840.770),
        ("C72H14O2", 910.902),
        ("C84H28O4", 1101.144),
        ("C67H10O4", 878.813),
        ("C102H60O24", 1669.578),
        ("C63H7N", 777.756),
        ("C78H16", 952.986),
        ("C74H10", 898.894),
        ("C90H26", 1107.198),
    ],
)
def test_published_and_derived_average_masses(written, average):
    assert formula_mass(written) == pytest.approx(average, abs=0.002)


# Whole adducts with their cage, written by RDKit from the numbering of Pure Appl. Chem. 2005, 77,
# 843; derived.
BUTYRIC_ESTER = (
    "COC(=O)CCCC1(C2=CC=CC=C2)C23C4=C5C6=C7C8=C9C%10=C%11C%12=C%13C%14=C%15C%16=C%17C"
    "%18=C%19C%20=C%21C%17=C%15C%15=C%17C%21=C%21C%20=C(C6=C%19C8=C%18C%10=C%16%12)C5"
    "=C5C%21=C6C%17=C8C%15=C%14C%10=C%13C%12=C%11C%11=C%13C%12=C%12C%10=C8C(=C6C512)C"
    "%12=C3C%13=C4C7=C9%11"
)
BIS_PYRROLIDINE = (
    "CN1CC23C4=C5C6=C7C8=C9C%10=C%11C%12=C%13C%14=C%15C%16=C%17C%18=C%19C%16=C%16C%14"
    "=C%11C%11=C%16C%14=C%19C%16%19CN(C)CC%16%20C%16=C(C(=C%18%20)C%18=C%17C%17=C(C%2"
    "0=C(C(=C9%12)C7=C%204)C%13=C%15%17)C%182C1)C3=C5C1=C2C6=C8C3=C%10C%11=C4C3=C2C(="
    "C1%16)C%19=C4%14"
)
VINYL_PYRROLIDINE = (
    "C=CC1N(C)CC23C4=C5C6=C7C8=C9C%10=C%11C%12=C%13C%14=C%15C%16=C%17C%18=C%19C%20=C%"
    "21C%17=C%15C%15=C%17C%14=C%14C%13=C%13C%11=C%11C9=C7C4=C4C%11=C%13C7=C%14C9=C%17"
    "C%11=C%15C%21=C%13C%20=C(C6=C%19C8=C%18C%10=C%16%12)C5=C5C%13=C%11C(=C9C7=C42)C5"
    "13"
)


@pytest.mark.parametrize(
    ("smiles", "written", "monoisotopic"),
    [
        (BUTYRIC_ESTER, "C72H14O2", 910.0994),  # RDKit, IsoSpecPy and pyteomics agree
        (VINYL_PYRROLIDINE, "C65H9N", 803.0735),  # read: as calculated for a mass spectrum
    ],
)
def test_published_monoisotopic_masses_of_whole_adducts(smiles, written, monoisotopic):
    assert formula(smiles) == written
    assert monoisotopic_mass(smiles) == pytest.approx(monoisotopic, abs=1e-4)


def test_published_average_mass_of_a_whole_bis_adduct():
    assert formula(BIS_PYRROLIDINE) == "C66H14N2"
    assert molar_mass_g_per_mol(BIS_PYRROLIDINE) == pytest.approx(834.852, abs=1e-3)
