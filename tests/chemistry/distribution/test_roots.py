"""Roots to the last figures, however ill-tempered the function."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from reactions.chemistry.distribution.roots import FINEST, falling_root, root_between

ROOTS = st.floats(-12, 6).map(lambda power: 10.0**power)
# Each falls through 0 at 1; some steeply, some flat, one by a jump.
FALLING = {
    "line": lambda x: 1 - x,
    "power": lambda x: 1 - x**3,
    "bounded": lambda x: (1 - x) / (1 + x),
    "exponential": lambda x: math.exp(-3 * x) - math.exp(-3),
    "flat": lambda x: (1 - x) ** 3,
    "jump": lambda x: 1.0 if x < 1 else -1.0,
}


def counted(function):
    def counting(x):
        counting.calls += 1
        return function(x)

    counting.calls = 0
    return counting


def finest(function, lower, upper):
    return root_between(function, lower, upper, absolute=1e-300, relative=FINEST)


@pytest.mark.parametrize("kind", FALLING)
@given(root=ROOTS, below=st.floats(0.01, 0.999), above=st.floats(1.001, 100))
def test_the_root_is_found_to_the_last_figures(kind, root, below, above):
    found = finest(lambda x: FALLING[kind](x / root), below * root, above * root)

    # Near the root a flat or an exponential function can't tell one place from the next.
    slack = {"flat": 1e-5, "exponential": 1e-14}.get(kind, 4 * FINEST)
    assert found == pytest.approx(root, rel=slack)


@pytest.mark.parametrize("kind", ["line", "power", "bounded", "exponential"])
@given(root=ROOTS)
def test_it_looks_no_oftener_than_scipy_does(kind, root):
    ours, theirs = (counted(lambda x: FALLING[kind](x / root)) for _ in range(2))

    finest(ours, root / 3, root * 1.5)
    brentq(theirs, root / 3, root * 1.5, xtol=1e-300, rtol=FINEST)

    assert ours.calls <= theirs.calls + 4


@given(root=ROOTS, kind=st.sampled_from(sorted(FALLING)))
def test_it_ends_soon_whatever_the_function(root, kind):
    function = counted(lambda x: FALLING[kind](x / root))

    finest(function, root / 2, root * 2)

    assert function.calls < 100


def test_a_root_at_an_end_is_that_end():
    assert finest(lambda x: 1 - x, 1.0, 3.0) == 1.0
    assert finest(lambda x: 1 - x, 0.5, 1.0) == 1.0


def test_a_function_of_one_sign_has_no_root():
    with pytest.raises(ValueError, match="one sign from 1 to 2"):
        finest(lambda x: x, 1.0, 2.0)


@given(root=ROOTS, guess=ROOTS)
def test_a_falling_function_is_bracketed_from_any_guess(root, guess):
    found = falling_root(lambda x: FALLING["bounded"](x / root), guess, 1e9)

    assert found == pytest.approx(root, rel=4 * FINEST)


@given(root=ROOTS, guess=ROOTS)
def test_what_does_not_fall_in_time_is_told(root, guess):
    assert falling_root(lambda x: 1 - x / root, guess, root / 2) is None
