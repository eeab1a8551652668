"""Solvents against measured data in the chemicals package, solubilities against the literature."""

from __future__ import annotations

from statistics import median

import chemicals
import pytest
from chemicals import volume
from chemicals.dippr import EQ105

from reactions.chemistry.masses import molar_mass_g_per_mol
from reactions.chemistry.solvents import (
    published_solubilities,
    solubility_mg_per_ml,
    solvents,
)

_KELVIN = 273.15
# The two standards for explosive atmospheres, and an open collection of data sheets' figures; the
# package's other columns hold estimates too.
MEASURED = ("IEC 60079-20-1 (2010)", "NFPA 497 (2008)", "WIKIDATA")
# Group contributions, not data.
ESTIMATES = {"JOBACK"}
# Mixtures of isomers have no boiling point of their own.
MIXTURES = {"xylenes", "decalins"}


def measured(look_up, methods, cas_number):
    """Return what has been measured for a substance, in °C."""
    return [
        look_up(cas_number, method=method) - _KELVIN
        for method in methods(cas_number)
        if method in MEASURED
    ]


FLASH = {
    name: found
    for name, row in solvents().items()
    if (found := measured(chemicals.T_flash, chemicals.safety.T_flash_methods, row.cas_number))
}
IGNITION = {
    name: found
    for name, row in solvents().items()
    if (
        found := measured(
            chemicals.T_autoignition, chemicals.safety.T_autoignition_methods, row.cas_number
        )
    )
}


@pytest.mark.parametrize("name", FLASH)
def test_no_measured_flash_point_is_lower(name):
    stated = solvents()[name].flash_point_c
    assert stated is not None
    assert stated <= min(FLASH[name]) + 0.61
    assert stated >= min(FLASH[name]) - 9.1  # anisole, after data sheets


@pytest.mark.parametrize("name", IGNITION)
def test_no_measured_autoignition_is_lower(name):
    stated = solvents()[name].autoignition_c
    assert stated is not None
    assert stated <= min(IGNITION[name]) + 0.61
    assert stated >= min(IGNITION[name]) - 15  # naphthalene, after another handbook


def test_enough_solvents_are_compared():
    assert len(FLASH) >= 32
    assert len(IGNITION) >= 29


@pytest.mark.parametrize("name", sorted(set(solvents()) - MIXTURES))
def test_the_boiling_point_is_that_of_most_collections(name):
    cas_number = solvents()[name].cas_number
    found = [
        chemicals.Tb(cas_number, method=method) - _KELVIN
        for method in chemicals.phase_change.Tb_methods(cas_number)
        if method not in ESTIMATES
    ]
    assert solvents()[name].boiling_point_c == pytest.approx(median(found), abs=2.6)


# Stated in the source column: the melt, the liquid near its boiling point.
NOT_AT_ROOM_TEMPERATURE = {"naphthalene": 373.15, "ammonia": 239.8}


def perry_g_per_ml(cas_number, smiles, kelvin):
    """Return a density by Perry's Chemical Engineers' Handbook, 8th ed.; None out of range."""
    row = volume.rho_data_Perry_8E_105_l.loc[cas_number]
    if not row.Tmin <= kelvin <= row.Tmax:
        return None
    molar = EQ105(kelvin, *(float(row[name]) for name in ("C1", "C2", "C3", "C4")))  # mol/m³
    return molar * molar_mass_g_per_mol(smiles) / 1e6


def vdi_g_per_ml(cas_number, kelvin):
    """Return a density by the VDI Heat Atlas, equation PPDS2."""
    row = volume.rho_data_VDI_PPDS_2.loc[cas_number]
    below = 1 - kelvin / row.Tc
    powers = ((row.A, 0.35), (row.B, 2 / 3), (row.C, 1.0), (row.D, 4 / 3))
    return (row.rhoc + sum(factor * below**power for factor, power in powers)) / 1000


def handbook_densities():
    """Return by solvent the densities of both handbooks at 20 and 25 °C, or where else stated."""
    volume._load_rho_data()
    found = {}
    for name, row in solvents().items():
        for kelvin in {NOT_AT_ROOM_TEMPERATURE.get(name, at) for at in (293.15, 298.15)}:
            if row.cas_number in volume.rho_data_Perry_8E_105_l.index:
                density = perry_g_per_ml(row.cas_number, row.smiles, kelvin)
                found.setdefault(name, []).extend([density] if density else [])
            if row.cas_number in volume.rho_data_VDI_PPDS_2.index:
                found.setdefault(name, []).append(vdi_g_per_ml(row.cas_number, kelvin))
    return {name: densities for name, densities in found.items() if densities}


DENSITIES = handbook_densities()


@pytest.mark.parametrize("name", DENSITIES)
def test_the_density_is_that_of_two_handbooks_at_20_to_25_degrees(name):
    stated = solvents()[name].density_g_per_ml

    assert stated >= min(DENSITIES[name]) - 0.005
    assert stated <= max(DENSITIES[name]) + 0.005


def test_enough_densities_are_compared():
    assert len(DENSITIES) >= 36


# Ruoff, Tse, Malhotra, Lorents, J. Phys. Chem. 1993, 97, 3379; read in its abstract.
@pytest.mark.parametrize(
    ("name", "mg_per_ml"),
    [("carbon disulfide", 7.9), ("toluene", 2.8), ("hexane", 0.04), ("1-chloronaphthalene", 50)],
)
def test_c60_in_the_solvents_of_the_abstract(name, mg_per_ml):
    assert solubility_mg_per_ml("C60", name) == mg_per_ml


# The same abstract has 0.01 mg/mL for methanol, a supplier's table (read) has 0.00004.
def test_c60_in_methanol_has_two_published_values():
    assert [row.mg_per_ml for row in published_solubilities("C60", "methanol")] == [4e-5, 0.01]


# From memory, after the table of the same paper.
@pytest.mark.parametrize(
    ("name", "mg_per_ml"),
    [
        ("1-methylnaphthalene", 33), ("1,2-dichlorobenzene", 27), ("tetralin", 16),
        ("1,2,4-trichlorobenzene", 8.5), ("chlorobenzene", 7.0), ("anisole", 5.6),
        ("xylenes", 5.2), ("bromobenzene", 3.3), ("benzene", 1.7), ("mesitylene", 1.5),
        ("pyridine", 0.89), ("N-methylpyrrolidone", 0.89), ("nitrobenzene", 0.80),
        ("benzonitrile", 0.41), ("carbon tetrachloride", 0.32), ("dichloromethane", 0.26),
        ("chloroform", 0.16), ("cyclohexane", 0.036), ("acetone", 0.001), ("ethanol", 0.001),
        ("decalins", 4.6), ("tribromomethane", 5.6), ("quinoline", 7.2),
        ("1,2,4-trimethylbenzene", 17.9), ("1,2-dibromobenzene", 13.8), ("acetonitrile", 0),
        ("tetrahydrofuran", 0),
    ],
)  # fmt: skip
def test_c60_in_the_solvents_of_the_table(name, mg_per_ml):
    published = [row.mg_per_ml for row in published_solubilities("C60", name)]
    assert mg_per_ml in published
    assert min(published) >= 0.6 * mg_per_ml  # sources agree but for a few tens of percent


# From memory, after Sivaraman et al., Fullerene Sci. Technol. 1994, 2, 233.
@pytest.mark.parametrize(
    ("name", "mg_per_ml"),
    [
        ("1,2-dichlorobenzene", 36.2), ("carbon disulfide", 9.9), ("p-xylene", 4.0),
        ("toluene", 1.4), ("benzene", 1.3), ("carbon tetrachloride", 0.12),
        ("dichloromethane", 0.08), ("cyclohexane", 0.08), ("hexane", 0.013),
    ],
)  # fmt: skip
def test_c70_in_the_solvents_of_its_table(name, mg_per_ml):
    assert solubility_mg_per_ml("C70", name) == pytest.approx(mg_per_ml, rel=0.02)
