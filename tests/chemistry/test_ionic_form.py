"""Salts and organometallics drawn in two ways come to one form."""

from __future__ import annotations

import pytest
from rdkit import Chem
from rdkit.Chem import Descriptors

from reactions.chemistry.ionic_form import ionic_form
from reactions.chemistry.substances import find_substance, substance


@pytest.mark.parametrize(
    ("drawn", "ions", "key"),
    [
        ("[Li]CCCC", "[Li+].CCC[CH2-]", "n_butyllithium"),
        ("C[Mg]Br", "[CH3-].[Mg+2].[Br-]", "methylmagnesium_bromide"),
        ("[NaH]", "[Na+].[H-]", "sodium_hydride"),
        ("[Na]OC", "[Na+].[O-]C", "sodium_methoxide"),
        ("[Na]N=[N+]=[N-]", "[Na+].[N-]=[N+]=[N-]", "sodium_azide"),
        ("[K]C#N", "[K+].[C-]#N", "potassium_cyanide"),
        ("Cl[Al](Cl)Cl", "[Al+3].[Cl-].[Cl-].[Cl-]", "aluminium_chloride"),
        ("F[Mn](F)F", "[Mn+3].[F-].[F-].[F-]", "manganese_iii_fluoride"),
    ],
)
def test_both_drawings_are_the_same_substance(drawn: str, ions: str, key: str) -> None:
    forms = {Chem.MolToSmiles(ionic_form(Chem.MolFromSmiles(text))) for text in (drawn, ions)}
    assert len(forms) == 1
    assert find_substance(smiles=drawn) is find_substance(smiles=ions) is substance(key)


@pytest.mark.parametrize("smiles", ["Cc1ccccc1", "[Li]", "O=[Os](=O)(=O)=O", "[Cu]Br.CSC", "[NaH]"])
def test_the_mass_stays(smiles: str) -> None:
    molecule = Chem.MolFromSmiles(smiles)
    assert Descriptors.MolWt(ionic_form(molecule)) == pytest.approx(Descriptors.MolWt(molecule))


@pytest.mark.parametrize("smiles", ["CC(=O)OCC", "[Mg]", "CC(=O)[O-].[Na+]", "C[Si](C)(C)C"])
def test_what_has_no_such_line_stays_as_drawn(smiles: str) -> None:
    molecule = Chem.MolFromSmiles(smiles)
    assert Chem.MolToSmiles(ionic_form(molecule)) == Chem.MolToSmiles(molecule)
