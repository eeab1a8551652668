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
    "dimethyl malonate": "COC(=O)CC(=O)OC",
    "malonic acid": "OC(=O)CC(=O)O",
    "N-ethylglycine ethyl ester": "CCNCC(=O)OCC",
    "glycine": "NCC(=O)O",
    "glycine hydrochloride": "NCC(=O)O.Cl",
    "proline": "OC(=O)C1CCCN1",
    "benzaldehyde": "O=Cc1ccccc1",
    "phenyldiazomethane": "[N-]=[N+]=Cc1ccccc1",
    "diazomethane": "C=[N+]=[N-]",
    "ethyl diazoacetate": "CCOC(=O)C=[N+]=[N-]",
    "benzyl azide": "[N-]=[N+]=NCc1ccccc1",
    "trimethylsilyl azide": "C[Si](C)(C)N=[N+]=[N-]",
    "cyclopentadiene": "C1C=CC=C1",
    "2,3-dimethylbutadiene": "CC(=C)C(C)=C",
    "9,10-dimethylanthracene": "Cc1c2ccccc2c(C)c2ccccc12",
    "tetracene": "c1ccc2cc3cc4ccccc4cc3cc2c1",
    "1,2-bis(bromomethyl)benzene": "BrCc1ccccc1CBr",
    "2-(trimethylsilyl)phenyl triflate": "C[Si](C)(C)c1ccccc1OS(=O)(=O)C(F)(F)F",
    "cesium fluoride": "[Cs+].[F-]",
    "potassium iodide": "[K+].[I-]",
    "potassium tert-butoxide": "CC(C)(C)[O-].[K+]",
    "potassium carbonate sesquihydrate, two units": (
        "[K+].[K+].[K+].[K+].O=C([O-])[O-].O=C([O-])[O-].O.O.O"
    ),
    "sodium methoxide": "[Na+].C[O-]",
    "sodium sulfite heptahydrate": "[Na+].[Na+].[O-]S(=O)[O-].O.O.O.O.O.O.O",
    "iron(III) chloride hexahydrate": "[Fe+3].[Cl-].[Cl-].[Cl-].O.O.O.O.O.O",
    "cobalt(II) chloride hexahydrate": "[Co+2].[Cl-].[Cl-].O.O.O.O.O.O",
    "copper(II) acetate monohydrate": "CC(=O)[O-].CC(=O)[O-].[Cu+2].O",
    "oxalic acid dihydrate": "OC(=O)C(=O)O.O.O",
    "aluminium chloride": "Cl[Al](Cl)Cl",
    "triflic acid": "OS(=O)(=O)C(F)(F)F",
    "triethylamine": "CCN(CC)CC",
    "triethylammonium chloride": "CC[NH+](CC)CC.[Cl-]",
    "4-dimethylaminopyridine": "CN(C)c1ccncc1",
    "piperidine": "C1CCNCC1",
    "ethylenediamine": "NCCN",
    "hydrazine hydrate": "NN.O",
    "perfluorohexyl iodide": "FC(F)(F)C(F)(F)C(F)(F)C(F)(F)C(F)(F)C(F)(F)I",
    "azobisisobutyronitrile": "CC(C)(C#N)N=NC(C)(C)C#N",
    "benzoyl peroxide": "O=C(OOC(=O)c1ccccc1)c1ccccc1",
    "bromine": "BrBr",
    "iodine monochloride": "ICl",
    "xenon difluoride": "F[Xe]F",
    "manganese trifluoride": "F[Mn](F)F",
    "tetrabutylammonium hydroxide 30-hydrate": (
        "CCCC[N+](CCCC)(CCCC)CCCC.[OH-]." + ".".join(["O"] * 30)
    ),
    "tetrakis(triphenylphosphine)palladium": (
        ".".join(["c1ccc(cc1)P(c1ccccc1)c1ccccc1"] * 4) + ".[Pd]"
    ),
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


# NIST: 22.989 769 28 u for 23Na, 34.968 852 7 u for 35Cl, 0.000 548 58 u for an electron (memory).
@pytest.mark.parametrize(
    ("smiles", "monoisotopic"),
    [("[Na+]", 22.98922), ("[Cl-]", 34.96940), ("[Na+].[Cl-]", 57.95862)],
)
def test_an_ion_weighs_by_its_electrons(smiles, monoisotopic):
    assert monoisotopic_mass(smiles) == pytest.approx(monoisotopic, abs=2e-5)


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
        ("C82H14O2", 1031.012),
        ("C74H20O8", 1036.966),
        ("C81H30O12", 1195.119),
        ("C69H21N3", 891.948),
        ("C69H8", 836.823),
        ("C87H24", 1069.149),
        ("C88H20", 1077.128),
        ("C65H6", 786.763),
        ("C60O", 736.659),
        ("C61H2", 734.687),
        ("C60H2", 722.676),
        ("C60H36", 756.948),
        ("C60F36", 1404.603),
        ("C60F48", 1632.583),
        ("C60Br24", 2638.356),
    ],
)
def test_published_and_derived_average_masses(written, average):
    # IUPAC's abridged weight of fluorine has a figure less than the one these were derived from.
    assert formula_mass(written) == pytest.approx(average, abs=0.02 if "F" in written else 0.002)


# Derived from the masses of the most abundant isotopes (12C 12, 1H 1.007825, 14N 14.003074,
# 16O 15.994915, 19F 18.998403, 79Br 78.918338; IUPAC).
@pytest.mark.parametrize(
    ("counts", "monoisotopic"),
    [
        ({"C": 60}, 720.0000),
        ({"C": 70}, 840.0000),
        ({"C": 72, "H": 14, "O": 2}, 910.0994),
        ({"C": 84, "H": 28, "O": 4}, 1100.1988),
        ({"C": 82, "H": 14, "O": 2}, 1030.0994),
        ({"C": 67, "H": 10, "O": 4}, 878.0579),
        ({"C": 74, "H": 20, "O": 8}, 1036.1158),
        ({"C": 81, "H": 30, "O": 12}, 1194.1737),
        ({"C": 102, "H": 60, "O": 24}, 1668.3475),
        ({"C": 63, "H": 7, "N": 1}, 777.0578),
        ({"C": 66, "H": 14, "N": 2}, 834.1157),
        ({"C": 69, "H": 21, "N": 3}, 891.1735),
        ({"C": 69, "H": 8}, 836.0626),
        ({"C": 78, "H": 16}, 952.1252),
        ({"C": 87, "H": 24}, 1068.1878),
        ({"C": 74, "H": 10}, 898.0783),
        ({"C": 88, "H": 20}, 1076.1565),
        ({"C": 65, "H": 6}, 786.0470),
        ({"C": 60, "O": 1}, 735.9949),
        ({"C": 61, "H": 2}, 734.0157),
        ({"C": 60, "H": 36}, 756.2817),
        ({"C": 60, "F": 36}, 1403.9425),
        ({"C": 60, "F": 48}, 1631.9234),
        ({"C": 60, "Br": 24}, 2614.0401),
        ({"C": 90, "H": 26}, 1106.2035),
        ({"C": 68, "H": 13, "N": 1, "O": 4}, 907.0845),  # read: as calculated for a mass spectrum
    ],
    ids=lambda counts: "".join(map(str, counts)) if isinstance(counts, dict) else None,
)
def test_monoisotopic_masses_of_adducts_by_their_atoms(counts, monoisotopic):
    # The atoms side by side weigh what they weigh bound.
    atoms_apart = ".".join(f"[{symbol}]" for symbol in counts for _ in range(counts[symbol]))

    assert monoisotopic_mass(atoms_apart) == pytest.approx(monoisotopic, abs=1e-4)


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
