"""Published procedures worked through: printed mg, mL and mmol agree to the digits printed.

Figures and sources are in ``published_procedures.json``. A printed figure stands for all that
rounds to it (or is cut to it, where it says so); two figures agree when what they stand for
overlaps.
"""

from __future__ import annotations

import json
from decimal import Decimal
from pathlib import Path

import pytest

from reactions.chemistry.amounts import AmountsRequest, amounts
from reactions.chemistry.masses import formula_mass

PROCEDURES = json.loads(
    (Path(__file__).parent / "published_procedures.json").read_text(encoding="utf-8")
)
PRINTED = {"mass_mg", "volume_ml", "mmol", "is_cut"}
LINES = [(procedure, line) for procedure in PROCEDURES for line in procedure["lines"]]
PRODUCTS = [(procedure, product) for procedure in PROCEDURES for product in procedure["products"]]


def stands_for(printed, *, is_cut=False):
    """Return the least and the greatest value that is printed so."""
    digits = Decimal(printed)
    last = Decimal(1).scaleb(digits.as_tuple().exponent)
    return tuple(
        float(digits + shift * last)
        for shift in ((Decimal(0), Decimal(1)) if is_cut else (Decimal("-0.5"), Decimal("0.5")))
    )


def overlap(one, other):
    return one[0] <= other[1] and other[0] <= one[1]


def worked_out(procedure, *lines, **fields):
    return amounts(
        AmountsRequest.model_validate(
            {
                "cage": procedure["cage"],
                "cage_mass_mg": float(procedure["cage_mass_mg"]),
                "lines": lines,
                **fields,
            }
        )
    )


def cage_masses(procedure):
    """Return the least and the greatest mass of cage that is printed so."""
    coarse = procedure.get("cage_mass_is_to_mg")  # printed in g, so a whole number of mg says less
    if coarse:
        mass = float(procedure["cage_mass_mg"])
        return mass - coarse / 2, mass + coarse / 2
    return stands_for(procedure["cage_mass_mg"])


def identified(procedure, *rest):
    return "-".join([procedure["key"], *(part["name"] for part in rest)])


@pytest.mark.parametrize("procedure", PROCEDURES, ids=lambda row: row["key"])
def test_the_cage_weighed_is_the_amount_printed(procedure):
    found = tuple(
        worked_out(procedure, cage_mass_mg=mass).cage_mmol for mass in cage_masses(procedure)
    )

    assert overlap(found, stands_for(procedure["cage_mmol"]))


@pytest.mark.parametrize(("procedure", "line"), LINES, ids=[identified(*row) for row in LINES])
def test_what_is_weighed_or_measured_is_the_amount_printed(procedure, line):
    measure = "mass_mg" if "mass_mg" in line else "volume_ml"
    known = {name: value for name, value in line.items() if name not in PRINTED}
    found = tuple(
        worked_out(procedure, {**known, f"actual_{measure}": entered}).lines[0].actual_mmol
        for entered in stands_for(line[measure], is_cut=line.get("is_cut", False))
    )

    assert overlap(found, stands_for(line["mmol"]))


@pytest.mark.parametrize(("procedure", "line"), LINES, ids=[identified(*row) for row in LINES])
def test_the_equivalents_printed_come_to_what_is_weighed_or_measured(procedure, line):
    measure = "mass_mg" if "mass_mg" in line else "volume_ml"
    known = {name: value for name, value in line.items() if name not in PRINTED}
    cage_mmol = worked_out(procedure).cage_mmol
    found = tuple(
        getattr(worked_out(procedure, {**known, "equivalents": mmol / cage_mmol}).lines[0], measure)
        for mmol in stands_for(line["mmol"])
    )

    assert overlap(found, stands_for(line[measure], is_cut=line.get("is_cut", False)))


@pytest.mark.parametrize(
    ("procedure", "product"), PRODUCTS, ids=[identified(*row) for row in PRODUCTS]
)
def test_the_product_at_its_yield_takes_the_cage_printed(procedure, product):
    found = sorted(
        worked_out(
            procedure,
            cage_mass_mg=None,
            product_mass_mg=mass,
            expected_yield=percent / 100,
            product_molar_mass_g_per_mol=formula_mass(product["formula"]),
        ).cage_mass_mg
        for mass in stands_for(product["mass_mg"])
        for percent in stands_for(product["percent"])
    )

    assert overlap((found[0], found[-1]), cage_masses(procedure))


@pytest.mark.parametrize(
    "procedure",
    [row for row in PROCEDURES if "solvent" in row],
    ids=lambda row: row["key"],
)
def test_the_solvent_used_dissolves_the_cage(procedure):
    result = worked_out(
        procedure,
        solvent=procedure["solvent"],
        solvent_volume_ml=procedure["solvent_volume_ml"],
        solubility_margin=1,  # the organocopper addition leaves less to spare than is advised
    )

    assert result.least_solvent_volume_ml <= procedure["solvent_volume_ml"]
    assert result.warnings == []


def test_enough_procedures_were_read():
    assert sum(row["how_known"] == "read" for row in PROCEDURES) >= 5
    assert {row["how_known"] for row in PROCEDURES} <= {"read", "memory"}
