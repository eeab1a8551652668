"""Composition against equivalents, as it is drawn."""

from __future__ import annotations

import math
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.distribution import DistributionRequest, distribution
from reactions.chemistry.planning import CurveRequest, curve


@st.composite
def requests(draw):
    kind = draw(st.sampled_from(["independent_sites", "poisson", "sequential"]))
    fields = {
        "model": kind,
        "sites": draw(st.integers(1, 40)),
        "reagent_efficiency": draw(st.floats(0.05, 1)),
        "points": draw(st.integers(2, 40)),
        "highest_level_shown": draw(st.integers(1, 50)),
        "highest_equivalents": draw(st.one_of(st.none(), st.floats(0.01, 100))),
    }
    if kind == "sequential":
        fields["attenuation"] = draw(st.one_of(st.just(0.0), st.floats(1e-3, 3)))
    return CurveRequest(**fields)


@given(request=requests())
def test_every_point_is_the_model_at_its_equivalents(request):
    found = curve(request)
    shown = min(request.highest_level_shown, request.sites) + 1

    assert len(found.equivalents) == len(found.mole_fraction) == request.points
    for equivalents, row, higher in zip(
        found.equivalents, found.mole_fraction, found.higher, strict=True
    ):
        there = distribution(
            DistributionRequest(
                **request.model_dump(include={"model", "sites", "attenuation"}),
                equivalents=equivalents,
                reagent_efficiency=request.reagent_efficiency,
            )
        ).mole_fraction
        assert row == pytest.approx(there[:shown], abs=1e-11)
        assert higher == pytest.approx(math.fsum(there[shown:]), abs=1e-11)
        assert math.fsum(row) + higher == pytest.approx(1, abs=1e-13)


@given(request=requests())
def test_it_runs_from_no_reagent_upward_without_gaps(request):
    found = curve(request).equivalents

    assert found[0] == 0.0
    steps = [after - before for before, after in pairwise(found)]
    assert min(steps) > 0
    # No step much wider than it would be if evenly spaced.
    assert max(steps) <= 12 * found[-1] / len(steps)


def test_it_ends_where_it_is_told_to():
    found = curve(
        CurveRequest(
            model="sequential", attenuation=0.5, highest_equivalents=4.0, reagent_efficiency=0.8
        )
    )

    assert found.equivalents[-1] == pytest.approx(4.0, rel=1e-12)


def test_untold_it_shows_three_additions_per_cage():
    found = curve(CurveRequest(model="independent_sites", reagent_efficiency=0.5))

    assert found.equivalents[-1] == 6.0
    assert len(found.equivalents) == 121


def test_it_stops_short_of_the_last_level():
    found = curve(
        CurveRequest(model="independent_sites", sites=2, highest_equivalents=50, points=11)
    )

    assert found.equivalents[-1] == pytest.approx(2, rel=1e-5)
    assert found.mole_fraction[-1][2] == pytest.approx(1, abs=1e-5)
