import datetime

import pytest
from django.http import QueryDict

from reactions.models import Campaign, Component, Membership, Observation, Reaction, Reading, Role
from reactions.search.query import SearchQuery
from reactions.services.addends import store_addend


@pytest.fixture
def asked():
    """Return a function that reads a query from the parameters of an address."""
    return lambda address="": SearchQuery.from_address(QueryDict(address))


@pytest.fixture
def record(author):
    """Return a function that stores a reaction as the services would leave it."""

    def record(campaign, number, **values):
        values = {"title": f"run {number}", "family_key": "bingel", **values}
        return Reaction.objects.create(
            campaign=campaign, number=number, created_by=author, **values
        )

    return record


@pytest.fixture
def others(outsider):
    """A campaign of which the author is no member."""
    row = Campaign.objects.create(code="OTH", name="Others' work")
    Membership.objects.create(campaign=row, user=outsider, role=Role.AUTHOR)
    return row


@pytest.fixture
def book(campaign, others, record, author):
    """Five runs of one's own, one of others; invented."""
    malonate = store_addend("*C(*)(C(=O)OCC)C(=O)OCC", "diethyl malonate methano")
    pyrrolidine = store_addend("*CN(C)C*", "N-methylpyrrolidine")
    hot = record(
        campaign, 1, title="Pyrrolidine, hot", family_key="prato", addend=pyrrolidine,
        solvent="1,2-dichlorobenzene", temperature_c=150.0, duration_min=60.0, level_reached=3,
        yield_on_charged=0.4, performed_on=datetime.date(2026, 3, 1),
    )  # fmt: skip
    cool = record(
        campaign, 2, title="Pyrrolidine, cool", family_key="prato", addend=pyrrolidine,
        solvent="toluene", temperature_c=110.0, duration_min=120.0, level_reached=2,
        yield_on_charged=0.35, performed_on=datetime.date(2026, 3, 2),
    )  # fmt: skip
    methano = record(
        campaign, 3, title="Methano", family_key="bingel", addend=malonate, solvent="Toluene",
        temperature_c=22.0, duration_min=240.0, level_reached=1, yield_on_charged=0.45,
        performed_on=datetime.date(2026, 4, 1), conclusion="Clean; the base went in dropwise.",
    )  # fmt: skip
    c70 = record(
        campaign, 4, title="Methano on the larger cage", family_key="bingel_in_situ", cage="C70",
        addend=malonate, solvent="toluene",
    )  # fmt: skip
    bare = record(campaign, 5, title="Bromine", family_key="bromination")
    theirs = record(others, 1, title="Theirs", family_key="prato", addend=pyrrolidine)
    Component.objects.create(reaction=cool, position=1, role="reagent", name="Sarcosine")
    Component.objects.create(reaction=cool, position=2, role="aldehyde", name="sarcosine, 2nd")
    Observation.objects.create(reaction=hot, at_min=5, text="turned wine red", recorded_by=author)
    Reading.objects.create(
        reaction=methano, method="hplc", note="baseline drifts", recorded_by=author
    )
    return {
        "hot": hot, "cool": cool, "methano": methano, "c70": c70, "bare": bare, "theirs": theirs,
    }  # fmt: skip
