"""The sheet: what is listed, what isn't, and the order of its rules."""

from __future__ import annotations

import pytest

from reactions.chemistry.cautions import (
    STANDING,
    UNLISTED,
    PlannedConditions,
    PlannedSubstance,
    cautions_for,
)
from reactions.chemistry.families import family_from_data

PLAIN = PlannedConditions()


def test_the_standing_sentence_heads_even_an_empty_plan() -> None:
    sheet = cautions_for([], PLAIN)
    assert sheet.standing == STANDING
    assert "come first" in STANDING
    assert (sheet.listed, sheet.unlisted, sheet.rules) == ((), (), ())


def test_a_listed_substance_brings_its_statements_in_words() -> None:
    (caution,) = cautions_for([PlannedSubstance("toluene", None)], PLAIN).listed
    assert caution.signal_word == "Danger"
    assert ("H225", "Highly flammable liquid and vapour") in caution.hazard_statements
    assert any(code == "P210" for code, _ in caution.precautionary_statements)
    assert "Annex VI" in caution.source
    assert caution.remark == ""


def test_what_is_not_listed_is_named_and_never_passes_for_safe() -> None:
    sheet = cautions_for([PlannedSubstance("zeta-reagent", "CCCCCCCCCI")], PLAIN)
    assert sheet.listed == ()
    assert sheet.unlisted == ("zeta-reagent",)
    assert "safety data sheet" in UNLISTED


def test_a_substance_without_a_name_is_named_by_its_structure() -> None:
    assert cautions_for([PlannedSubstance("", "CCCCCCCCCI")], PLAIN).unlisted == ("CCCCCCCCCI",)


def test_a_substance_without_hazard_statements_is_remarked_on() -> None:
    (caution,) = cautions_for([PlannedSubstance("N-methylglycine", None)], PLAIN).listed
    assert caution.hazard_statements == ()
    assert "doesn't make it safe" in caution.remark


def test_found_by_structure_under_the_name_that_was_typed() -> None:
    sheet = cautions_for([PlannedSubstance("the solvent", "Cc1ccccc1")], PLAIN)
    assert [caution.name for caution in sheet.listed] == ["the solvent"]
    assert sheet.unlisted == ()


def test_a_structure_that_cannot_be_read_is_unlisted() -> None:
    assert cautions_for([PlannedSubstance("odd", "C1CC")], PLAIN).unlisted == ("odd",)


def test_the_solvent_is_looked_up_too_and_shown_once() -> None:
    sheet = cautions_for(
        [PlannedSubstance("Toluene", None, role="solvent"), PlannedSubstance("toluene", None)],
        PlannedConditions(solvent="toluene"),
    )
    assert [caution.name for caution in sheet.listed] == ["Toluene"]


def test_an_unlisted_solvent_is_named() -> None:
    assert cautions_for([], PlannedConditions(solvent="liquid X")).unlisted == ("liquid X",)


def test_the_most_severe_rule_comes_first() -> None:
    sheet = cautions_for(
        [PlannedSubstance("lithium", None)],
        PlannedConditions(solvent="dichloromethane", atmosphere="nitrogen", family_key="prato"),
    )
    severities = [rule.severity for rule in sheet.rules]
    assert severities == sorted(severities, key=["danger", "warning", "notice"].index)
    assert {"danger", "warning", "notice"} == set(severities)


def test_a_rule_names_what_meets_it_as_typed() -> None:
    sheet = cautions_for([PlannedSubstance("NaN3", None)], PlannedConditions(solvent="DCM"))
    (rule,) = [rule for rule in sheet.rules if rule.key == "azide_polyhalogenated_solvent"]
    assert rule.text.startswith("NaN3 with DCM:")
    assert "1285" in rule.source


# 24.5 mL per mmol at 25 °C; one CO2 per addition of an ylide: common practice.
@pytest.mark.parametrize(
    ("cage_mmol", "level", "equivalents", "words"),
    [
        (1.0, 1, None, "24.5 mL of carbon dioxide"),
        (1.0, 2, None, "49 mL of carbon dioxide"),
        (1.0, 1, 10.0, "245 mL of carbon dioxide"),
        (100.0, 1, None, "2.45 L of carbon dioxide"),
        (None, 1, None, "carbon dioxide (volume not known)"),
    ],
)
def test_the_gas_that_comes_off_is_given_in_volume(
    cage_mmol: float | None, level: float, equivalents: float | None, words: str
) -> None:
    sheet = cautions_for(
        [],
        PlannedConditions(
            family_key="prato", cage_mmol=cage_mmol, level=level, equivalents=equivalents
        ),
    )
    (rule,) = sheet.rules
    assert words in rule.text


def test_the_gas_of_a_labs_own_family_is_reckoned_with() -> None:
    own = family_from_data(
        {
            "key": "own",
            "name": "Own",
            "branch": "Own",
            "attaches": "a group",
            "attachment_points": 2,
            "sites": {"C60": 30},
            "level_counts": "one group",
            "by_products": [{"name": "carbon monoxide", "is_gas": True}],
            "source": "invented",
        }
    )
    sheet = cautions_for([], PlannedConditions(family_key="own", family=own, cage_mmol=1.0))
    assert {rule.key for rule in sheet.rules} == {"gas_evolved", "carbon_monoxide_evolved"}


# 24.0 mg NaH at 23.998 g/mol and 37.95 mg LiAlH4 at 37.954 g/mol are 1 mmol each (IUPAC weights).
@pytest.mark.parametrize(
    ("name", "mass_mg", "volume"),
    [("sodium hydride", 24.0, "24.5 mL"), ("lithium aluminium hydride", 37.954, "98 mL")],
)
def test_the_hydrogen_of_a_weighed_hydride_is_given_in_volume(
    name: str, mass_mg: float, volume: str
) -> None:
    sheet = cautions_for([PlannedSubstance(name, None, mass_mg=mass_mg)], PLAIN)
    (rule,) = [rule for rule in sheet.rules if rule.key == "hydride_hydrogen"]
    assert f"{volume} of hydrogen" in rule.text


# Flash point −30 °C: IEC 60079-20-1, as in the chemicals package.
def test_a_negative_limit_is_printed_with_its_sign() -> None:
    sheet = cautions_for([], PlannedConditions(solvent="carbon disulfide", temperature_c=20))
    (rule,) = [rule for rule in sheet.rules if rule.key == "above_flash_point"]
    assert "20 °C is above the flash point of carbon disulfide (−30 °C)" in rule.text


def test_a_solvent_known_by_its_structure_is_checked_under_the_name_typed() -> None:
    planned = PlannedSubstance("the solvent", "Cc1ccccc1", role="solvent")
    sheet = cautions_for([planned], PlannedConditions(temperature_c=150))
    (rule,) = [rule for rule in sheet.rules if rule.key == "above_boiling_point"]
    assert "the solvent (110.6 °C)" in rule.text
