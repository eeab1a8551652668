"""A planned reaction, and the browserless client of a person who is logged in."""

import pytest
from django.test import Client
from django.urls import reverse

from reactions.models import Reaction
from reactions.services.inputs import ConditionsInput, LineInput, PlanInput
from reactions.services.planning import plan_reaction

MALONATE = "*C(*)(C(=O)OCC)C(=O)OCC"


@pytest.fixture
def signed_in():
    """Return a function that gives the client of a person; ``enhanced`` asks as htmx does."""

    def signed_in(person, enhanced=False):
        client = Client(headers={"HX-Request": "true"} if enhanced else None)
        client.force_login(person)
        return client

    return signed_in


@pytest.fixture
def planned(author, campaign):
    """A planned reaction of invented amounts: 500 mg of C60 and 1.1 equivalents of reagent."""
    return plan_reaction(
        author,
        campaign,
        PlanInput(
            title="Diethyl malonate mono-adduct",
            family_key="bingel",
            addend=MALONATE,
            addend_name="diethyl malonate",
            target_level=1,
            objective={"kind": "mono_to_multi", "ratio": 5},
            predicted_composition=[0.45, 0.4, 0.12, 0.03],
            lines=[
                LineInput(role="cage", name="C60", planned_mass_mg=500),
                LineInput(
                    role="reagent",
                    name="diethyl bromomalonate",
                    smiles="CCOC(=O)C(Br)C(=O)OCC",
                    equivalents=1.1,
                    purity=0.92,
                    density_g_per_ml=1.402,
                ),
            ],
            conditions=ConditionsInput(
                solvent="toluene", solvent_volume_ml=250, temperature_c=22, duration_min=240
            ),
        ),
    )


@pytest.fixture
def sheet_of():
    """Return a function that gives the address of a reaction's sheet, or of a part of it."""

    def sheet_of(reaction, part=None, name="part"):
        arguments = [reaction.campaign.code, reaction.number]
        if name != "part":
            return reverse(f"reactions:{name}", args=arguments)
        if part is None:
            return reverse("reactions:sheet", args=arguments)
        return reverse("reactions:part", args=[*arguments, part])

    return sheet_of


@pytest.fixture
def typed_lines():
    """Return a function that gives the weighing list as a browser posts it."""

    def typed_lines(*lines, **others):
        data = {"seen_version": "1", **others}
        for place, line in enumerate(lines):
            data[f"lines-{place}-row"] = "1"
            filled = {"role": "reagent", "name": "", "charge": "", "actual": "", **line}
            data |= {f"lines-{place}-{name}": value for name, value in filled.items()}
        return data

    return typed_lines


@pytest.fixture
def typed_conditions():
    """Return a function that gives the conditions as a browser posts them."""

    def typed_conditions(seen_version=1, **typed):
        values = {
            "solvent": "toluene",
            "solvent_volume_ml": "250 mL",
            "temperature_c": "22 °C",
            "duration_min": "4 h",
            **typed,
        }
        return {
            "seen_version": str(seen_version),
            **{f"conditions-{name}": value for name, value in values.items()},
        }

    return typed_conditions


@pytest.fixture
def stored_again():
    """Return a function that reads a reaction afresh from the database."""
    return lambda reaction: Reaction.objects.select_related("campaign").get(pk=reaction.pk)
