"""Where a function crosses zero, by Brent's method as SciPy has it."""

from __future__ import annotations

from collections.abc import Callable


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
