"""Compositions and plans against scipy's distributions, its LSODA integrator and known figures."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from scipy.optimize import minimize_scalar
from scipy.stats import binom, poisson

from reactions.chemistry.distribution import DistributionRequest, distribution
from reactions.chemistry.planning import PlanRequest, plan


def composed(**fields):
    return np.array(distribution(DistributionRequest(**fields)).mole_fraction)


@pytest.mark.parametrize("sites", [1, 2, 3, 30, 45, 120, 200])
@pytest.mark.parametrize("share", [0.0, 1e-9, 1e-3, 1 / 30, 0.2, 0.5, 0.9, 1 - 1e-9, 1.0])
def test_independent_sites_are_scipys_binomial(sites, share):
    found = composed(model="independent_sites", sites=sites, uptake=share * sites)

    # scipy's own error is about 1e-13 for many sites.
    assert found == pytest.approx(binom.pmf(np.arange(sites + 1), sites, share), abs=1e-12)


@pytest.mark.parametrize("sites", [1, 2, 30, 120, 200])
@pytest.mark.parametrize("share", [0.0, 1e-9, 1e-3, 0.1, 0.5, 1.0])
def test_poisson_is_scipys_with_its_tail_in_the_last_level(sites, share):
    mean = share * sites
    found = composed(model="poisson", sites=sites, uptake=mean)

    assert found[:-1] == pytest.approx(poisson.pmf(np.arange(sites), mean), abs=1e-12)
    assert found[-1] == pytest.approx(poisson.sf(sites - 1, mean), abs=1e-12)


def integrated(sites, attenuation, exposure):
    """Return dx_k/dτ = r_(k−1) x_(k−1) − r_k x_k as scipy integrates it by LSODA."""
    factors = attenuation if isinstance(attenuation, list) else [attenuation] * sites
    factors = np.concatenate((factors, np.ones(sites - len(factors))))
    levels = np.arange(sites + 1.0)
    rates = (sites - levels) / sites * np.concatenate(([1.0], np.cumprod(factors)))

    def slope(_exposure, shares):
        change = -rates * shares
        change[1:] += rates[:-1] * shares[:-1]
        return change

    start = np.eye(1, sites + 1).ravel()
    done = solve_ivp(slope, (0, exposure), start, method="LSODA", rtol=1e-12, atol=1e-15)
    assert done.success
    return done.y[:, -1]


@pytest.mark.parametrize(
    ("sites", "attenuation"),
    [
        (30, 0.0), (30, 1e-3), (30, 0.5), (30, 0.97), (30, 1.0), (30, 1.5), (30, [0.4, 0.8, 1.2]),
        (30, [2.0, 0.05]), (6, 3.0), (45, 0.7), (200, 0.97),
    ],
)  # fmt: skip
@pytest.mark.parametrize("exposure", [0.1, 1.0, 5.0, 40.0, 300.0])
def test_the_sequential_chain_is_what_lsoda_integrates(sites, attenuation, exposure):
    found = composed(model="sequential", sites=sites, attenuation=attenuation, exposure=exposure)

    # LSODA keeps its tolerance in each step, and steps add up.
    assert found == pytest.approx(integrated(sites, attenuation, exposure), abs=2e-10)


# Equal reactivity of the 30 [6,6] bonds, all reagent used: percent of cages with 0, 1, 2 …
# additions at so many equivalents. Derived beforehand, apart from this code, as Binomial(30, E/30).
BY_EQUIVALENTS = {
    0.5: (60.4, 30.7, 7.5, 1.2, 0.1, 0.0, 0.0, 0.0),
    1.0: (36.2, 37.4, 18.7, 6.0, 1.4, 0.3, 0.0, 0.0),
    1.5: (21.5, 33.9, 25.9, 12.7, 4.5, 1.2, 0.3, 0.0),
    2.0: (12.6, 27.0, 28.0, 18.7, 9.0, 3.3, 1.0, 0.2),
    3.0: (4.2, 14.1, 22.8, 23.6, 17.7, 10.2, 4.7, 1.8),
}


@pytest.mark.parametrize(("equivalents", "percent"), BY_EQUIVALENTS.items())
def test_the_statistical_mixture_at_whole_and_half_equivalents(equivalents, percent):
    found = composed(
        model="independent_sites", sites=30, equivalents=equivalents, reagent_efficiency=1.0
    )

    assert tuple(np.round(100 * found[:8], 1)) == percent


def test_the_statistical_best_of_mono_adduct():
    # (29/30)^29 = 37.4 % at one addition per cage: derived from the binomial law.
    found = plan(
        PlanRequest(
            model="independent_sites", sites=30, objective={"kind": "most_of_level", "level": 1}
        )
    )

    assert found.uptake == 1.0
    assert found.objective_value == pytest.approx((29 / 30) ** 29, abs=1e-15)


@pytest.mark.parametrize("level", [1, 2, 3, 6])
@pytest.mark.parametrize("attenuation", [0.3, 0.85, 1.2])
def test_the_most_of_a_level_is_what_scipy_finds_along_lsoda(level, attenuation):
    found = plan(
        PlanRequest(
            model="sequential",
            sites=30,
            attenuation=attenuation,
            objective={"kind": "most_of_level", "level": level},
        )
    )
    # Brent's search in the logarithm of the exposure, around the plan's by a factor of 4.
    middle = np.log(found.exposure)
    best = minimize_scalar(
        lambda log: -integrated(30, attenuation, np.exp(log))[level],
        bounds=(middle - np.log(4), middle + np.log(4)),
        method="bounded",
        options={"xatol": 1e-6},
    )

    assert found.objective_value == pytest.approx(-best.fun, abs=1e-9)
    assert np.log(found.exposure) == pytest.approx(best.x, abs=1e-4)
