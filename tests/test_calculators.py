"""The interface of the calculators, key by key, and their numbers against worked cases."""

import contextlib
import json
import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from reactions.calculators import (
    CALCULATORS,
    UnknownCalculatorError,
    compute,
    compute_each,
)
from reactions.errors import WHOLE, FieldErrors

DISTRIBUTION_KEYS = {"mole_fraction", "uptake", "exposure", "unreacted", "mono_to_multi"}
MONO_TO_MULTI = {"kind": "mono_to_multi", "ratio": 5}
# Invented amounts.
AMOUNTS = {
    "cage": "C60",
    "cage_mass_mg": 500,
    "cage_purity": 0.99,
    "solvent": "toluene",
    "solvent_volume_ml": None,
    "lines": [
        {
            "name": "diethyl bromomalonate",
            "role": "reagent",
            "smiles": "CCOC(=O)C(Br)C(=O)OCC",
            "equivalents": 1.1,
            "purity": 0.97,
            "density_g_per_ml": None,
            "molarity_mol_per_l": None,
        }
    ],
}
# IUPAC abridged standard atomic weights (2021): C 12.011, H 1.008, Br 79.904, O 15.999.
C60_G_PER_MOL = 60 * 12.011
BROMOMALONATE_G_PER_MOL = 7 * 12.011 + 11 * 1.008 + 79.904 + 4 * 15.999


def errors_of(name, data):
    with pytest.raises(FieldErrors) as refusal:
        compute(name, data)
    return refusal.value.messages


def test_the_calculators_are_those_of_the_interface():
    assert {"distribution", "plan", "curve", "amounts"} <= set(CALCULATORS)
    assert all(row.name == name and row.summary for name, row in CALCULATORS.items())


@pytest.mark.parametrize(
    "model_fields",
    [
        {"model": "independent_sites", "sites": 30},
        {"model": "poisson", "sites": 30},
        {"model": "sequential", "sites": 30, "attenuation": 0.5},
        {"model": "sequential", "sites": 30, "attenuation": [0.5, 0.25]},
    ],
)
@pytest.mark.parametrize(
    "given_by",
    [{"uptake": 1.0}, {"exposure": 1.5}, {"equivalents": 1.25, "reagent_efficiency": 0.8}],
)
def test_distribution_takes_and_gives_what_the_interface_says(model_fields, given_by):
    answer = compute("distribution", {**model_fields, **given_by})
    assert set(answer) == DISTRIBUTION_KEYS
    fractions = answer["mole_fraction"]
    assert len(fractions) == 31
    assert answer["unreacted"] == fractions[0]
    assert answer["mono_to_multi"] == pytest.approx(fractions[1] / sum(fractions[2:]))
    assert (answer["exposure"] is None) == (model_fields["model"] == "poisson")
    if "exposure" not in given_by:
        assert answer["uptake"] == pytest.approx(1.0, rel=1e-12)


def test_the_composition_of_independent_sites_is_the_binomial():
    answer = compute("distribution", {"model": "independent_sites", "sites": 30, "uptake": 2.0})
    expected = stats.binom.pmf(np.arange(31), 30, 2 / 30)  # scipy.stats
    assert answer["mole_fraction"] == pytest.approx(expected, abs=1e-12)
    # p = 1 − exp(−τ/N): derived.
    assert answer["exposure"] == pytest.approx(-30 * math.log1p(-2 / 30), rel=1e-12)


def test_nothing_twice_gives_no_ratio():
    answer = compute("distribution", {"model": "independent_sites", "sites": 1, "uptake": 0.5})
    assert answer["mono_to_multi"] is None


@pytest.mark.parametrize(
    "objective",
    [
        {"kind": "most_of_level", "level": 1},
        MONO_TO_MULTI,
        {"kind": "uptake", "value": 2.0},
        {"kind": "band", "lowest": 2, "highest": 3},
    ],
    ids=lambda objective: objective["kind"],
)
def test_plan_takes_and_gives_what_the_interface_says(objective):
    asked = {
        "model": "independent_sites",
        "sites": 30,
        "objective": objective,
        "reagent_efficiency": 0.8,
    }
    answer = compute("plan", asked)
    wanted = {"equivalents", "level_mass_mg", "objective_value", "sensitivity"}
    assert DISTRIBUTION_KEYS | wanted <= set(answer)
    assert answer["equivalents"] == pytest.approx(answer["uptake"] / 0.8, rel=1e-12)
    less, more = answer["sensitivity"]
    assert set(less) == {"equivalents", "mole_fraction"}
    assert less["equivalents"] == pytest.approx(0.95 * answer["equivalents"], rel=1e-12)
    assert more["equivalents"] == pytest.approx(1.05 * answer["equivalents"], rel=1e-12)
    assert sum(more["mole_fraction"]) == pytest.approx(1, abs=1e-12)


def test_the_best_mono_yield_is_met_at_one_addition_per_cage():
    # The maximum of k = 1 of a binomial with N = 30 is (29/30)^29, at p = 1/30: derived.
    objective = {"kind": "most_of_level", "level": 1}
    answer = compute("plan", {"model": "independent_sites", "objective": objective})
    assert answer["uptake"] == pytest.approx(1, rel=1e-6)
    assert answer["objective_value"] == pytest.approx((29 / 30) ** 29, rel=1e-12)


def test_the_ratio_asked_for_is_met():
    answer = compute("plan", {"model": "independent_sites", "objective": MONO_TO_MULTI})
    assert answer["mono_to_multi"] == pytest.approx(5, rel=1e-9)
    assert answer["objective_value"] == pytest.approx(5, rel=1e-9)


def test_masses_come_with_the_masses_given():
    asked = {"model": "independent_sites", "objective": MONO_TO_MULTI}
    assert compute("plan", asked)["level_mass_mg"] is None
    masses = {"cage": "C60", "cage_mass_mg": 500, "addition_mass_g_per_mol": 158.154}
    answer = compute("plan", {**asked, **masses})
    # x_k · n(cage) · (M(cage) + k · M(addition)): derived.
    expected = [
        share * 500 / C60_G_PER_MOL * (C60_G_PER_MOL + level * 158.154)
        for level, share in enumerate(answer["mole_fraction"])
    ]
    assert answer["level_mass_mg"] == pytest.approx(expected, rel=1e-9)


def test_amounts_takes_and_gives_what_the_interface_says():
    answer = compute("amounts", AMOUNTS)
    assert {"cage_mmol", "lines", "limiting", "solvent_volume_ml", "warnings"} <= set(answer)
    line = answer["lines"][0]
    wanted = {"molar_mass_g_per_mol", "mmol", "mass_mg", "volume_ml"}
    assert set(AMOUNTS["lines"][0]) | wanted <= set(line)
    # Derived from atomic weights.
    cage_mmol = 500 * 0.99 / C60_G_PER_MOL
    assert answer["cage_mmol"] == pytest.approx(cage_mmol, rel=1e-6)
    assert line["molar_mass_g_per_mol"] == pytest.approx(BROMOMALONATE_G_PER_MOL, rel=1e-5)
    assert line["mmol"] == pytest.approx(1.1 * cage_mmol, rel=1e-6)
    assert line["mass_mg"] == pytest.approx(
        1.1 * cage_mmol * BROMOMALONATE_G_PER_MOL / 0.97, rel=1e-5
    )
    assert line["volume_ml"] is None
    assert answer["limiting"] == "C60"
    # At 25 °C toluene dissolves 2.8 mg/mL of C60: Ruoff, Tse, Malhotra and Lorents,
    # J. Phys. Chem. 97 (1993) 3379, abstract.
    assert answer["solvent_volume_ml"] >= 500 / 2.8


def test_molar_mass_gives_formula_and_masses():
    answer = compute("molar_mass", {"smiles": "CCOC(=O)C(Br)C(=O)OCC"})
    assert answer["formula"] == "C7H11BrO4"
    assert answer["molar_mass_g_per_mol"] == pytest.approx(BROMOMALONATE_G_PER_MOL, rel=1e-5)


def test_cautions_never_call_the_unlisted_safe():
    answer = compute("cautions", {"substances": [{"name": "an invented substance"}]})
    assert answer["unlisted"] == ["an invented substance"]
    assert "safety data sheet" in answer["unlisted_means"]
    assert "safe " not in answer["unlisted_means"].replace("safety", "")
    assert "come first" in answer["standing"]


def test_an_unknown_name_is_answered_with_those_there_are():
    with pytest.raises(UnknownCalculatorError, match="Did you mean distribution"):
        compute("distibution", {})
    with pytest.raises(UnknownCalculatorError, match=", ".join(CALCULATORS)):
        compute("alchemy", {})
    with pytest.raises(UnknownCalculatorError):
        compute_each("alchemy", [])


@pytest.mark.parametrize(
    ("name", "data", "field"),
    [
        ("distribution", {"model": "independent_sites", "uptake": 31}, "uptake"),
        ("distribution", {"model": "independant", "uptake": 1}, "model"),
        ("distribution", {"model": "poisson", "uptake": 1, "exposure": 1}, WHOLE),
        ("distribution", {"model": "poisson", "uptake": 1, "colour": 1}, "colour"),
        ("distribution", {"model": "poisson", "sites": 201, "uptake": 1}, "sites"),
        ("distribution", [], WHOLE),
        ("plan", {"model": "poisson", "objective": {"kind": "best"}}, "objective"),
        ("plan", {"model": "poisson", "objective": {"kind": "uptake"}}, "objective.value"),
        ("curve", {"model": "poisson", "points": 1}, "points"),
        ("amounts", {**AMOUNTS, "cage": "glass"}, "cage"),
        ("amounts", {**AMOUNTS, "lines": [{"name": "x", "purity": 97}]}, "lines.0.purity"),
        ("amounts", {**AMOUNTS, "lines": [{"name": "x", "smiles": "C(("}]}, "lines.0.smiles"),
        ("molar_mass", {"smiles": "C1CC"}, "smiles"),
        ("cautions", {"substances": [{}]}, "substances.0.name"),
    ],
)
def test_bad_input_is_an_error_at_its_field(name, data, field):
    messages = errors_of(name, data)
    assert list(messages) == [field]
    assert all(text.endswith((".", "?")) for text in messages[field])


def test_an_array_names_the_place():
    good = {"smiles": "C"}
    assert [row["formula"] for row in compute_each("molar_mass", [good, good])] == ["CH4", "CH4"]
    with pytest.raises(FieldErrors) as refusal:
        compute_each("molar_mass", [good, {"smiles": "C(("}])
    assert list(refusal.value.messages) == ["1.smiles"]


def test_an_array_ends_in_time():
    with pytest.raises(FieldErrors) as refusal:
        compute_each("molar_mass", [{"smiles": "C"}] * 3, within_seconds=-1)
    assert list(refusal.value.messages) == ["0"]


def test_whatever_reads_a_structure_runs_bounded():
    for calculator in CALCULATORS.values():
        takes_structures = "smiles" in json.dumps(calculator.request.model_json_schema())
        assert calculator.reads_structures == takes_structures, calculator.name


LEAVES = (
    st.none()
    | st.booleans()
    | st.integers(-(10**30), 10**30)
    | st.floats()
    | st.text(max_size=12)
    | st.sampled_from(["C60", "toluene", "poisson", "sequential", "uptake", "CCO", "reagent"])
)  # fmt: skip


def values_for(kind):
    """Return strategies that fill a request's own fields with garbage and good values."""
    names = sorted(kind.model_fields)
    nested = {"kind", "level", "ratio", "value", "lowest", "highest", "name", "smiles",
              "equivalents", "purity", "equivalents_of", "actual_mass_mg"}  # fmt: skip
    inner = st.recursive(
        LEAVES,
        lambda part: (
            st.lists(part, max_size=3)
            | st.dictionaries(st.sampled_from(sorted(nested)), part, max_size=4)
        ),
        max_leaves=8,
    )
    return st.dictionaries(st.sampled_from(names), inner, max_size=8)


@pytest.mark.parametrize("name", CALCULATORS)
@given(data=st.data())
def test_garbage_gives_an_answer_for_json_or_an_error_in_words(name, data):
    request = data.draw(values_for(CALCULATORS[name].request) | LEAVES)
    with contextlib.suppress(FieldErrors):
        answer = compute(name, request)
        assert CALCULATORS[name].result.model_validate(answer)
        json.dumps(answer, allow_nan=False)


@given(
    sites=st.integers(1, 200),
    attenuation=st.floats(0, 1000) | st.lists(st.floats(0, 1000), min_size=1, max_size=5),
    exposure=st.floats(0, 1e300),
)
def test_whatever_the_model_the_answer_is_json(sites, attenuation, exposure):
    request = {"model": "sequential", "sites": sites, "attenuation": attenuation}
    try:
        answer = compute("distribution", {**request, "exposure": exposure})
    except FieldErrors:
        return
    assert sum(answer["mole_fraction"]) == pytest.approx(1, abs=1e-12)
    json.dumps(answer, allow_nan=False)
