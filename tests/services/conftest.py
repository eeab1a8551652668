import pytest

from reactions.services.inputs import LineInput, PlanInput
from reactions.services.planning import plan_reaction
from reactions.services.revising import Edit

MALONATE = "*C(*)(C(=O)OCC)C(=O)OCC"


@pytest.fixture
def plan():
    """A Bingel mono-adduct of 100 mg of C60; invented amounts."""
    return PlanInput(
        title="Diethyl malonate mono-adduct",
        family_key="bingel",
        cage="C60",
        addend=MALONATE,
        addend_name="diethyl malonate methano",
        target_level=1,
        lines=[
            LineInput(role="cage", name="C60", planned_mass_mg=100.0, purity=0.99),
            LineInput(
                role="reagent",
                name="diethyl bromomalonate",
                smiles="CCOC(=O)C(Br)C(=O)OCC",
                equivalents=1.2,
                purity=0.92,
                density_g_per_ml=1.402,
            ),
            LineInput(
                role="base",
                name="DBU",
                smiles="C1CCC2=NCCCN2CC1",
                equivalents=2.0,
                equivalents_of="diethyl bromomalonate",
            ),
        ],
    )


@pytest.fixture
def reaction(author, campaign, plan):
    return plan_reaction(author, campaign, plan)


@pytest.fixture
def edit(author, reaction):
    return Edit(author, reaction.pk, reaction.version)
