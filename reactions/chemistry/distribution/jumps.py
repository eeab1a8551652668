"""Compositions of a birth chain after short exposures: a mixture over numbers of jumps.

Uniformisation: if every level is left at the fastest rate Λ, but a cage at level k then goes up
only with probability r_k/Λ and stays otherwise, the number of jumps within τ is Poisson and

    x(τ) = Σ_n e^(−Λτ) (Λτ)^n / n! · e_0 Pⁿ

All terms are positive, so nothing cancels. Each of the n jumps adds about 2⁻⁵³, so the error stays
below 2·10⁻¹⁴ within the longest exposure (Grassmann, Comput. Oper. Res. 1977, 4, 47; from memory).
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from reactions.chemistry.distribution.closed_forms import (
    normalised,
    poisson_terms,
    poisson_terms_needed,
)
from reactions.chemistry.distribution.roots import falling_root

FloatArray = NDArray[np.float64]

# Λτ; beyond it squaring takes fewer steps.
_MOST_JUMPS = 64.0


class JumpChain:
    """The chain of given rates r_0 … r_K, started with all cages at level 0, for short exposures.

    ``longest`` is the longest exposure it serves.
    """

    def __init__(self, chain_rates: FloatArray) -> None:
        self._fastest = float(chain_rates.max())
        self._go = chain_rates[:-1] / self._fastest
        self._stay = 1.0 - chain_rates / self._fastest
        # Row n is the composition after n jumps; rows are added as they are asked for.
        self._after = np.eye(1, len(chain_rates))
        self.longest = _MOST_JUMPS / self._fastest

    def compositions(self, exposures: FloatArray) -> FloatArray:
        """Return x(τ) for each exposure τ from 0 to ``longest``, shape (exposures, K+1)."""
        jumps = self._fastest * exposures
        rows = self._after_each(poisson_terms_needed(float(jumps.max(initial=0))))
        return normalised(poisson_terms(jumps, len(rows) - 1) @ rows)

    def crossing(self, function: Callable[[FloatArray], float]) -> float | None:
        """Return the exposure at which ``function`` of the composition turns negative.

        It must be positive at first, and once negative stay so. None where it is still positive
        after the longest exposure.
        """

        def at(exposure: float) -> float:
            return function(self.compositions(np.array([exposure]))[0])

        return falling_root(at, self.longest / _MOST_JUMPS, self.longest)

    def _after_each(self, most: int) -> FloatArray:
        """Return the compositions after 0 … ``most`` jumps."""
        known = len(self._after)
        if known <= most:
            grown = np.empty((most + 1, len(self._stay)))
            grown[:known] = self._after
            for before, row in zip(grown[known - 1 :], grown[known:], strict=False):
                np.multiply(before, self._stay, out=row)
                row[1:] += before[:-1] * self._go
            self._after = grown
        return self._after[: most + 1]
