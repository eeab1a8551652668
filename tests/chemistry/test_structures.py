"""SMILES as typed, read into molecules."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

from reactions.chemistry.structures import StructureError, parse_smiles

# A tetrafluoride of C60, written by RDKit with aromatic atoms in an order in which RDKit's own
# search for double bonds gives up; found by trying 5,696 random ones.
GIVES_UP_AT_FIRST = (
    "c12-c3c4c5c6c7c8c9c%10c%11c%12c%13c%14c%15c%16c%17c%18c(c%15c%139)c8c5c%18c5c4C4"
    "(F)c2c2c8c9c%13c%15c%18c%19c%20c%13c2c2c4c5c%17c(c%16C%19(c%14c-%18c%12c4c%11c5C"
    "(=C9C4%15F)C(c(c36)c5c%107)(c18)F)F)c2%20"
)


def test_an_adduct_whose_double_bonds_are_not_found_at_once_is_read():
    assert CalcMolFormula(parse_smiles(GIVES_UP_AT_FIRST)) == "C60F4"


def test_blanks_around_a_structure_do_not_count():
    assert CalcMolFormula(parse_smiles("  CCO\n")) == "C2H6O"


@pytest.mark.parametrize(
    ("smiles", "reason"),
    [
        ("", "There is no structure"),
        ("   ", "There is no structure"),
        ("C1CC", "“C1CC” can't be read as SMILES"),
        ("toluene", "“toluene” can't be read as SMILES"),
        ("CC(C)(C)(C)C", "C has too many bonds"),
        ("F(C)C", "F has too many bonds"),
        ("c1cccc1", "can't be given single and double bonds"),
        ("cc", "can't be given single and double bonds"),
        ("C" * 401, "401 atoms without hydrogen; at most 400"),
        ("C" * 2001, "2001 characters; at most 2000"),
    ],
)
def test_what_cannot_be_read_is_refused_in_words(smiles, reason):
    with pytest.raises(StructureError, match=reason.replace("(", r"\(").replace(")", r"\)")):
        parse_smiles(smiles)


def test_a_long_structure_is_cut_in_the_message():
    with pytest.raises(StructureError) as refusal:
        parse_smiles("C1" + "C" * 300)
    assert len(str(refusal.value)) < 200


@given(st.text(alphabet="CNOFclnosBr[]()=#@+-.123%*Hh\\/ P", max_size=40))
def test_any_text_is_read_or_refused_in_words(text):
    refusal = ""
    try:
        parse_smiles(text)
    except StructureError as error:
        refusal = str(error)
    assert not refusal or refusal.endswith(".")
