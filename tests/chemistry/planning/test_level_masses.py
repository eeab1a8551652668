"""Masses expected of each level: what is charged as cage and what is added comes out again."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.planning import PlanRequest, plan

MONO = {"kind": "most_of_level", "level": 1}


def planned(**fields):
    return plan(PlanRequest(**{"model": "independent_sites", "objective": MONO, **fields}))


@given(
    sites=st.integers(2, 60),
    attenuation=st.floats(0.1, 2),
    cage_mass_mg=st.floats(1, 1e5),
    purity=st.floats(0.5, 1),
    addition=st.floats(1, 1000),
)
def test_nothing_is_lost(sites, attenuation, cage_mass_mg, purity, addition):
    found = planned(
        model="sequential",
        sites=sites,
        attenuation=attenuation,
        cage_mass_mg=cage_mass_mg,
        cage_purity=purity,
        addition_mass_g_per_mol=addition,
    )

    # Charged cage, and for each of its mmol the uptake times the mass of one addition; C60 is
    # 60 × 12.011 (IUPAC).
    charged = cage_mass_mg * purity
    expected = charged + charged / 720.66 * found.uptake * addition
    assert math.fsum(found.level_mass_mg) == pytest.approx(expected, rel=1e-12)
    assert min(found.level_mass_mg) >= 0
    assert len(found.level_mass_mg) == sites + 1


def test_a_malonate_mono_adduct_by_hand():
    # 0.5 g of C60 (720.66) and diethyl malonate less two hydrogens, C7H10O4, 158.153: derived from
    # IUPAC atomic weights. 0.69381 mmol, of which (29/30)^29 becomes mono-adduct of 878.813.
    found = planned(cage="C60", cage_mass_mg=500, addition_mass_g_per_mol=158.153)

    assert found.level_mass_mg[1] == pytest.approx(0.693808 * 0.3741326 * 878.813, rel=1e-5)
    assert found.unreacted_cage_mg == pytest.approx(500 * (29 / 30) ** 30, rel=1e-12)
    assert found.level_mass_mg[0] == pytest.approx(found.unreacted_cage_mg, rel=1e-14)


@pytest.mark.parametrize(
    ("cage", "g_per_mol"),
    [("C60", 720.66), ("C70", 840.77), ("C76", 912.836), ("C78", 936.858), ("C84", 1008.924)],
)
def test_the_cage_counts_by_its_own_mass(cage, g_per_mol):
    # n × 12.011, IUPAC's conventional atomic weight of carbon.
    found = planned(cage=cage, cage_mass_mg=g_per_mol, addition_mass_g_per_mol=100)

    # One mmol of cage, and one addition of 100 mg on average.
    assert sum(found.level_mass_mg) == pytest.approx(g_per_mol + 100, rel=1e-9)


def test_without_a_mass_there_are_no_masses():
    found = planned(addition_mass_g_per_mol=158.153)

    assert found.level_mass_mg is None
    assert found.unreacted_cage_mg is None


def test_what_is_left_over_needs_only_the_cage():
    found = planned(cage_mass_mg=100, cage_purity=0.9)

    assert found.level_mass_mg is None
    assert found.unreacted_cage_mg == pytest.approx(90 * (29 / 30) ** 30, rel=1e-12)
