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

from reactions.chemistry.distribution.chain import (
    LONGEST_EXPOSURE,
    BirthChain,
    FloatArray,
    rates,
)
from reactions.chemistry.distribution.closed_forms import binomial, poisson
from reactions.chemistry.distribution.roots import falling_root

ModelName = Literal["independent_sites", "poisson", "sequential"]
# At first m = τ, for r_0 = 1; what later additions add is less than a float tells up to here.
_BEGINNING = 1e-20


@dataclass(frozen=True)
class CompositionModel:
    """A composition model over levels 0 … ``sites`` (1 to 200).

    ``attenuation`` belongs to the sequential model; see ``chain.rates``.
    """

    name: ModelName
    sites: int
    attenuation: float | tuple[float, ...] = 1.0
    chain_rates: FloatArray = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        """Work out the rates of the chain."""
        if self.name == "poisson":
            chain_rates = np.append(np.ones(self.sites), 0.0)
        else:
            chain_rates = rates(self.sites, self.attenuation if self.name == "sequential" else 1.0)
        object.__setattr__(self, "chain_rates", chain_rates)

    @property
    def highest_level(self) -> int:
        """Return the highest level that can be reached: the first that is never left."""
        return int(np.argmax(self.chain_rates == 0.0))

    @property
    def has_equal_sites(self) -> bool:
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
        """Return x_0 … x_N for each exposure (0 to infinity), shape (exposures, N+1)."""
        if self.name == "poisson":
            return poisson(self.sites, exposures)
        if self.has_equal_sites:
            per_site = exposures / self.sites
            return binomial(self.sites, -np.expm1(-per_site), np.exp(-per_site))
        rows = np.zeros((len(exposures), self.sites + 1))
        endless = exposures > LONGEST_EXPOSURE
        rows[endless, self.highest_level] = 1.0
        if not endless.all():
            reached = self._chain.compositions(exposures[~endless])
            rows[~endless, : self.highest_level + 1] = reached
        return rows

    def uptake(self, exposure: float) -> float:
        """Return the mean number of additions per cage at one exposure."""
        if self.name == "poisson":
            return exposure
        if self.has_equal_sites:
            return -self.sites * math.expm1(-exposure / self.sites)
        return mean_level(self.composition(exposure))

    def exposure_for_uptake(self, uptake: float) -> float:
        """Return the exposure at which the uptake (0 or more) is reached.

        Infinity for an uptake of all levels that can be reached (for Poisson there is no such end).
        Raises ValueError for an uptake above that.
        """
        if self.name == "poisson":
            return uptake
        if uptake > self.highest_level:
            raise ValueError(
                f"An uptake of {uptake:g} can't be reached; {self.highest_level} is the most that "
                "these sites and this attenuation allow."
            )
        if uptake == self.highest_level:
            return math.inf
        if self.has_equal_sites:
            return -self.sites * math.log1p(-uptake / self.sites)
        if uptake < _BEGINNING:
            return uptake
        return self._chain.crossing(lambda composition: uptake - mean_level(composition))

    def composition_at_uptake(self, uptake: float) -> FloatArray:
        """Return x_0 … x_N at one uptake; raises ValueError above what can be reached."""
        if self.has_equal_sites and uptake <= self.sites:
            row: FloatArray = self._at_site_shares(np.array([uptake]))[0]
            return row
        return self.composition(self.exposure_for_uptake(uptake))

    def along_uptakes(self, highest: float, count: int) -> tuple[FloatArray, FloatArray]:
        """Return ``count`` uptakes from 0 to ``highest`` and their compositions.

        Evenly spaced, but for the chain, where steps of exposure are taken: inverting the uptake
        at every point would cost a search each, and the points lie on the same curve.
        """
        uptakes = np.linspace(0.0, highest, count)
        if self.name == "poisson":
            return uptakes, poisson(self.sites, uptakes)
        if self.has_equal_sites:
            return uptakes, self._at_site_shares(uptakes)
        last = self.exposure_for_uptake(highest)
        # Dense at the start, where the uptake rises fast; sparse along the tail of a slow step.
        exposures = np.expm1(np.linspace(0.0, math.log1p(last), count))
        exposures[-1] = last
        compositions = self.compositions(exposures)
        return compositions @ np.arange(self.sites + 1.0), compositions

    def crossing(self, function: Callable[[FloatArray], float]) -> float:
        """Return the exposure at which ``function`` of the composition turns negative.

        It must be positive at first, and once negative stay so. Infinity where it never turns.
        """
        if not (self.has_equal_sites or self.name == "poisson"):
            return self._chain.crossing(function)

        def at(exposure: float) -> float:
            return function(self.composition(exposure))

        found = falling_root(at, 1.0, LONGEST_EXPOSURE)
        return math.inf if found is None else found

    @cached_property
    def _chain(self) -> BirthChain:
        return BirthChain(self.chain_rates[: self.highest_level + 1])

    def _at_site_shares(self, uptakes: FloatArray) -> FloatArray:
        return binomial(self.sites, uptakes / self.sites, (self.sites - uptakes) / self.sites)


def mean_level(composition: FloatArray) -> float:
    """Return Σ k·x_k."""
    return float(np.arange(len(composition)) @ composition)


def multi_share(composition: FloatArray) -> float:
    """Return Σ_{k≥2} x_k, summed rather than taken from 1, so that small shares keep figures."""
    return float(composition[2:].sum())


def mono_to_multi(composition: FloatArray) -> float | None:
    """Return x_1 / Σ_{k≥2} x_k; None when nothing, or less than a float can tell, adds twice."""
    multi = multi_share(composition)
    if multi == 0:
        return None
    ratio = float(composition[1]) / multi
    return ratio if math.isfinite(ratio) else None
