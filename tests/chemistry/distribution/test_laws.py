"""Laws that every composition model obeys, whatever it is asked from."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from reactions.chemistry.distribution import CompositionModel, DistributionRequest, distribution

factors = st.one_of(st.just(0.0), st.floats(1e-3, 3.0))


@st.composite
def models(draw):
    """A model with its fields, of any kind."""
    kind = draw(st.sampled_from(["independent_sites", "poisson", "sequential"]))
    sites = draw(st.integers(1, 80))
    fields = {"model": kind, "sites": sites}
    if kind == "sequential":
        fields["attenuation"] = draw(
            st.one_of(factors, st.lists(factors, min_size=1, max_size=min(8, sites)))
        )
    return fields


exposures = st.one_of(st.just(0.0), st.floats(-6, 6).map(lambda power: 10.0**power))


def composed(fields, **given_by):
    return distribution(DistributionRequest(**fields, **given_by))


def model_of(fields):
    attenuation = fields.get("attenuation", 1.0)
    if isinstance(attenuation, list):
        attenuation = tuple(attenuation)
    return CompositionModel(fields["model"], fields["sites"], attenuation)


@given(fields=models(), exposure=exposures)
def test_fractions_are_none_negative_and_sum_to_one(fields, exposure):
    found = composed(fields, exposure=exposure).mole_fraction

    assert len(found) == fields["sites"] + 1
    assert min(found) >= 0
    assert abs(math.fsum(found) - 1) < 1e-13


@given(fields=models(), exposure=exposures)
def test_the_uptake_is_the_mean_number_of_additions(fields, exposure):
    assume(fields["model"] != "poisson" or exposure <= fields["sites"] / 8)
    found = composed(fields, exposure=exposure)

    mean = math.fsum(level * share for level, share in enumerate(found.mole_fraction))
    # Cut at N, the Poisson law lacks what its tail counts beyond N.
    tail = found.mole_fraction[-1] * 2 if fields["model"] == "poisson" else 0.0
    assert mean == pytest.approx(found.uptake, rel=1e-12, abs=1e-15 + tail)


@given(fields=models(), share=st.floats(0, 1))
def test_an_uptake_comes_back_from_its_composition(fields, share):
    assume(fields["model"] != "poisson")
    uptake = share * model_of(fields).highest_level

    found = composed(fields, uptake=uptake)

    mean = math.fsum(level * part for level, part in enumerate(found.mole_fraction))
    assert mean == pytest.approx(uptake, rel=1e-12, abs=1e-300)
    assert found.uptake == uptake


@given(fields=models(), exposure=exposures)
def test_an_exposure_comes_back_from_its_uptake(fields, exposure):
    assume(fields["model"] != "poisson")
    forward = composed(fields, exposure=exposure)
    back = composed(fields, uptake=forward.uptake)
    if back.exposure is None:
        # So near the end that the uptake is that of the end.
        assert forward.uptake == model_of(fields).highest_level
        return
    # Where the uptake hardly rises it can't tell the exposure; weigh by how fast it does.
    rises = float(model_of(fields).chain_rates @ np.array(forward.mole_fraction))
    assert abs(back.exposure - exposure) * rises <= 1e-13 * fields["sites"]
    assert back.mole_fraction == pytest.approx(forward.mole_fraction, abs=1e-12)


@given(fields=models(), exposure=exposures, longer=st.floats(1.001, 1e3))
def test_longer_converts_more(fields, exposure, longer):
    before, after = (
        composed(fields, exposure=exposure),
        composed(fields, exposure=exposure * longer),
    )

    assert after.unreacted <= before.unreacted
    assert after.uptake >= before.uptake * (1 - 1e-14)
    if before.mono_to_multi is not None and after.mono_to_multi is not None:
        assert after.mono_to_multi <= before.mono_to_multi * (1 + 1e-12)


@given(fields=models(), exposure=exposures)
def test_unreacted_falls_as_the_first_addition_says(fields, exposure):
    sites = fields["sites"]
    # e^(−τ) whatever follows, because r_0 = 1.
    assert composed(fields, exposure=exposure).unreacted == pytest.approx(
        math.exp(-exposure), rel=1e-12, abs=1e-15
    ), sites


@given(fields=models(), chosen=st.lists(exposures, min_size=1, max_size=6))
def test_many_exposures_at_once_are_each_alone(fields, chosen):
    model = model_of(fields)

    together = model.compositions(np.array(chosen))

    for row, exposure in zip(together, chosen, strict=True):
        assert row == pytest.approx(model.composition(exposure), abs=1e-15)
