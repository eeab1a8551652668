"""Each rule of the table: a plan that meets it, and one near by that doesn't."""

from __future__ import annotations

from typing import Any

import pytest

from reactions.chemistry.cautions import PlannedConditions, PlannedSubstance, cautions_for
from reactions.chemistry.cautions.assess import rules
from reactions.chemistry.cautions.kinds import kinds
from reactions.chemistry.cautions.predicates import PREDICATES
from reactions.chemistry.cautions.sheet import SEVERITIES

Plan = tuple[list[str], dict[str, Any]]

BENZYL_AZIDE = "SMILES:[N-]=[N+]=NCc1ccccc1"
DODECYL_AZIDE = "SMILES:CCCCCCCCCCCCN=[N+]=[N-]"
TOSYLHYDRAZONE = "SMILES:COC(=O)CCCC(=NNS(=O)(=O)c1ccc(C)cc1)c1ccccc1"

# rule: (a plan that meets it, a plan that doesn't)
PLANS: dict[str, tuple[Plan, Plan]] = {
    "azide_polyhalogenated_solvent": (
        (["sodium azide"], {"solvent": "dichloromethane"}),
        (["sodium azide"], {"solvent": "1,2-dichlorobenzene"}),
    ),
    "azide_acid": ((["sodium azide", "acetic acid"], {}), (["sodium azide", "ethanol"], {})),
    "azide_carbon_disulfide": (
        (["sodium azide"], {"solvent": "carbon disulfide"}),
        (["sodium azide"], {"solvent": "toluene"}),
    ),
    "azide_metal": (
        (["sodium azide", "copper(II) triflate"], {}),
        (["sodium azide", "zinc"], {}),
    ),
    "azide_halogen": (([BENZYL_AZIDE, "bromine"], {}), ([BENZYL_AZIDE, "toluene"], {})),
    "azide_ratio": (([BENZYL_AZIDE], {}), ([DODECYL_AZIDE], {})),
    "rule_of_six": ((["ethyl azidoformate"], {}), ([BENZYL_AZIDE], {})),
    "organic_azide_hot": (
        ([BENZYL_AZIDE], {"temperature_c": 130}),
        ([BENZYL_AZIDE], {"temperature_c": 25}),
    ),
    "diazo": ((["ethyl diazoacetate"], {}), (["diethyl malonate"], {})),
    "diazo_acid": (
        (["ethyl diazoacetate", "hydrochloric acid"], {}),
        (["ethyl diazoacetate", "water"], {}),
    ),
    "diazomethane": ((["diazomethane"], {}), (["trimethylsilyldiazomethane"], {})),
    "sulfonylhydrazone": (([TOSYLHYDRAZONE], {}), (["p-toluenesulfonic acid monohydrate"], {})),
    "hydride_dipolar_solvent": (
        (["sodium hydride"], {"solvent": "DMF"}),
        (["sodium hydride"], {"solvent": "toluene"}),
    ),
    "hydride_hydrogen": ((["sodium hydride=24.0"], {}), (["sodium hydride"], {})),
    "hydride_halogenated_solvent": (
        (["sodium hydride"], {"solvent": "chloroform"}),
        (["sodium hydride"], {"solvent": "chlorobenzene"}),
    ),
    "alkali_metal_halogenated_solvent": (
        (["sodium"], {"solvent": "dichloromethane"}),
        (["sodium methoxide"], {"solvent": "dichloromethane"}),
    ),
    "organolithium_halogenated_solvent": (
        (["n-BuLi"], {"solvent": "chloroform"}),
        (["n-BuLi"], {"solvent": "toluene"}),
    ),
    "organolithium_air": ((["n-butyllithium"], {}), (["lithium"], {})),
    "organolithium_under_air": (
        (["n-butyllithium"], {"atmosphere": "air"}),
        (["n-butyllithium"], {"atmosphere": "argon"}),
    ),
    "organolithium_water": ((["n-butyllithium", "water"], {}), (["lithium", "water"], {})),
    "grignard_air": ((["phenylmagnesium bromide"], {}), (["magnesium"], {})),
    "grignard_under_air": (
        (["4-tert-butylphenylmagnesium bromide"], {"atmosphere": "air"}),
        (["4-tert-butylphenylmagnesium bromide"], {"atmosphere": "nitrogen"}),
    ),
    "grignard_water": (
        (["methylmagnesium bromide", "water"], {}),
        (["magnesium", "water"], {}),
    ),
    "hydride_water": (
        (["sodium hydride", "manganese(III) acetate dihydrate"], {}),
        (["sodium hydride", "diethyl malonate"], {}),
    ),
    "alkali_metal_water": ((["potassium", "water"], {}), (["potassium iodide", "water"], {})),
    "chloride_water": (
        (["aluminium chloride", "water"], {}),
        (["ammonium chloride", "water"], {}),
    ),
    "lithium_nitrogen": (
        (["lithium"], {"atmosphere": "nitrogen"}),
        (["lithium"], {"atmosphere": "argon"}),
    ),
    "carbon_disulfide": (([], {"solvent": "carbon disulfide"}), ([], {"solvent": "toluene"})),
    "above_boiling_point": (
        ([], {"solvent": "toluene", "temperature_c": 150}),
        ([], {"solvent": "toluene", "temperature_c": 111}),
    ),
    "above_flash_point": (
        ([], {"solvent": "1,2-dichlorobenzene", "temperature_c": 100}),
        ([], {"solvent": "1,2-dichlorobenzene", "temperature_c": 25}),
    ),
    "above_autoignition": (
        ([], {"solvent": "CS2", "temperature_c": 100}),
        ([], {"solvent": "CS2", "temperature_c": 46}),
    ),
    "solvent_unknown": (([], {"solvent": "liquid X"}), ([], {"solvent": "ODCB"})),
    "osmium_tetroxide": ((["OsO4"], {}), (["ozone"], {})),
    "bromine_or_chlorine": ((["bromine"], {}), (["potassium iodide"], {})),
    "halogen_incompatible": ((["iodine", "ammonia"], {}), (["iodine", "toluene"], {})),
    "fluorine_source": (
        (["manganese(III) fluoride"], {}),
        (["tetrabutylammonium hexafluorophosphate"], {}),
    ),
    "peroxide_former": (([], {"solvent": "THF"}), (["THF"], {"solvent": "toluene"})),
    "peroxide_ether": (
        (["di-tert-butyl peroxide"], {"solvent": "diethyl ether"}),
        (["di-tert-butyl peroxide"], {"solvent": "toluene"}),
    ),
    "peroxide_ketone": (
        (["hydrogen peroxide", "acetone"], {}),
        (["hydrogen peroxide", "toluene"], {}),
    ),
    "hydrogen_peroxide_gas": ((["H2O2"], {}), (["di-tert-butyl peroxide"], {})),
    "peracid": ((["mCPBA"], {}), (["acetic acid"], {})),
    "peracid_dimethylformamide": (
        (["mCPBA"], {"solvent": "DMF"}),
        (["mCPBA"], {"solvent": "toluene"}),
    ),
    "ozone": ((["ozone"], {}), (["oxygen"], {})),
    "oxygen_over_solvent": (
        ([], {"solvent": "toluene", "atmosphere": "oxygen"}),
        ([], {"solvent": "1,2-dichlorobenzene", "atmosphere": "oxygen"}),
    ),
    "singlet_oxygen": (
        (["cyclopentadiene"], {"light": "irradiated", "atmosphere": "air"}),
        (["cyclopentadiene"], {"light": "irradiated", "atmosphere": "argon"}),
    ),
    "irradiation": (([], {"light": "irradiated"}), ([], {"light": "ambient"})),
    "hydrogen_gas": ((["hydrogen"], {}), (["nitrogen"], {})),
    "hydrogen_atmosphere": (([], {"atmosphere": "hydrogen"}), ([], {"atmosphere": "air"})),
    "perchlorate": (
        (["tetrabutylammonium perchlorate"], {}),
        (["tetrabutylammonium hexafluorophosphate"], {}),
    ),
    "oxidising_acid_organic": ((["nitric acid", "acetone"], {}), (["nitric acid", "water"], {})),
    "cyanide_acid": (
        (["sodium cyanide", "trifluoroacetic acid"], {}),
        (["acetonitrile", "trifluoroacetic acid"], {}),
    ),
    "cyanide": ((["KCN"], {}), (["benzonitrile"], {})),
    "liquid_ammonia": (([], {"solvent": "ammonia"}), (["triethylamine"], {})),
    "benzenediazonium_carboxylate": (
        (["anthranilic acid", "isoamyl nitrite"], {}),
        (["anthranilic acid", "nitrobenzene"], {}),
    ),
    "haloform_base": (
        (["chloroform", "sodium hydroxide"], {}),
        (["dichloromethane", "sodium hydroxide"], {}),
    ),
    "metal_carbonyl": ((["tungsten hexacarbonyl"], {}), (["carbon monoxide"], {})),
    "carbon_monoxide_evolved": (
        ([], {"family_key": "tungsten_carbonyl"}),
        ([], {"family_key": "platinum"}),
    ),
    "mercury": ((["mercury(II) bromide"], {}), (["magnesium"], {})),
    "gas_evolved": (
        ([], {"family_key": "prato", "cage_mmol": 0.1}),
        ([], {"family_key": "prato", "cage_mmol": 0.01}),
    ),
    "gas_unknown": (([], {"family_key": "our_own"}), ([], {"family_key": "prato"})),
    "flash_vacuum_pyrolysis": (
        ([], {"family_key": "precursor_closing"}),
        ([], {"family_key": "cage_opening"}),
    ),
    "pressure_filling": (
        ([], {"family_key": "cage_filling"}),
        ([], {"family_key": "cage_opening"}),
    ),
    "milling": (([], {"family_key": "dimerisation"}), ([], {"family_key": "bingel"})),
}


def rules_met(plan: Plan) -> dict[str, str]:
    substances = []
    for entry in plan[0]:
        name, _, mass_mg = entry.partition("=") if "SMILES:" not in entry else (entry, "", "")
        smiles = entry.removeprefix("SMILES:") if entry.startswith("SMILES:") else None
        substances.append(
            PlannedSubstance(
                "as drawn" if smiles else name, smiles, mass_mg=float(mass_mg) if mass_mg else None
            )
        )
    sheet = cautions_for(substances, PlannedConditions(**plan[1]))
    return {caution.key: caution.text for caution in sheet.rules}


@pytest.mark.parametrize("key", PLANS)
def test_the_plan_that_meets_the_rule_is_cautioned(key: str) -> None:
    met = rules_met(PLANS[key][0])
    assert key in met
    assert "{" not in met[key]


@pytest.mark.parametrize("key", PLANS)
def test_the_plan_near_by_is_not(key: str) -> None:
    assert key not in rules_met(PLANS[key][1])


def test_every_rule_has_its_two_plans() -> None:
    assert set(PLANS) == {rule.key for rule in rules()}


def test_rules_stand_on_known_severities_predicates_kinds_and_a_source() -> None:
    for rule in rules():
        assert rule.severity in SEVERITIES
        assert rule.source
        for predicate, arguments in rule.when:
            assert predicate in PREDICATES
            assert arguments.get("kind", "azide") in kinds()


def test_no_predicate_or_kind_is_idle() -> None:
    used = [condition for rule in rules() for condition in rule.when]
    assert {predicate for predicate, _ in used} == set(PREDICATES)
    assert {arguments["kind"] for _, arguments in used if "kind" in arguments} == set(kinds())


def test_every_pattern_of_a_kind_is_readable() -> None:
    for kind in kinds().values():
        assert kind.patterns
        assert all(pattern is not None for pattern in kind.patterns)
