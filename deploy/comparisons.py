"""Our work and a reference's side by side: times in milliseconds, and the ratio of the two.

Each comparison is a pair of functions that answer the same question; the best of several rounds
counts. A comparison without a reference prints our time alone.
"""

from __future__ import annotations

import argparse
import sys
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
from scipy.integrate import solve_ivp
from scipy.stats import binom, poisson

sys.path.insert(0, str(Path(__file__).parents[1]))

from reactions.chemistry.amounts import AmountsRequest, amounts
from reactions.chemistry.distribution import (
    CompositionModel,
    DistributionRequest,
    distribution,
)
from reactions.chemistry.planning import CurveRequest, PlanRequest, curve, plan

_ROUNDS = 5
_LEAST_S = 0.05
Work = Callable[[], object]


def _chain(sites: int, attenuation: float, exposure: float) -> Work:
    return lambda: CompositionModel("sequential", sites, attenuation).composition(exposure)


def _lsoda(sites: int, attenuation: float, exposure: float) -> Work:
    levels = np.arange(sites + 1.0)
    rates = (sites - levels) / sites * np.power(attenuation, levels)
    start = np.eye(1, sites + 1).ravel()

    def slope(_time: float, shares: np.ndarray) -> np.ndarray:
        change: np.ndarray = -rates * shares
        change[1:] += rates[:-1] * shares[:-1]
        return change

    return lambda: solve_ivp(slope, (0, exposure), start, method="LSODA", rtol=1e-12, atol=1e-15)


def _plan(model: str) -> Work:
    request = PlanRequest(
        model=model,
        objective={"kind": "mono_to_multi", "ratio": 5},
        attenuation=0.85 if model == "sequential" else 1.0,
        reagent_efficiency=0.8,
    )
    return lambda: plan(request)


def _plan_and_curve() -> Work:
    drawn = CurveRequest(model="sequential", attenuation=0.85, reagent_efficiency=0.8)
    planned = _plan("sequential")
    return lambda: (planned(), curve(drawn))


def _composition(model: str, sites: int) -> Work:
    request = DistributionRequest(model=model, sites=sites, uptake=1.5)
    return lambda: distribution(request)


def _amounts() -> Work:
    line = {"smiles": "CCOC(=O)C(Br)C(=O)OCC", "equivalents": 1.1}
    request = AmountsRequest(
        cage_mass_mg=500,
        solvent="toluene",
        lines=[{**line, "name": f"reagent {place}"} for place in range(5)],
    )
    return lambda: amounts(request)


COMPARISONS: dict[str, tuple[Work, Work | None, str]] = {
    "chain-30": (_chain(30, 0.85, 2.5), _lsoda(30, 0.85, 2.5), "scipy LSODA at rtol 1e-12"),
    "chain-200": (_chain(200, 0.97, 2.5), _lsoda(200, 0.97, 2.5), "scipy LSODA at rtol 1e-12"),
    "chain-200-long": (
        _chain(200, 0.97, 2500),
        _lsoda(200, 0.97, 2500),
        "scipy LSODA at rtol 1e-12",
    ),
    "binomial-30": (
        _composition("independent_sites", 30),
        lambda: binom.pmf(np.arange(31), 30, 1.5 / 30),
        "scipy.stats.binom",
    ),
    "binomial-200": (
        _composition("independent_sites", 200),
        lambda: binom.pmf(np.arange(201), 200, 1.5 / 200),
        "scipy.stats.binom",
    ),
    "poisson-200": (
        _composition("poisson", 200),
        lambda: poisson.pmf(np.arange(201), 1.5),
        "scipy.stats.poisson",
    ),
    "plan-independent": (_plan("independent_sites"), None, ""),
    "plan-sequential": (_plan("sequential"), None, ""),
    "plan-and-curve": (_plan_and_curve(), None, ""),
    "amounts-5-lines": (_amounts(), None, ""),
}


def best_ms(work: Work) -> float:
    """Return the best time of one call in ms, over rounds that each last long enough to be read."""
    best = float("inf")
    for _ in range(_ROUNDS):
        calls, start = 0, time.perf_counter()
        while (spent := time.perf_counter() - start) < _LEAST_S or calls == 0:
            work()
            calls += 1
        best = min(best, 1000 * spent / calls)
    return best


def main() -> None:
    """Print a line for each comparison asked for."""
    parser = argparse.ArgumentParser(prog="deploy/benchmark", description=__doc__)
    parser.add_argument("names", nargs="*", help=f"of {', '.join(COMPARISONS)}; all without")
    names = parser.parse_args().names or list(COMPARISONS)
    print(f"{'comparison':<18} {'ours/ms':>10} {'theirs/ms':>10} {'theirs/ours':>12}  reference")
    for name in names:
        if name not in COMPARISONS:
            parser.error(f"there is no comparison “{name}”; choose of {', '.join(COMPARISONS)}")
        ours, theirs, reference = COMPARISONS[name]
        mine = best_ms(ours)
        other = best_ms(theirs) if theirs else None
        ratio = "" if other is None else f"{other / mine:12.1f}"
        shown = "" if other is None else f"{other:10.3f}"
        print(f"{name:<18} {mine:10.3f} {shown:>10} {ratio:>12}  {reference}")


if __name__ == "__main__":
    main()
