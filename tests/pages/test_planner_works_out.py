import pytest
from django.urls import reverse

from reactions.chemistry.families import families

pytestmark = pytest.mark.django_db
MALONATE = "*C(*)(C(=O)OCC)C(=O)OCC"
# Molar masses in g/mol from abridged atomic weights (C 12.011, H 1.008, O 15.999, Br 79.904).
C60 = 60 * 12.011
ADDITION = 7 * 12.011 + 10 * 1.008 + 4 * 15.999
BROMOMALONATE = 7 * 12.011 + 11 * 1.008 + 4 * 15.999 + 79.904


@pytest.fixture
def plan(signed_in, author, campaign):
    """Return a function that works out what is typed, as htmx asks for it, or by a button."""

    def plan(enhanced=True, **typed):
        fields = {
            "basis": "cage", "cage": "C60", "objective": "most_of_level", "level": "1",
            "model": "independent_sites", "sites": "30", "reagent_efficiency": "100 %",
            "lines-0-name": "", **typed,
        }  # fmt: skip
        return signed_in(author, enhanced=enhanced).post(reverse("reactions:planner"), fields)

    return plan


def of(response):
    return response.context["outcome"]


def errors_of(response):
    errors = dict(response.context["form"].errors)
    for line in response.context["lines"]:
        errors |= {f"{line.prefix}-{name}": texts for name, texts in line.errors.items()}
    return errors


def test_a_planner_just_opened_shows_no_error(signed_in, author, campaign):
    response = signed_in(author).get(reverse("reactions:planner"))
    assert response.status_code == 200
    assert errors_of(response) == {}
    assert b"Local codes" in response.content


@pytest.mark.parametrize("key", families())
def test_every_family_opens_with_what_is_usual(signed_in, author, campaign, key):
    response = signed_in(author).get(reverse("reactions:planner"), {"family": key})
    assert response.status_code == 200
    assert errors_of(response) == {}
    family = families()[key]
    names = [line["name"].value() for line in response.context["lines"]]
    assert len(names) == max(1, len(family.roles))
    assert all(names) or not family.roles
    assert response.context["form"]["solvent"].value() == next(iter(family.usual_solvents), "")
    # What is filled in can be worked out as it stands.
    again = signed_in(author).post(reverse("reactions:planner"), response.context["form"].data)
    assert errors_of(again) == {}


def test_the_best_mono_yield_is_the_statistical_one(plan):
    # One addition per cage on average over 30 equal sites: x1 = (29/30)^29; derived.
    composed = of(plan()).composed
    assert composed.equivalents == pytest.approx(1.0, abs=1e-9)
    assert composed.mole_fraction[1] == pytest.approx((29 / 30) ** 29, abs=1e-12)
    body = plan().content.decode()
    assert "37.4 %" in body
    assert 'class="curve"' in body


def test_the_weighing_list_follows_from_one_mass(plan):
    response = plan(
        **{
            "family": "bingel", "cage_mass": "0.5 g", "cage_purity": "99 %", "addend": MALONATE,
            "reagent_efficiency": "80 %",
            "lines-0-name": "diethyl bromomalonate", "lines-0-role": "reagent",
            "lines-0-purity": "92 %", "lines-0-density": "1.402 g/mL",
            "lines-1-name": "DBU", "lines-1-role": "base", "lines-1-equivalents": "2",
            "lines-1-per": "reagent",
        }
    )  # fmt: skip
    assert errors_of(response) == {}
    cage, reagent, base = of(response).charged.lines.components
    mmol = 500 * 0.99 / C60
    assert cage.planned_mmol == pytest.approx(mmol, rel=1e-4)
    assert reagent.planned_mmol == pytest.approx(1.25 * mmol, rel=1e-4)
    assert reagent.planned_mass_mg == pytest.approx(1.25 * mmol * BROMOMALONATE / 0.92, rel=1e-4)
    assert reagent.planned_volume_ml == pytest.approx(reagent.planned_mass_mg / 1402, rel=1e-4)
    assert base.planned_mmol == pytest.approx(2.5 * mmol, rel=1e-4)


def test_masses_of_the_levels_add_up_to_cage_and_additions(plan):
    outcome = of(plan(cage_mass="500 mg", cage_purity="100 %", addend=MALONATE))
    mmol = 500 / C60
    assert sum(outcome.charged.level_mass_mg) == pytest.approx(500 + mmol * ADDITION, rel=1e-6)
    assert outcome.charged.level_mass_mg[0] == pytest.approx(500 * (29 / 30) ** 30, rel=1e-6)


def test_a_mass_of_product_gives_the_mass_of_cage(plan):
    outcome = of(
        plan(
            basis="product", product_mass="200 mg", expected_yield="40 %", addend=MALONATE,
            cage_purity="98 %",
        )
    )  # fmt: skip
    expected = 200 / (C60 + ADDITION) / 0.4 * C60 / 0.98
    assert outcome.charged.cage_mass_mg == pytest.approx(expected, rel=1e-5)


@pytest.mark.parametrize(
    ("typed", "field"),
    [
        ({"basis": "product", "product_mass": "200 mg", "addend": MALONATE}, "expected_yield"),
        ({"basis": "product", "product_mass": "1 g", "expected_yield": "40 %"}, "product_mass"),
        ({"cage_mass": "500"}, "cage_mass"),
        ({"cage_mass": "0.5 kg kg"}, "cage_mass"),
        ({"cage": "water"}, "cage"),
        ({"addend": "C(C"}, "addend"),
        ({"level": "40"}, "level"),
        ({"level": "1.5"}, "level"),
        ({"level": "nan"}, "level"),
        ({"level": "0"}, "level"),
        ({"objective": "mono_to_multi", "ratio": "-1"}, "ratio"),
        ({"objective": "band", "band_lowest": "3", "band_highest": "2"}, "band_lowest"),
        ({"objective": "equivalents", "equivalents": "80"}, "equivalents"),
        ({"objective": "alchemy"}, "objective"),
        ({"family": "alchemy"}, "family"),
        ({"campaign": "NIX"}, "campaign"),
        ({"model": "sequential", "attenuation": "x"}, "attenuation"),
        ({"model": "sequential", "attenuation": "0.9 " * 31}, "attenuation"),
        ({"reagent_efficiency": "120 %"}, "reagent_efficiency"),
        ({"temperature": "warm"}, "temperature"),
        ({"lines-0-name": "x", "lines-0-smiles": "C(C"}, "lines-0-smiles"),
        ({"lines-0-name": "x", "lines-0-purity": "0 %"}, "lines-0-purity"),
        ({"lines-0-name": "x", "lines-1-name": "x"}, "lines-1-name"),
        ({"lines-1-name": "", "lines-1-equivalents": "2"}, "lines-1-name"),
        ({"family": "retro_prato"}, "objective"),
    ],
)
def test_a_bad_value_is_told_at_its_field_and_kept(plan, typed, field):
    response = plan(**typed)
    assert response.status_code == 200
    assert list(errors_of(response)) == [field]
    whole = plan(enhanced=False, action="work_out", **typed).content.decode()
    for value in typed.values():
        assert f'value="{value}"' in whole or f">\n{value}</textarea>" in whole or value in (
            "alchemy", "NIX",
        )  # fmt: skip


def test_the_rest_is_worked_out_all_the_same(plan):
    response = plan(cage_mass="heavy", addend="C(C")
    assert set(errors_of(response)) == {"cage_mass", "addend"}
    assert of(response).composed is not None


def test_a_level_above_the_highest_known_is_questioned(plan):
    response = plan(family="bingel", level="7")
    assert "above 6" in of(response).question.reason
    assert b"That is meant" in response.content


def test_an_objective_that_can_not_be_met_says_what_the_best_is(plan):
    response = plan(model="sequential", attenuation="0", level="2")
    assert b"can&#x27;t be reached" in response.content


def test_equivalents_of_ones_own_choice_are_taken_as_they_are(plan):
    composed = of(plan(objective="equivalents", equivalents="2")).composed
    assert (composed.equivalents, composed.objective) == (2.0, None)
    assert composed.uptake == pytest.approx(2.0)


def test_the_plan_with_five_percent_less_and_more_stands_beside_it(plan):
    less, planned, more = of(plan()).composed.variants
    assert less.equivalents == pytest.approx(0.95 * planned.equivalents)
    assert more.equivalents == pytest.approx(1.05 * planned.equivalents)
    assert less.mole_fraction[1] < planned.mole_fraction[1] > more.mole_fraction[1]


def test_a_retro_addition_is_weighed_without_a_curve(plan):
    response = plan(
        **{
            "family": "retro_prato", "objective": "equivalents", "equivalents": "30",
            "cage_mass": "100 mg", "lines-0-name": "maleic anhydride",
        }
    )  # fmt: skip
    assert errors_of(response) == {}
    assert of(response).composed is None
    assert of(response).charged.lines.components[1].equivalents == 30.0


def test_gas_set_free_is_told_with_its_volume(plan):
    # Carbon dioxide from N-methylglycine, one per ylide; 24.47 mL/mmol at 25 °C from R·T/p.
    response = plan(
        **{
            "family": "prato", "cage_mass": "720.66 mg", "cage_purity": "100 %",
            "temperature": "25 °C", "lines-0-name": "N-methylglycine",
        }
    )  # fmt: skip
    assert of(response).charged.gas_ml["carbon dioxide"] == pytest.approx(24.5, rel=0.01)


def test_the_solvent_must_dissolve_the_cage(plan):
    # C60 in toluene: 2.8 mg/mL at room temperature; Ruoff, Tse, Malhotra, Lorents, J. Phys. Chem.
    # 1993, 97, 3379. Others publish more; the volume suffices for the lowest.
    typed = {"cage_mass": "280 mg", "cage_purity": "100 %", "solvent": "toluene"}
    assert of(plan(**typed)).charged.solvent.volume_ml >= 100
    response = plan(**typed, solvent_volume="20 mL")
    assert of(response).charged.solvent.warnings
    assert b"20 mL of toluene dissolves" in response.content


def test_cautions_name_what_is_listed_and_what_is_not(plan):
    body = plan(
        **{
            "solvent": "toluene", "lines-0-name": "diethyl bromomalonate",
            "lines-1-name": "house mixture 7",
        }
    ).content.decode()  # fmt: skip
    assert "H225" in body
    assert "GHS02.svg" in body
    assert "<b>house mixture 7</b>: not listed here: read its safety data sheet" in body


def test_structure_and_density_of_a_listed_substance_are_known_by_its_name(plan):
    line = plan(**{"lines-0-name": "Diethyl Malonate"}).context["lines"].forms[0]
    assert line.component.molar_mass_g_per_mol == pytest.approx(160.17, abs=0.01)
    assert line.component.density_g_per_ml == pytest.approx(1.055, abs=0.01)


def test_what_is_typed_stands_in_the_address_for_a_reload(plan, signed_in, author):
    address = plan(family="bingel", cage_mass="0.5 g")["HX-Replace-Url"]
    assert "csrf" not in address
    response = signed_in(author).get(address)
    assert response.context["form"]["cage_mass"].value() == "0.5 g"
    assert response.context["form"]["family"].value() == "bingel"


def test_an_address_too_long_for_a_server_is_not_shown(plan):
    assert plan(addend="*" + "C" * 2000)["HX-Replace-Url"] == "false"


def test_without_script_a_button_does_the_same(plan):
    response = plan(enhanced=False, action="work_out", cage_mass="0.5 g")
    assert response.status_code == 200
    assert b"<html" in response.content
    assert of(response).charged.cage_mass_mg == 500.0


@pytest.mark.parametrize("name", ["level", "cage", "addend", "lines-0-name", "solvent", "family"])
@pytest.mark.parametrize("value", ["\x00", "9" * 400, "{{ 7*7 }}", "'\"<>", "-1e309", "𝟙"])
def test_garbage_is_no_server_error(plan, name, value):
    assert plan(**{name: value}).status_code == 200
