import pytest
from rest_framework.test import APIClient

# Invented amounts.
PLAN = {
    "campaign": "ACC",
    "title": "Diethyl malonate mono-adduct",
    "family_key": "bingel",
    "cage": "C60",
    "addend": "*C(*)(C(=O)OCC)C(=O)OCC",
    "target_level": 1,
    "lines": [
        {"role": "cage", "name": "C60", "planned_mass_mg": 100, "purity": 0.99},
        {
            "role": "reagent",
            "name": "diethyl bromomalonate",
            "smiles": "CCOC(=O)C(Br)C(=O)OCC",
            "equivalents": 1.2,
        },
    ],
    "conditions": {"solvent": "toluene", "temperature_c": 25},
}


@pytest.fixture
def api(author):
    client = APIClient()
    client.force_login(author)
    return client


@pytest.fixture
def api_of():
    def client_of(user):
        client = APIClient()
        client.force_login(user)
        return client

    return client_of


@pytest.fixture
def plan():
    return {**PLAN}


@pytest.fixture
def planned(api, campaign, plan):
    answer = api.post("/api/reactions/", plan, format="json")
    assert answer.status_code == 201, answer.content
    return answer.json()
