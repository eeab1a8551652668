"""Where a function crosses zero."""

from __future__ import annotations

from collections.abc import Callable

FINEST = 2.0**-50  # relatively; four times what a float tells apart
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

    It is exact to ``absolute`` + ``relative`` · root, relative being ``FINEST`` or more. Raises
    ``ValueError`` where the signs agree. Inverse quadratic interpolation where three values allow
    it, else halving: Chandrupatla, Adv. Eng. Softw. 1997, 28, 145 (from memory). SciPy has such
    root finders too, but loading it would take a hundred times as long as a whole plan.
    """
    newest, other = lower, upper
    at_newest, at_other = function(lower), function(upper)
    if at_newest * at_other > 0:
        raise ValueError(f"The function has one sign from {lower:g} to {upper:g}.")
    share = 0.5
    while at_newest and at_other:
        trial = newest + share * (other - newest)
        at_trial = function(trial)
        if (at_trial > 0) == (at_newest > 0):
            former, at_former = newest, at_newest
        else:
            former, at_former = other, at_other
            other, at_other = newest, at_newest
        newest, at_newest = trial, at_trial
        width = abs(other - newest)
        tolerance = absolute + relative * min(abs(newest), abs(other))
        if width <= 2 * tolerance:
            break
        share = _next_share((newest, other, former), (at_newest, at_other, at_former))
        share = min(max(share, tolerance / width), 1 - tolerance / width)
    return newest if abs(at_newest) < abs(at_other) else other


def _next_share(places: tuple[float, float, float], values: tuple[float, float, float]) -> float:
    """Return how far from the first place to the second to look next."""
    (a, b, c), (at_a, at_b, at_c) = places, values
    along, up = (a - b) / (c - b), (at_a - at_b) / (at_c - at_b)
    if not (up**2 < along and (1 - up) ** 2 < 1 - along):
        return 0.5
    first = at_a / (at_b - at_a) * at_c / (at_b - at_c)
    return first + (c - a) / (b - a) * at_a / (at_c - at_a) * at_b / (at_c - at_b)


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
