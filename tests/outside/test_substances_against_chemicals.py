"""Masses, structures and flammability of the substance table against the chemicals package."""

from __future__ import annotations

import chemicals
import pytest
from chemicals.dippr import EQ105
from chemicals.identifiers import search_chemical
from rdkit import Chem
from rdkit.Chem import Descriptors

from reactions.chemistry.cautions.assess import rules
from reactions.chemistry.ionic_form import ionic_form
from reactions.chemistry.substances import substance, substances

# Drawn otherwise there: borane without its hydrogens, sulfur as one atom, alanate as five ions.
DRAWN_OTHERWISE = {"borane_tetrahydrofuran", "sulfur", "lithium_aluminium_hydride"}
NOT_IN_THE_PACKAGE = {
    "trimethylsilyldiazomethane",
    "ethylene_bis_triphenylphosphine_platinum",
    "tungsten_hexacarbonyl",
}
WITH_STRUCTURE = sorted(
    {row.key for row in substances().values() if row.smiles} - DRAWN_OTHERWISE - NOT_IN_THE_PACKAGE
)
_KELVIN = 273.15


@pytest.mark.parametrize("key", WITH_STRUCTURE)
def test_the_molar_mass_is_that_of_the_cas_number(key: str) -> None:
    row = substance(key)
    assert row.smiles is not None
    molar_mass = Descriptors.MolWt(Chem.MolFromSmiles(row.smiles))
    assert molar_mass == pytest.approx(chemicals.MW(row.cas_number), abs=0.05)


@pytest.mark.parametrize("key", sorted(set(WITH_STRUCTURE) - {"vaska_complex"}))
def test_the_structure_is_that_of_the_cas_number(key: str) -> None:
    row = substance(key)
    theirs = search_chemical(row.cas_number)
    forms = [
        Chem.MolToInchiKey(ionic_form(Chem.MolFromSmiles(smiles)))
        for smiles in (row.smiles, theirs.smiles)
    ]
    assert forms[0].split("-")[0] == forms[1].split("-")[0]


# The check digit of a CAS Registry Number: digits before it, from the right, weighted 1, 2, 3 …,
# summed modulo 10 (CAS, "Check Digit Verification of CAS Registry Numbers"; from memory).
@pytest.mark.parametrize("key", substances())
def test_the_cas_number_has_its_check_digit(key: str) -> None:
    first, second, check = substance(key).cas_number.split("-")
    digits = [int(digit) for digit in reversed(first + second)]
    assert sum(place * digit for place, digit in enumerate(digits, start=1)) % 10 == int(check)


def flammable_class(flash_c: float, boiling_c: float | None) -> str | None:
    """Flammable liquids, Globally Harmonized System, table 2.6.1 (from memory)."""
    if flash_c < 23:
        return "H224" if boiling_c is not None and boiling_c <= 35 else "H225"
    return "H226" if flash_c <= 60 else None


def with_a_flash_point() -> list[str]:
    # Formaldehyde's flash point is that of its solution; the gas itself isn't in the table.
    return sorted(
        row.key
        for row in substances().values()
        if chemicals.T_flash(row.cas_number) is not None and row.key != "formaldehyde"
    )


@pytest.mark.parametrize("key", with_a_flash_point())
def test_a_liquid_is_classed_flammable_as_its_flash_point_says(key: str) -> None:
    row = substance(key)
    flash_c = chemicals.T_flash(row.cas_number) - _KELVIN
    boiling_k = chemicals.Tb(row.cas_number)
    stated = {"H224", "H225", "H226"} & set(row.hazard_statements)
    wanted = flammable_class(flash_c, boiling_k and boiling_k - _KELVIN)
    assert stated == ({wanted} if wanted else set())


def test_enough_liquids_have_a_flash_point_to_compare() -> None:
    assert len(with_a_flash_point()) > 40


def test_carbon_disulfide_lights_as_its_caution_says() -> None:
    (rule,) = [rule for rule in rules() if rule.key == "carbon_disulfide"]
    flash_c = round(chemicals.T_flash("75-15-0") - _KELVIN)
    autoignition_c = round(chemicals.T_autoignition("75-15-0") - _KELVIN)
    assert f"flash point −{-flash_c} °C" in rule.text
    assert f"autoignition {autoignition_c} °C" in rule.text


def published_densities(cas_number: str) -> list[float]:
    """Return densities at 20 °C in g/mL by the correlations that the package tabulates.

    Perry's Chemical Engineers' Handbook, 8th edition, table 2-32 (DIPPR 105), and VDI Heat Atlas,
    2nd edition, D3.1.
    """
    temperature_k = 293.15
    found = []
    perry = chemicals.volume.rho_data_Perry_8E_105_l
    if cas_number in perry.index:
        row = perry.loc[cas_number]
        mol_per_m3 = EQ105(temperature_k, row.C1, row.C2, row.C3, row.C4)
        found.append(mol_per_m3 * chemicals.MW(cas_number) / 1e6)
    vdi = chemicals.volume.rho_data_VDI_PPDS_2
    if cas_number in vdi.index:
        row = vdi.loc[cas_number]
        tau = 1 - temperature_k / row.Tc
        kg_per_m3 = row.rhoc + (
            row.A * tau**0.35 + row.B * tau ** (2 / 3) + row.C * tau + row.D * tau ** (4 / 3)
        )
        found.append(kg_per_m3 / 1000)
    return found


NEAT_LIQUIDS = [
    row.key
    for row in substances().values()
    if row.density_g_per_ml is not None and published_densities(row.cas_number)
]


@pytest.mark.parametrize("key", NEAT_LIQUIDS)
def test_the_density_is_that_of_the_neat_liquid(key: str) -> None:
    row = substance(key)
    # The table gives some at 25 °C, where a liquid is up to 1 % lighter.
    for density in published_densities(row.cas_number):
        assert row.density_g_per_ml == pytest.approx(density, rel=0.012)


def test_enough_densities_are_compared() -> None:
    assert len(NEAT_LIQUIDS) > 35
