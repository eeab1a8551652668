"""The two rules of thumb for azides and their like, counted by hand."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rdkit import Chem

from reactions.chemistry.cautions.energetic import azide_ratio, carbons_per_energetic_group


# (N_C + N_O) / N_N counted from the formulas (derived).
@pytest.mark.parametrize(
    ("smiles", "ratio"),
    [
        ("CN=[N+]=[N-]", 1 / 3),
        ("[N-]=[N+]=Nc1ccccc1", 6 / 3),
        ("N(=[N+]=[N-])Cc1ccccc1", 7 / 3),
        ("CCOC(=O)N=[N+]=[N-]", 5 / 3),
        ("[N-]=[N+]=NCCOCCOCCOCCN=[N+]=[N-]", 11 / 6),
        ("CCCCCCCCC[N-][N+]#N", 9 / 3),
    ],
)
def test_ratio_of_an_organic_azide(smiles: str, ratio: float) -> None:
    assert azide_ratio(Chem.MolFromSmiles(smiles)) == pytest.approx(ratio)


@pytest.mark.parametrize("smiles", ["[N-]=[N+]=[N-].[Na+]", "CCOC(=O)C=[N+]=[N-]", "Cc1ccccc1"])
def test_no_ratio_without_an_organic_azide(smiles: str) -> None:
    assert azide_ratio(Chem.MolFromSmiles(smiles)) is None


@pytest.mark.parametrize(
    ("smiles", "carbons"),
    [
        ("[N-]=[N+]=Nc1ccccc1", 6),
        ("C=[N+]=[N-]", 1),
        ("[CH2-][N+]#N", 1),
        ("CC(C)(C)OOC(C)(C)C", 8),
        ("OOC(=O)c1cccc(Cl)c1", 7),
        ("O=[N+]([O-])c1cccc([N+](=O)[O-])c1", 3),
        ("[N-]=[N+]=NCCCCCCN=[N+]=[N-]", 3),
    ],
)
def test_carbons_per_energetic_group(smiles: str, carbons: float) -> None:
    assert carbons_per_energetic_group(Chem.MolFromSmiles(smiles)) == pytest.approx(carbons)


@pytest.mark.parametrize("smiles", ["OO", "[N-]=[N+]=[N-].[Na+]", "c1ccccc1", "CCOC(C)=O"])
def test_no_count_without_carbon_or_group(smiles: str) -> None:
    assert carbons_per_energetic_group(Chem.MolFromSmiles(smiles)) is None


@given(length=st.integers(1, 40))
def test_a_longer_chain_dilutes_the_azide(length: int) -> None:
    azide = Chem.MolFromSmiles("C" * length + "N=[N+]=[N-]")
    assert azide_ratio(azide) == pytest.approx(length / 3)
    assert carbons_per_energetic_group(azide) == length
