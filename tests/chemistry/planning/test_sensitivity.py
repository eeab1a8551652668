"""What a little less or more reagent would give."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from reactions.chemistry.distribution import DistributionRequest, distribution
from reactions.chemistry.planning import PlanRequest, plan


@given(
    attenuation=st.floats(0.01, 3),
    efficiency=st.floats(0.1, 1),
    objective=st.sampled_from(
        [
            {"kind": "most_of_level", "level": 1},
            {"kind": "mono_to_multi", "ratio": 5},
            {"kind": "uptake", "value": 2.0},
            {"kind": "band", "lowest": 2, "highest": 3},
        ]
    ),
)
def test_the_neighbours_are_the_model_at_their_equivalents(attenuation, efficiency, objective):
    model = {"model": "sequential", "sites": 30, "attenuation": attenuation}

    found = plan(PlanRequest(**model, objective=objective, reagent_efficiency=efficiency))

    less, more = found.sensitivity
    assert less.equivalents == pytest.approx(0.95 * found.equivalents)
    assert more.equivalents == pytest.approx(1.05 * found.equivalents)
    for neighbour in (less, more):
        there = distribution(
            DistributionRequest(
                **model, equivalents=neighbour.equivalents, reagent_efficiency=efficiency
            )
        )
        assert neighbour.mole_fraction == pytest.approx(there.mole_fraction, abs=1e-12)
        if objective["kind"] == "most_of_level":
            assert neighbour.mole_fraction[1] < found.objective_value
    # Equal where the exposure is so long that all three are too small for a number.
    assert less.mole_fraction[0] >= found.unreacted >= more.mole_fraction[0]


def test_beyond_the_last_level_nothing_more_happens():
    found = plan(
        PlanRequest(
            model="independent_sites", sites=30, objective={"kind": "uptake", "value": 29.9}
        )
    )

    more = found.sensitivity[1]
    assert more.equivalents == pytest.approx(1.05 * 29.9)
    assert more.mole_fraction[30] == 1.0
