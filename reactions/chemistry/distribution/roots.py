"""Where a function crosses zero, by Brent's method as SciPy has it."""

from __future__ import annotations

from collections.abc import Callable

FINEST = 2.0**-50  # relatively; the finest that Brent's method takes
_NOTHING = 1e-300


def root_between(
    function: Callable[[float], float],
    lower: float,
    upper: float,
    *,
    absolute: float,
    relative: float,
) -> float:
    """Return the root of ``function`` between ``lower`` and ``upper``, where its signs differ.

    It is exact to ``absolute`` + ``relative`` · root. Raises ``ValueError`` where the signs agree.
    """
    # This takes as long to load as all the rest of the chemistry, and no start of a server should
    # wait for it.
    from scipy.optimize import brentq

    return float(brentq(function, lower, upper, xtol=absolute, rtol=relative))


def falling_root(function: Callable[[float], float], guess: float, last: float) -> float | None:
    """Return where ``function``, positive at first, turns negative; None if not up to ``last``.

    Once negative it must stay so. It is bracketed by doubling or halving from ``guess`` (above 0).
    """
    upper = min(guess, last)
    while function(upper) > 0:
        if upper == last:
            return None
        upper = min(2 * upper, last)
    lower = upper / 2
    while function(lower) <= 0:
        upper, lower = lower, lower / 2
    return root_between(function, lower, upper, absolute=_NOTHING, relative=FINEST)
