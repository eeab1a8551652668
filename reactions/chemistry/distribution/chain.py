"""The sequential model: a chain of additions, each at its own rate.

    dx_k/dτ = r_{k−1} x_{k−1} − r_k x_k,   r_k = (N−k)/N · Π_{j<k} f_j,   x_0(0) = 1

A pure-birth process; the equation and its rates are the project's own model of attenuation, with
the independent-sites law as its case f = 1.

The chain is linear and bidiagonal, so x(τ) is the first row of exp(Aτ). Rates may differ by many
powers of ten and may coincide, which rules out integration in steps and divided differences. Short
exposures are counted in jumps (``jumps``). Beyond them uniformisation for a short time h is
followed by squaring: every entry is a sum of products of positive numbers, so nothing cancels, and
each diagonal entry is set to its exact exp(−r_k t) at every squaring. An entry d places off the
diagonal then has a relative error of about d·s·2⁻⁵² at most after s squarings, and of a few times
2⁻⁵² as measured against exact arithmetic (Moler, Van Loan, SIAM Rev. 2003, 45, 3, on scaling and
squaring; Grassmann, Comput. Oper. Res. 1977, 4, 47, on uniformisation; both from memory).
"""

from __future__ import annotations

import itertools
import math
from collections import deque
from collections.abc import Callable, Iterator

import numpy as np
from numpy.typing import NDArray

from reactions.chemistry.distribution.closed_forms import normalised
from reactions.chemistry.distribution.jumps import JumpChain
from reactions.chemistry.distribution.roots import FINEST, root_between

FloatArray = NDArray[np.float64]

# The longest exposure told from an endless one; levels left more slowly than in it are never left.
LONGEST_EXPOSURE = 1e200
_SLOWEST = 1e-190
# The density of arriving at a level is at most r_0 = 1, so a level left at a rate of 10¹⁸ never
# holds more than 10⁻¹⁸; a faster one would only lengthen the computation.
_FASTEST = 1e18
# Entries below this are dropped: numbers near the smallest a float can hold are slow to multiply.
# At most 10²²¹ short times make the longest exposure, so what is dropped stays below 10⁻²⁴.
_NOTHING = 1e-250
# Probability of more than 8 additions within h is below (2⁻¹⁰)⁹/9!, nothing beside 2⁻⁵³.
_SHORT = 2.0**-10
_TERMS = 8
_DIGITS = 53
# Squares of the first places are kept; beyond them lie exposures that no chemist waits for.
_PLACES_KEPT = 64


def rates(sites: int, attenuation: float | tuple[float, ...]) -> FloatArray:
    """Return r_0 … r_N for N = ``sites``, in units of the first addition's rate (r_0 = 1, r_N = 0).

    One attenuation is the factor that each addition brings; a list holds the factor of the first,
    second … addition present, and additions beyond its end bring no further factor.
    """
    present = np.arange(sites + 1)
    with np.errstate(over="ignore", under="ignore"):
        if isinstance(attenuation, tuple):
            factors = np.ones(sites)
            factors[: len(attenuation)] = attenuation[:sites]
            products = np.concatenate(([1.0], np.cumprod(factors)))
        else:
            products = np.power(float(attenuation), present)
        found = (sites - present) / sites * np.minimum(products, 1e300)
    found[found < _SLOWEST] = 0.0
    limited: FloatArray = np.minimum(found, _FASTEST)
    return limited


class BirthChain:
    """The chain of given rates r_0 … r_K (only r_K = 0), started with all cages at level 0."""

    def __init__(self, chain_rates: FloatArray) -> None:
        self._rates = chain_rates
        self._fastest = float(chain_rates.max())
        self._place_of_one = -math.floor(math.log2(_SHORT / self._fastest))
        self._short = 2.0**-self._place_of_one
        self._jumps = JumpChain(chain_rates)
        self._kept: list[FloatArray] = []

    def compositions(self, exposures: FloatArray) -> FloatArray:
        """Return x(τ) for each exposure τ from 0 to 10²⁰⁰, one row each, shape (points, K+1)."""
        found = np.empty((len(exposures), len(self._rates)))
        is_short = exposures <= self._jumps.longest
        if is_short.any():
            found[is_short] = self._jumps.compositions(exposures[is_short])
        if not is_short.all():
            found[~is_short] = self._after_long(exposures[~is_short])
        return found

    def crossing(self, function: Callable[[FloatArray], float]) -> float:
        """Return the exposure at which ``function`` of the composition turns negative.

        It must be positive at first, and once negative stay so. Infinity where it never turns.
        """
        early = self._jumps.crossing(function)
        return self._late_crossing(function) if early is None else early

    def _after_long(self, exposures: FloatArray) -> FloatArray:
        """Return x(τ) where an exposure is a rest below h, and h·2^place for each binary digit."""
        rows = np.zeros((len(exposures), len(self._rates)))
        rows[:, 0] = 1.0
        rows = self._advanced(rows, np.fmod(exposures, self._short))
        fractions, exponents = np.frexp(exposures)
        digits = (fractions * 2.0**_DIGITS).astype(np.int64)
        last_digit = exponents - _DIGITS + self._place_of_one
        places = max(0, int(exponents.max(initial=0)) + self._place_of_one)
        for place, power in zip(range(places), self._powers(), strict=False):
            digit = place - last_digit
            is_set = (digits >> np.clip(digit, 0, _DIGITS)) & 1 == 1
            chosen = is_set & (digit >= 0)
            if chosen.any():
                rows[chosen] = rows[chosen] @ power
        return normalised(rows)

    def _late_crossing(self, function: Callable[[FloatArray], float]) -> float:
        """Return a crossing after the first h, or infinity.

        Digit after digit of the exposure is found, so that each costs one product.
        """
        passed: deque[FloatArray] = deque(maxlen=_DIGITS + 1)
        place = 0
        for place, power in enumerate(self._powers()):
            if function(normalised(power[:1])[0]) <= 0:
                break
            if place - self._place_of_one > math.log2(LONGEST_EXPOSURE):
                return math.inf
            passed.append(power)
        row, place = passed.pop()[:1], place - 1
        exposure = self._short * 2.0**place
        while passed:
            place -= 1
            trial = row @ passed.pop()
            if function(normalised(trial)[0]) > 0:
                row, exposure = trial, exposure + self._short * 2.0**place
        if place > 0:
            return exposure
        return exposure + self._rest(function, row, exposure)

    def _rest(
        self, function: Callable[[FloatArray], float], row: FloatArray, exposure: float
    ) -> float:
        """Return the time from ``row`` to the crossing, at most h."""
        at = self._along(function, row)
        if at(self._short) >= 0:
            return self._short
        return root_between(at, 0.0, self._short, absolute=FINEST * exposure, relative=FINEST)

    def _along(
        self, function: Callable[[FloatArray], float], row: FloatArray
    ) -> Callable[[float], float]:
        def at(duration: float) -> float:
            return function(normalised(self._advanced(row, np.array([duration])))[0])

        return at

    def _powers(self) -> Iterator[FloatArray]:
        """Yield exp(A·h·2^place) for place 0, 1, 2 … without end."""
        if not self._kept:
            self._kept.append(self._first())
        power = self._kept[0]
        for place in itertools.count():
            if place < len(self._kept):
                power = self._kept[place]
            else:
                power = self._cleaned(power @ power, self._short * 2.0**place)
                if place == len(self._kept) < _PLACES_KEPT:
                    self._kept.append(power)
            yield power

    def _first(self) -> FloatArray:
        identity = np.eye(len(self._rates))
        matrix = self._advanced(identity, np.full(len(self._rates), self._short))
        return self._cleaned(matrix, self._short)

    def _cleaned(self, matrix: FloatArray, duration: float) -> FloatArray:
        """Return the matrix with its diagonal exact, and without vanishing entries."""
        matrix[matrix < _NOTHING] = 0.0
        with np.errstate(under="ignore", over="ignore"):
            np.fill_diagonal(matrix, np.exp(-self._rates * duration))
        return matrix

    def _advanced(self, rows: FloatArray, durations: FloatArray) -> FloatArray:
        """Return each row after a short time (at most h): e^(−Λt) Σ (Λt)^n/n! · row · Pⁿ."""
        stay = 1.0 - self._rates / self._fastest
        go = self._rates[:-1] / self._fastest
        scaled = (self._fastest * durations)[:, np.newaxis]
        power, total = rows, rows.copy()
        weight = np.ones_like(scaled)
        for order in range(1, _TERMS + 1):
            moved = power * stay
            moved[:, 1:] += power[:, :-1] * go
            power = moved
            weight = weight * scaled / order
            total += weight * power
        advanced: FloatArray = np.exp(-scaled) * total
        return advanced
