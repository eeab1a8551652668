"""Addends read from what people draw and type, and the masses they add."""

from __future__ import annotations

import random

import molmass
import pytest
from hypothesis import given
from hypothesis import strategies as st
from rdkit import Chem
from rdkit.Chem import rdDepictor

from reactions.chemistry.addends import addend_by_name, read_addend, usual_addends
from reactions.chemistry.families import families
from reactions.chemistry.structures import StructureError

C60_G_PER_MOL = 720.66  # 60 × 12.011, IUPAC standard atomic weight of carbon
NAMES = [each.name for each in usual_addends()]

# Average molar masses of adducts, computed from C 12.011, H 1.008, N 14.007, O 15.999 (derived);
# 834.852 is printed: Marchesan, Da Ros, Prato, J. Org. Chem. 2005, for C66H14N2.
ADDUCTS = [
    ("diethyl malonate (methano)", 1, 878.813),
    ("diethyl malonate (methano)", 6, 1669.578),
    ("N-methylpyrrolidine", 1, 777.756),
    ("N-methylpyrrolidine", 2, 834.852),
    ("N-methylpyrrolidine", 3, 891.948),
    ("indene", 1, 836.823),
    ("indene", 2, 952.986),
    ("anthracene", 1, 898.894),
    ("cyclopentadiene", 1, 786.763),
    ("methyl 4-phenylbutanoate (methano; PCBM type)", 1, 910.902),
    ("methyl 4-phenylbutanoate (methano; PCBM type)", 2, 1101.144),
    ("epoxide", 1, 736.659),
    ("hydrogen", 36, 756.948),
    ("fluorine", 48, 1632.583),
    ("bromine", 24, 2638.356),
]

# Monoisotopic masses of the same kind (derived); 910.0994 is agreed by RDKit, IsoSpecPy and
# pyteomics.
MONOISOTOPIC = [
    ("diethyl malonate (methano)", 1, 878.0579),
    ("N-methylpyrrolidine", 1, 777.0578),
    ("indene", 1, 836.0626),
    ("anthracene", 1, 898.0783),
    ("methyl 4-phenylbutanoate (methano; PCBM type)", 1, 910.0994),
    ("fluorine", 36, 1403.9425),
]


def named(name: str):
    found = addend_by_name(name)
    assert found is not None
    return found.structure


@pytest.mark.parametrize(("name", "level", "expected"), ADDUCTS)
def test_cage_and_addends_weigh_what_the_adduct_weighs(name, level, expected):
    assert C60_G_PER_MOL + level * named(name).mass_g_per_mol == pytest.approx(
        expected, abs=6e-4, rel=1.2e-5
    )


@pytest.mark.parametrize(("name", "level", "expected"), MONOISOTOPIC)
def test_monoisotopic_mass_of_the_adduct(name, level, expected):
    assert 720.0 + level * named(name).monoisotopic_mass == pytest.approx(expected, abs=6e-5)


@pytest.mark.parametrize("name", NAMES)
def test_formula_and_masses_agree_with_an_independent_library(name):
    addend = named(name)
    formula = molmass.Formula(addend.formula)
    assert addend.mass_g_per_mol == pytest.approx(formula.mass, rel=6e-5)
    assert addend.monoisotopic_mass == pytest.approx(formula.monoisotopic_mass, abs=1e-3)
    assert addend.formula == formula.formula


@pytest.mark.parametrize("name", NAMES)
def test_a_usual_addend_belongs_to_known_families(name):
    addend = addend_by_name(name)
    assert addend.source
    assert addend.families
    assert set(addend.families) <= set(families())


def test_names_and_structures_of_usual_addends_are_each_given_once():
    structures = [each.structure.smiles for each in usual_addends()]
    assert len(set(structures)) == len(structures)
    assert len({name.casefold() for name in NAMES}) == len(NAMES)


def test_a_name_is_found_in_any_case_and_an_unknown_one_is_not():
    assert addend_by_name(" Indene ").name == "indene"
    assert addend_by_name("unobtainium") is None


@given(st.sampled_from(NAMES), st.integers(0, 2**31 - 1))
def test_the_order_of_atoms_does_not_change_an_addend(name, order):
    addend = named(name)
    molecule = Chem.MolFromSmiles(addend.smiles, sanitize=False)
    Chem.SanitizeMol(molecule)
    places = list(range(molecule.GetNumAtoms()))
    random.Random(order).shuffle(places)
    shuffled = Chem.RenumberAtoms(molecule, places)
    as_written = Chem.MolToSmiles(shuffled, canonical=False)
    assert read_addend(as_written) == addend
    assert read_addend(Chem.MolToMolBlock(shuffled)).smiles == addend.smiles
    assert read_addend(Chem.MolToV3KMolBlock(shuffled)).smiles == addend.smiles


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("*C(*)(C(=O)OCC)C(=O)OCC", "CCOC(=O)C([*:1])([*:2])C(=O)OCC"),
        ("*c1ccccc1", "[1*]C1=CC=CC=C1"),
        ("*[H]", "[H]*"),
        ("*CC=CC*", "*C/C=C\\C*"),
        ("*N(=O)=O", "*[N+](=O)[O-]"),
        (
            "*[Pt](*)(P(C)(C)C)P(C)(C)C",
            "[*]->[Pt](<-[*])(<-P(C)(C)C)<-P(C)(C)C",
        ),
    ],
)
def test_two_ways_of_writing_are_one_addend(one, other):
    assert read_addend(one) == read_addend(other)


def test_a_chain_keeps_its_double_bond_geometry():
    assert read_addend("*C/C=C/C").smiles != read_addend("*C/C=C\\C").smiles


def test_a_phosphine_on_platinum_has_no_hydrogen_on_phosphorus():
    # Pt 195.084, P 30.974, C 12.011, H 1.008 (IUPAC): Pt + 2 P(CH3)3, derived.
    addend = read_addend("*[Pt](*)(P(C)(C)C)P(C)(C)C")
    assert addend.formula == "C6H18P2Pt"
    assert addend.mass_g_per_mol == pytest.approx(195.084 + 2 * 30.974 + 6 * 15.035, abs=0.01)


def test_a_heavy_isotope_counts_in_the_mass():
    # Deuterium 2.014102 Da (AME 2020, from memory).
    addend = read_addend("*[2H]")
    assert addend.formula == "D"
    assert addend.mass_g_per_mol == pytest.approx(2.014102, abs=1e-5)


def test_a_counter_ion_belongs_to_what_an_addition_adds():
    addend = read_addend("*C[N+](C)(C)C*.[I-]")
    assert addend.attachment_points == 2
    assert addend.formula == "C4H10IN"


MOLFILE = """
  drawn

  4  3  0  0  0  0  0  0  0  0999 V2000
    0.0000    0.0000    0.0000 {point}  0  0
    1.0000    0.0000    0.0000 C   0  0
    2.0000    0.0000    0.0000 {point}  0  0
    1.0000    1.0000    0.0000 Cl  0  0
  1  2  1  0
  2  3  1  0
  2  4  1  0
{rgp}M  END
"""

CHLOROMETHYL = """
  drawn

  2  1  0  0  0  0  0  0  0  0999 V2000
    1.0000    0.0000    0.0000 C   0  0
    1.0000    1.0000    0.0000 Cl  0  0
  1  2  1  0
M  APO  1   1   1
M  END
"""


@pytest.mark.parametrize(
    ("point", "rgp"),
    [("R# ", "M  RGP  2   1   1   3   2\n"), ("*  ", ""), ("A  ", ""), ("R1 ", ""), ("R  ", "")],
)
def test_a_molfile_may_mark_attachment_points_in_any_usual_way(point, rgp):
    assert read_addend(MOLFILE.format(point=point, rgp=rgp)).smiles == read_addend("*C(*)Cl").smiles


def test_an_attachment_point_property_of_a_molfile_is_read():
    assert read_addend(CHLOROMETHYL).smiles == read_addend("*CCl").smiles


def test_wedges_of_a_molfile_are_read():
    molecule = Chem.MolFromSmiles("*[C@H](C)O")
    rdDepictor.Compute2DCoords(molecule)
    block = Chem.MolToMolBlock(molecule)
    assert read_addend(block).smiles == read_addend("*[C@H](C)O").smiles
    assert "@" in read_addend(block).smiles


@pytest.mark.parametrize(
    ("structure", "message"),
    [
        ("", "No structure is given"),
        ("CC(=O)OCC", r"mark where it is attached with \*"),
        ("[R1]CC", r"mark where it is attached with \*"),
        ("*C(*)(*)C", "3 places are marked"),
        ("*=O", "exactly one single bond"),
        ("C*C", "exactly one single bond"),
        ("**", "bonded to each other"),
        ("*", "exactly one single bond"),
        ("*C(C)(C)(C)C", r"C \(atom 2\) has too many bonds"),
        ("*c1cccc1", "alternating bonds"),
        ("*cc", "aromatic"),
        ("*C(", "can't be read as SMILES"),
        ("*C.*[H]", "Two separate groups"),
        ("*C.Cc1ccccc1", "stands beside the addend"),
        ("*C~C", "several kinds of bond"),
        ("*" + "C" * 400, "more than 300"),
        ("*" + "C" * 30_000, "too long"),
        (MOLFILE.format(point="?  ", rgp=""), "give each atom an element"),
        (MOLFILE.format(point="*  ", rgp="")[:200] + "\nM  END", "can't be read as a molfile"),
        (MOLFILE.format(point="Q  ", rgp=""), "stands for several elements"),
    ],
)
def test_a_structure_that_is_no_addend_is_refused_in_words(structure, message):
    with pytest.raises(StructureError, match=message):
        read_addend(structure)


PIECES = ["C", "c", "N", "n", "O", "P", "[Pt]", "(", ")", "1", "2", "=", "#", "*", "[nH]", "[O-]"]
PIECES += ["/", "\\", "[C@H]", "->", "[*:1]", "[H]", "c1ccccc1", ".", ":", "~", "$", "[", "%10"]


@given(st.sampled_from(NAMES), st.lists(st.tuples(st.floats(0, 1), st.sampled_from(PIECES))))
def test_whatever_is_typed_is_an_addend_or_refused_in_words(name, changes):
    text = named(name).smiles
    for where, piece in changes:
        place = int(where * len(text))
        text = text[:place] + piece + text[place + 1 :]
    refusal = ""
    try:
        addend = read_addend(text)
    except StructureError as error:
        refusal = str(error)
    assert refusal.endswith(".") or read_addend(addend.smiles) == addend
