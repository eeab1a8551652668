"""Weighing lists worked out."""

from __future__ import annotations

import pickle

import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from reactions.chemistry.amounts import AmountsError, AmountsRequest, amounts
from reactions.errors import field_errors

MALONATE = "CCOC(=O)C(Br)C(=O)OCC"  # diethyl bromomalonate, 239.06 g/mol
DBU = "C1CCC2=NCCCN2CC1"  # 152.24 g/mol


def malonate(**fields):
    return {"name": "diethyl bromomalonate", "smiles": MALONATE, "equivalents": 1.1, **fields}


def base(**fields):
    return {
        "name": "DBU",
        "role": "base",
        "smiles": DBU,
        "equivalents": 2,
        "equivalents_of": "diethyl bromomalonate",
        **fields,
    }


def worked_out(*lines, **fields):
    cage = {} if "product_mass_mg" in fields else {"cage_mass_mg": 500, "cage_purity": 0.99}
    return amounts(AmountsRequest.model_validate({**cage, **fields, "lines": list(lines)}))


def refusal(*lines, **fields):
    with pytest.raises(AmountsError) as caught:
        worked_out(*lines, **fields)
    return caught.value.field, str(caught.value)


def messages(*lines, **fields):
    with pytest.raises(ValidationError) as caught:
        worked_out(*lines, **fields)
    return field_errors(caught.value).messages


# Derived by hand: 500 · 0.99 / 720.66 = 0.68687 mmol; times 1.1; times 239.06 / 0.97.
def test_each_line_follows_from_the_cage():
    result = worked_out(malonate(purity=0.97, role="reagent"))

    assert result.cage_mmol == pytest.approx(0.68687, abs=1e-5)
    (line,) = result.lines
    assert line.molar_mass_g_per_mol == pytest.approx(239.06, abs=0.01)
    assert line.mmol == pytest.approx(0.75556, abs=1e-5)
    assert line.mass_mg == pytest.approx(186.21, abs=0.01)
    assert line.volume_ml is None
    assert result.limiting == "C60"


def test_what_was_asked_comes_back_with_the_answer():
    asked = malonate(purity=0.97, density_g_per_ml=1.402, role="reagent", needed_per_cage=1)
    line = worked_out(asked).lines[0].model_dump()

    assert {name: line[name] for name in asked} == asked


def test_a_neat_liquid_has_its_volume_by_density():
    (line,) = worked_out(malonate(purity=0.92, density_g_per_ml=1.402)).lines

    assert line.volume_ml == pytest.approx(line.mass_mg / 1402)


def test_a_solution_has_its_volume_by_molarity_and_its_mass_by_density():
    butyl = {"name": "n-butyllithium", "smiles": "[Li]CCCC", "equivalents": 2}
    without, with_density = worked_out(
        {**butyl, "molarity_mol_per_l": 1.6},
        {**butyl, "name": "the same", "molarity_mol_per_l": 1.6, "density_g_per_ml": 0.68},
    ).lines

    assert without.volume_ml == pytest.approx(without.mmol / 1.6)
    assert without.mass_mg is None
    assert with_density.mass_mg == pytest.approx(without.volume_ml * 680)


def test_a_base_counts_by_the_reagent_it_serves():
    reagent, dbu = worked_out(malonate(), base()).lines

    assert dbu.mmol == pytest.approx(2 * reagent.mmol)


def test_lines_may_count_by_lines_below_them_and_by_the_cage_named():
    dbu, reagent = worked_out(base(), malonate(equivalents_of="C60")).lines

    assert dbu.mmol == pytest.approx(2 * reagent.mmol)
    assert reagent.mmol == pytest.approx(1.1 * 0.68687, abs=1e-5)


def test_a_line_without_equivalents_has_no_planned_amount_nor_those_that_count_by_it():
    reagent, dbu = worked_out(malonate(equivalents=None), base()).lines

    assert reagent.mmol is reagent.mass_mg is dbu.mmol is None


def test_a_typed_molar_mass_serves_where_there_is_no_structure():
    (line,) = worked_out({"name": "resin", "equivalents": 2, "molar_mass_g_per_mol": 500.0}).lines

    assert line.mass_mg == pytest.approx(2 * 0.68687 * 500, abs=0.01)


def test_without_structure_and_molar_mass_there_is_no_mass_and_it_is_said():
    result = worked_out({"name": "resin", "equivalents": 2})

    assert result.lines[0].mmol is not None
    assert result.lines[0].mass_mg is None
    assert result.warnings == [
        "resin: no structure and no molar mass are given, so there is no mass to weigh."
    ]


# Copper sulfate pentahydrate 249.68, anhydrous 159.60 g/mol: derived.
def test_crystal_water_forgotten_in_the_structure_is_noticed():
    line = {
        "name": "copper sulfate",
        "smiles": "O=S(=O)([O-])[O-].[Cu+2]",
        "molar_mass_g_per_mol": 249.68,
        "equivalents": 1,
    }
    (warning,) = worked_out(line).warnings

    assert "159.6" in warning
    assert "249.68" in warning
    assert "crystal water" in warning


@pytest.mark.parametrize(("typed", "warnings"), [(239.06, 0), (239.2, 0), (238.5, 1), (241, 1)])
def test_a_typed_molar_mass_may_be_rounded_but_not_wrong(typed, warnings):
    assert len(worked_out(malonate(molar_mass_g_per_mol=typed)).warnings) == warnings


def test_the_purity_of_a_solution_is_left_out_and_it_is_said():
    pure, impure = (
        worked_out(malonate(molarity_mol_per_l=0.5, purity=purity)) for purity in (1, 0.9)
    )

    assert pure.lines[0].volume_ml == impure.lines[0].volume_ml
    assert pure.warnings == []
    assert "purity of 90 % is left out" in impure.warnings[0]


def test_the_mass_of_cage_follows_from_the_product_wanted():
    # 100 mg of the mono-adduct C67H10O4 (878.81 g/mol) at 45 %: 0.25286 mmol of cage, 182.2 mg.
    by_mass = worked_out(
        product_mass_mg=100, expected_yield=0.45, product_molar_mass_g_per_mol=878.813
    )

    assert by_mass.cage_mmol == pytest.approx(0.25286, abs=1e-5)
    assert by_mass.cage_mass_mg == pytest.approx(182.23, abs=0.01)


def test_the_product_may_be_given_by_its_structure():
    # Twelve cyclohexanes stand in for a product: all that counts is to weigh more than the cage.
    heavy = ".".join(["C1CCCCC1"] * 12)
    result = worked_out(product_mass_mg=100, expected_yield=0.5, product_smiles=heavy)

    assert result.cage_mmol == pytest.approx(100 / (12 * 84.162) / 0.5, rel=1e-4)


@pytest.mark.parametrize(
    ("lines", "limiting"),
    [
        ([malonate(equivalents=1.1)], "C60"),
        ([malonate(equivalents=0.9)], "diethyl bromomalonate"),
        ([malonate(equivalents=1.0)], "C60"),
        ([malonate(equivalents=2.2, needed_per_cage=2)], "C60"),
        ([malonate(equivalents=1.8, needed_per_cage=2)], "diethyl bromomalonate"),
        ([malonate(), base(equivalents=0.1)], "C60"),
        ([malonate(), base(equivalents=0.1, needed_per_cage=1)], "DBU"),
        ([malonate(equivalents=None)], "C60"),
    ],
)
def test_what_runs_out_first(lines, limiting):
    assert worked_out(*lines).limiting == limiting


def test_rounding_does_not_decide_what_limits():
    chain = [malonate(equivalents=0.1), base(equivalents=10, role="reagent", needed_per_cage=1)]
    result = worked_out(*chain[1:], {**chain[0], "needed_per_cage": 0.1})

    assert result.limiting == "C60"


def test_actual_amounts_give_actual_equivalents():
    result = worked_out(
        malonate(actual_mass_mg=200, purity=0.97),
        base(actual_volume_ml=0.25, density_g_per_ml=1.018),
        actual_cage_mass_mg=480,
    )
    reagent, dbu = result.lines

    assert result.actual_cage_mmol == pytest.approx(480 * 0.99 / 720.66)
    assert reagent.actual_mmol == pytest.approx(200 * 0.97 / 239.06, rel=1e-4)
    assert reagent.actual_equivalents == pytest.approx(reagent.actual_mmol / (480 * 0.99 / 720.66))
    assert dbu.actual_mmol == pytest.approx(254.5 / 152.241, rel=1e-4)
    assert dbu.actual_equivalents == pytest.approx(dbu.actual_mmol / reagent.actual_mmol)


def test_actual_equivalents_count_by_the_plan_as_long_as_the_reference_is_not_weighed():
    result = worked_out(malonate(actual_mmol=0.68687))

    assert result.lines[0].actual_equivalents == pytest.approx(1.0, abs=1e-4)


def test_what_limits_by_what_went_in_is_told_from_the_first_amount_on():
    assert worked_out(malonate(actual_mmol=0.5)).actual_limiting == "diethyl bromomalonate"
    assert worked_out(malonate(), actual_cage_mass_mg=480).actual_limiting == "C60"
    assert worked_out(malonate(), actual_cage_mass_mg=560).actual_limiting != "C60"


def test_what_limits_is_told_again_by_what_went_in():
    as_planned = worked_out(malonate())
    short_weighed = worked_out(malonate(actual_mmol=0.5), actual_cage_mass_mg=500)

    assert as_planned.actual_limiting is None
    assert short_weighed.limiting == "C60"
    assert short_weighed.actual_limiting == "diethyl bromomalonate"


@pytest.mark.parametrize(
    ("line", "part"),
    [
        ({"smiles": MALONATE, "actual_volume_ml": 1}, "a volume becomes an amount only with"),
        ({"actual_mass_mg": 1}, "a mass becomes an amount only with a structure or a molar mass"),
        ({"molarity_mol_per_l": 1, "actual_mass_mg": 1}, "only with a density"),
    ],
)
def test_an_actual_figure_that_leads_to_no_amount_is_kept_and_said(line, part):
    result = worked_out({"name": "reagent", **line})

    (entered,) = (name for name in line if name.startswith("actual"))
    assert getattr(result.lines[0], entered) == 1
    assert result.lines[0].actual_mmol is None
    assert any(part in warning for warning in result.warnings)


def test_the_least_solvent_is_advised_and_its_margin_said():
    result = worked_out(solvent="toluene")

    assert result.solvent_volume_ml == pytest.approx(500 / 2.8 * 1.25)
    assert result.solubility_margin == 1.25
    assert worked_out(solvent="toluene", solubility_margin=2).solvent_volume_ml == pytest.approx(
        500 / 2.8 * 2
    )


def test_too_little_solvent_is_warned_of_by_the_heavier_of_plan_and_balance():
    planned = worked_out(solvent="toluene", solvent_volume_ml=200)
    overweighed = worked_out(solvent="toluene", solvent_volume_ml=200, actual_cage_mass_mg=600)

    assert planned.solvent_volume_ml == overweighed.solvent_volume_ml == 200
    assert "just dissolves" in planned.warnings[0]
    assert "dissolves 560 mg of C60 at 25 °C (2.8 mg/mL), not 600 mg" in overweighed.warnings[0]


def test_without_a_solvent_a_chosen_volume_stands():
    assert worked_out(solvent_volume_ml=50).solvent_volume_ml == 50


@pytest.mark.parametrize(
    ("lines", "fields", "field", "part"),
    [
        ([malonate(smiles="C1CC")], {}, "lines.0.smiles", "diethyl bromomalonate: “C1CC”"),
        ([malonate(), base(equivalents_of="DBN")], {}, "lines.1.equivalents_of", "“DBN”, which"),
        (
            [malonate(equivalents_of="DBU"), base()],
            {},
            "lines.0.equivalents_of",
            "lead round in a circle",
        ),
        ([base(equivalents_of="DBU")], {}, "lines.0.equivalents_of", "lead round in a circle"),
        ([malonate(), malonate(), base()], {}, "lines.2.equivalents_of", "2 lines have that name"),
        ([malonate(role="cage")], {}, "lines.0.role", "stands beside the lines"),
        ([], {"cage": "buckyball"}, "cage", "“buckyball” is no cage"),
        ([malonate(equivalents=1e6, purity=1e-9)], {}, "lines.0.equivalents", "beyond anything"),
        (
            [malonate(equivalents=1e6, molarity_mol_per_l=1e-9)],
            {},
            "lines.0.equivalents",
            " mL, beyond anything",
        ),
        (
            [malonate(actual_mass_mg=1e9, purity=1e-300, molar_mass_g_per_mol=None)],
            {"actual_cage_mass_mg": 1e-300},
            "lines.0.equivalents",
            "beyond anything",
        ),
        (
            [],
            {"product_mass_mg": 1, "expected_yield": 1, "product_smiles": "CCO"},
            "product_smiles",
            "46.07 g/mol, is not above that of C60, 720.66 g/mol",
        ),
        (
            [],
            {"product_mass_mg": 1, "expected_yield": 1, "product_molar_mass_g_per_mol": 720},
            "product_molar_mass_g_per_mol",
            "is not above that of C60",
        ),
        (
            [],
            {"product_mass_mg": 1, "expected_yield": 1, "product_smiles": "C1CC"},
            "product_smiles",
            "can't be read",
        ),
        (
            [],
            {
                "product_mass_mg": 1e9,
                "expected_yield": 1e-9,
                "product_molar_mass_g_per_mol": 900,
            },
            "expected_yield",
            "beyond anything",
        ),
    ],
)
def test_what_cannot_be_worked_out_is_refused_at_its_field(lines, fields, field, part):
    found, message = refusal(*lines, **fields)

    assert found == field
    assert part in message


def test_a_refusal_travels_between_processes():
    error = AmountsError("cage", "No.")
    copy = pickle.loads(pickle.dumps(error))

    assert (copy.field, str(copy)) == ("cage", "No.")


@pytest.mark.parametrize(
    ("lines", "fields", "field", "part"),
    [
        ([malonate(purity=97)], {}, "lines.0.purity", "97 is more than 1; write 0.97 for 97 %."),
        ([malonate(purity=0)], {}, "lines.0.purity", "0 is not above 0"),
        ([malonate(equivalents=-1)], {}, "lines.0.equivalents", "-1 is below 0"),
        ([malonate(equivalents=float("nan"))], {}, "lines.0.equivalents", "finite"),
        ([], {"cage_mass_mg": 0}, "cage_mass_mg", "0 is not above 0"),
        ([], {"cage_mass_mg": float("inf")}, "cage_mass_mg", "finite"),
        ([], {"cage_purity": 1.5}, "cage_purity", "1.5 is more than 1"),
        ([], {"cage_purity": 150}, "cage_purity", "150 is above 1"),
        ([], {"cage_mass_mg": "250 mg"}, "cage_mass_mg", "“250 mg” is not a number"),
        ([], {"solubility_margin": 0.5}, "solubility_margin", "0.5 is below 1"),
        ([{"name": ""}], {}, "lines.0.name", "empty"),
        ([malonate(equivalent=1)], {}, "lines.0.equivalent", "is not a field here"),
        (
            [malonate(actual_mass_mg=1, actual_mmol=1)],
            {},
            "lines.0",
            "more than one actual amount",
        ),
        ([], {"cage_mass_mg": None}, "__all__", "exactly one of the two"),
        ([], {"product_mass_mg": 1, "cage_mass_mg": 1}, "__all__", "exactly one of the two"),
        ([], {"product_mass_mg": 1}, "__all__", "needs the yield you expect"),
        ([], {"product_mass_mg": 1, "expected_yield": 0.4}, "__all__", "its molar mass"),
        ([], {"cage": "C" * 41}, "cage", "longer than 40"),
    ],
)
def test_what_is_asked_wrongly_is_refused_at_its_field(lines, fields, field, part):
    found = messages(*lines, **fields)

    assert part in " ".join(found[field])


EQUIVALENTS = st.floats(1e-3, 30)
MASSES = st.floats(1e-2, 5e3)
PURITIES = st.floats(0.05, 1)


@given(MASSES, st.floats(0.1, 10), EQUIVALENTS, EQUIVALENTS, PURITIES)
def test_so_many_times_the_cage_takes_so_many_times_of_everything(
    mass, times, first, second, share
):
    once, more = (
        worked_out(
            malonate(equivalents=first, purity=share, density_g_per_ml=1.4),
            base(equivalents=second, molarity_mol_per_l=0.5),
            cage_mass_mg=cage_mass,
            solvent="toluene",
        )
        for cage_mass in (mass, mass * times)
    )

    assert more.cage_mmol == pytest.approx(times * once.cage_mmol)
    assert more.solvent_volume_ml == pytest.approx(times * once.solvent_volume_ml)
    assert more.limiting == once.limiting
    for less, line in zip(once.lines, more.lines, strict=True):
        assert line.mmol == pytest.approx(times * less.mmol)
        assert line.volume_ml == pytest.approx(times * less.volume_ml)


@given(
    MASSES,
    EQUIVALENTS,
    EQUIVALENTS,
    PURITIES,
    st.sampled_from(["actual_mass_mg", "actual_volume_ml", "actual_mmol"]),
    st.sampled_from([None, 0.5]),
)
def test_what_goes_in_as_planned_has_the_planned_equivalents(
    mass, first, second, share, measured, molarity
):
    lines = [
        malonate(
            equivalents=first,
            purity=share,
            density_g_per_ml=1.4,
            molarity_mol_per_l=molarity,
        ),
        base(equivalents=second, purity=share, density_g_per_ml=1.018),
    ]
    planned = worked_out(*lines, cage_mass_mg=mass)
    weighed = [
        {**line, measured: getattr(figures, measured.removeprefix("actual_"))}
        for line, figures in zip(lines, planned.lines, strict=True)
    ]
    result = worked_out(*weighed, cage_mass_mg=mass, actual_cage_mass_mg=mass)

    for line in result.lines:
        assert line.actual_equivalents == pytest.approx(line.equivalents)
        assert line.actual_mmol == pytest.approx(line.mmol)
        assert line.actual_mass_mg == pytest.approx(line.mass_mg)
        assert line.actual_volume_ml == pytest.approx(line.volume_ml)
    assert result.actual_limiting == planned.limiting


@given(MASSES, st.floats(0.01, 1), st.floats(721, 5000), PURITIES)
def test_the_cage_planned_from_a_product_gives_that_product(mass, share, molar_mass, purity):
    result = worked_out(
        product_mass_mg=mass,
        expected_yield=share,
        product_molar_mass_g_per_mol=molar_mass,
        cage_purity=purity,
    )
    back = worked_out(cage_mass_mg=result.cage_mass_mg, cage_purity=purity)

    assert back.cage_mmol == pytest.approx(result.cage_mmol)
    assert back.cage_mmol * share * molar_mass == pytest.approx(mass)


@given(st.lists(st.tuples(EQUIVALENTS, st.floats(0.1, 10)), min_size=1, max_size=6))
def test_what_limits_suffices_for_the_least_cage(supplies):
    lines = [
        {"name": f"reagent {place}", "equivalents": equivalents, "needed_per_cage": needed}
        for place, (equivalents, needed) in enumerate(supplies)
    ]
    result = worked_out(*lines)
    served = {"C60": result.cage_mmol} | {
        line.name: line.mmol / line.needed_per_cage for line in result.lines
    }

    assert served[result.limiting] == pytest.approx(min(served.values()), rel=1e-8)
