"""The three composition models behind one face: composition, uptake and exposure of each other.

Each is a birth chain with rates r_k in units of the first addition's rate: independent sites
r_k = (N−k)/N, Poisson r_k = 1, sequential r_k = (N−k)/N · Π f_j. Exposure τ runs from 0 to
infinity; uptake m rises with it from 0 to the highest level that can be reached.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field
from functools import cached_property
from typing import Literal

import numpy as np
from scipy.optimize import brentq

from reactions.chemistry.distribution.chain import BirthChain, FloatArray, rates
from reactions.chemistry.distribution.closed_forms import binomial, poisson

ModelName = Literal["independent_sites", "poisson", "sequential"]
_FINEST = 4 * np.finfo(np.float64).eps
_LONGEST_EXPOSURE = 1e300


@dataclass(frozen=True)
class CompositionModel:
    """A composition model over levels 0 … ``sites``."""

    name: ModelName
    sites: int
    attenuation: float | tuple[float, ...] = 1.0
    chain_rates: FloatArray = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        """Work out the rates of the chain."""
        if self.name == "poisson":
            chain_rates = np.append(np.ones(self.sites), 0.0)
        elif self.name == "sequential":
            chain_rates = rates(self.sites, self.attenuation)
        else:
            chain_rates = rates(self.sites, 1.0)
        object.__setattr__(self, "chain_rates", chain_rates)

    @property
    def highest_level(self) -> int:
        """Return the highest level that can be reached: the first that is never left."""
        return int(np.argmax(self.chain_rates == 0.0))

    @cached_property
    def _chain(self) -> BirthChain:
        return BirthChain(self.chain_rates)

    @property
    def _has_equal_sites(self) -> bool:
        """Tell whether the sites are independent, where the binomial law is exact."""
        factors = self.attenuation if isinstance(self.attenuation, tuple) else (self.attenuation,)
        return self.name == "independent_sites" or (
            self.name == "sequential" and all(factor == 1.0 for factor in factors)
        )

    def composition(self, exposure: float) -> FloatArray:
        """Return x_0 … x_N at one exposure; infinity gives the composition in the end."""
        row: FloatArray = self.compositions(np.array([exposure]))[0]
        return row

    def compositions(self, exposures: FloatArray) -> FloatArray:
        """Return one row x_0 … x_N for each exposure (0 to infinity)."""
        if self.name == "poisson":
            return np.array([poisson(self.sites, exposure) for exposure in exposures])
        if self._has_equal_sites:
            return np.array(
                [binomial(self.sites, _odds(exposure / self.sites)) for exposure in exposures]
            )
        rows = np.zeros((len(exposures), self.sites + 1))
        endless = exposures > _LONGEST_EXPOSURE
        rows[endless, self.highest_level] = 1.0
        if not endless.all():
            rows[~endless] = self._chain.compositions(exposures[~endless])
        return rows

    def uptake(self, exposure: float) -> float:
        """Return the mean number of additions per cage at one exposure."""
        if self.name == "poisson":
            return exposure
        if self._has_equal_sites:
            return -self.sites * math.expm1(-exposure / self.sites)
        return mean_level(self.composition(exposure))

    def exposure_for_uptake(self, uptake: float) -> float:
        """Return the exposure at which the uptake is reached.

        Infinity for an uptake of all levels that can be reached (for Poisson there is no such end).
        Raises ValueError for an uptake above that.
        """
        if self.name == "poisson":
            return uptake
        if uptake > self.highest_level:
            raise ValueError(
                f"An uptake of {uptake:g} can't be reached: {self.highest_level} "
                "is the most that these sites and this attenuation allow."
            )
        if uptake == self.highest_level:
            return math.inf
        if self._has_equal_sites:
            return -self.sites * math.log1p(-uptake / self.sites)
        return self._exposure_on_the_chain(uptake)

    def composition_at_uptake(self, uptake: float) -> FloatArray:
        """Return x_0 … x_N at one uptake; raises ValueError above what can be reached."""
        if self._has_equal_sites and uptake <= self.sites:
            left = self.sites - uptake
            return binomial(self.sites, uptake / left if left > 0 else math.inf)
        return self.composition(self.exposure_for_uptake(uptake))

    def _exposure_on_the_chain(self, uptake: float) -> float:
        if uptake == 0:
            return 0.0
        upper = 1.0
        while self.uptake(upper) < uptake:
            upper *= 2.0
            if upper > _LONGEST_EXPOSURE:
                return math.inf
        while self.uptake(upper / 2) >= uptake and upper > 1e-300:
            upper /= 2.0
        return solve(lambda exposure: self.uptake(exposure) - uptake, upper / 2, upper)


def solve(function: Callable[[float], float], lower: float, upper: float) -> float:
    """Return the root of ``function`` between two bounds of opposite sign, to the last figures."""
    return float(brentq(function, lower, upper, xtol=1e-300, rtol=_FINEST, maxiter=500))


def mean_level(composition: FloatArray) -> float:
    """Return Σ k·x_k."""
    return float(np.arange(len(composition)) @ composition)


def multi_share(composition: FloatArray) -> float:
    """Return Σ_{k≥2} x_k, summed rather than taken from 1, so that small shares keep figures."""
    return float(composition[2:].sum())


def mono_to_multi(composition: FloatArray) -> float | None:
    """Return x_1 / Σ_{k≥2} x_k; None when nothing has two additions."""
    multi = multi_share(composition)
    return float(composition[1]) / multi if multi > 0 else None


def _odds(exposure_per_site: float) -> float:
    """Return p/(1−p) for p = 1 − e^(−τ/N)."""
    return math.inf if exposure_per_site > 700 else math.expm1(exposure_per_site)
