"""Where the cages went."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.mass_balance import IsolatedFraction, mass_balance
from reactions.chemistry.planning import PlanRequest, plan

C60 = 720.66
MALONATE = 158.153  # C7H10O4, diethyl malonate less two hydrogens; derived from atomic weights


def balance(*fractions, charged_mmol=0.5, **fields):
    fields = {"cage_g_per_mol": C60, "addition_g_per_mol": MALONATE, "target_level": 1, **fields}
    return mass_balance(charged_mmol, fractions, **fields)


def test_a_mono_adduct_beside_recovered_cage_by_hand():
    # 0.5 mmol charged; 144.132 mg of C60 are 0.2 mmol, 131.822 mg of C67H10O4 (878.813) 0.15 mmol.
    found = balance(IsolatedFraction(144.132, 0), IsolatedFraction(131.822, 1))

    assert found.recovered_mmol == pytest.approx(0.2, rel=1e-5)
    assert found.level_mmol[1] == pytest.approx(0.15, rel=1e-5)
    assert found.yield_on_charged == pytest.approx(0.30, rel=1e-5)
    assert found.yield_on_consumed == pytest.approx(0.50, rel=1e-5)
    assert found.accounted_for == pytest.approx(0.70, rel=1e-5)
    assert found.unidentified_mg == 0


def test_a_published_balance_of_cage_mono_and_bis():
    # Han, Collins, Andrew, Bulović, Swager, Adv. Funct. Mater. 2013, 23, 3061 (read): from 200 mg
    # of C60, 111.1 mg (40.1 %) of mono C80H36, 85.1 mg (24.1 %) of bis C100H72, 35.5 mg (17.7 %)
    # of C60. C20H36 adds 276.508 (derived from atomic weights).
    found = balance(
        IsolatedFraction(35.5, 0),
        IsolatedFraction(111.1, 1),
        IsolatedFraction(85.1, 2),
        charged_mmol=200 / C60,
        addition_g_per_mol=276.508,
    )
    of_charged = {level: mmol / found.charged_mmol for level, mmol in found.level_mmol.items()}

    assert of_charged == pytest.approx({0: 0.177, 1: 0.401, 2: 0.241}, abs=6e-4)
    assert found.yield_on_charged == pytest.approx(0.401, abs=6e-4)
    assert found.yield_on_consumed == pytest.approx(0.401 / (1 - 0.177), abs=1e-3)


def test_fractions_of_one_level_count_together_each_by_its_purity():
    apart = balance(IsolatedFraction(60, 1, 0.9), IsolatedFraction(40, 1, 0.5))
    together = balance(IsolatedFraction(74, 1))

    assert apart.level_mmol[1] == pytest.approx(together.level_mmol[1])


def test_what_has_no_level_has_no_amount():
    found = balance(IsolatedFraction(10, None), IsolatedFraction(5, None, 0.5))

    assert found.level_mmol == {}
    assert found.unidentified_mg == 15
    assert found.accounted_for == 0
    assert found.yield_on_charged is found.yield_on_consumed is None


def test_without_the_mass_of_an_addition_only_cage_is_counted():
    found = balance(IsolatedFraction(72.066, 0), IsolatedFraction(50, 1), addition_g_per_mol=None)

    assert found.recovered_mmol == pytest.approx(0.1)
    assert found.unidentified_mg == 50
    assert found.yield_on_charged is None


def test_a_target_that_was_not_found_beside_others_has_a_yield_of_nothing():
    assert balance(IsolatedFraction(50, 2)).yield_on_charged == 0


@pytest.mark.parametrize("target_level", [None, 0])
def test_without_a_target_there_is_no_yield(target_level):
    found = balance(IsolatedFraction(50, 1), target_level=target_level)

    assert found.yield_on_charged is found.yield_on_consumed is None
    assert found.level_mmol[1] > 0


def test_without_recovered_cage_all_of_it_was_consumed():
    found = balance(IsolatedFraction(131.822, 1))

    assert found.recovered_mmol == 0
    assert found.yield_on_consumed == found.yield_on_charged > 0


def test_all_cage_recovered_leaves_no_yield_on_consumed():
    found = balance(IsolatedFraction(0.5 * C60, 0), IsolatedFraction(0, 1))

    assert found.recovered_mmol == found.charged_mmol
    assert (found.yield_on_charged, found.yield_on_consumed) == (0, None)


def test_more_recovered_than_charged_leaves_no_yield_on_consumed():
    found = balance(IsolatedFraction(400, 0), IsolatedFraction(1, 1))

    assert found.accounted_for > 1
    assert found.yield_on_consumed is None
    assert found.yield_on_charged > 0


@pytest.mark.parametrize("charged", [0.0, -1.0, float("nan")])
def test_without_cage_there_is_no_balance(charged):
    with pytest.raises(ValueError, match="No cage was charged; give the mass of cage"):
        balance(charged_mmol=charged)


@given(
    attenuation=st.floats(0.05, 2),
    level=st.integers(1, 6),
    cage_mass_mg=st.floats(1, 1e5),
    addition=st.floats(1, 1000),
)
def test_all_of_a_planned_mixture_isolated_is_the_plan(attenuation, level, cage_mass_mg, addition):
    planned = plan(
        PlanRequest(
            model="sequential",
            attenuation=attenuation,
            objective={"kind": "most_of_level", "level": level},
            cage_mass_mg=cage_mass_mg,
            addition_mass_g_per_mol=addition,
        )
    )
    found = balance(
        *(IsolatedFraction(mass, place) for place, mass in enumerate(planned.level_mass_mg)),
        charged_mmol=cage_mass_mg / C60,
        addition_g_per_mol=addition,
        target_level=level,
    )

    assert found.accounted_for == pytest.approx(1, rel=1e-9)
    assert found.yield_on_charged == pytest.approx(planned.mole_fraction[level], rel=1e-9)
    assert found.yield_on_consumed == pytest.approx(
        planned.mole_fraction[level] / planned.conversion, rel=1e-8
    )
