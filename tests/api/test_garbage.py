"""Whatever is sent, the answer is a refusal in words, never a fault of the server.

Garbage alone seldom gets past the first check, so right bodies are spoilt at one place each; and
whatever is let in must be readable again, over the API and on the sheet.
"""

import copy
import json

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from reactions.models import Reaction

pytestmark = pytest.mark.django_db

RECORD = "/api/reactions/ACC-1/"
LEAVES = (
    st.none()
    | st.booleans()
    | st.integers(-(10**30), 10**30)
    | st.floats()
    | st.text(max_size=20)
    | st.sampled_from(["", "C60", "cage", "ACC", "hplc", "∞", "1" * 400, "<b>", "x" * 30_000])
    | st.sampled_from([0, -1, 1e308, 5e-324, 2**63, 70, 1e9, "2026-02-30", "0001-01-01", "1.5"])
)  # fmt: skip
GARBAGE = st.recursive(
    LEAVES,
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=9), inner),
    max_leaves=8,
)
LINES = [
    {"role": "cage", "name": "C60", "planned_mass_mg": 100, "actual_mass_mg": 101},
    {"role": "reagent", "name": "malonate", "smiles": "CCOC(=O)C(Br)C(=O)OCC", "equivalents": 1.2,
     "purity": 0.97, "density_g_per_ml": 1.4, "actual_volume_ml": 0.1, "equivalents_of": "C60"},
]  # fmt: skip
PLAN = {
    "campaign": "ACC", "title": "x", "family_key": "bingel", "cage": "C60", "target_level": 1,
    "addend": "*C(*)(C(=O)OCC)C(=O)OCC", "addend_name": "malonate", "lines": LINES,
    "predicted_composition": [0.4, 0.5, 0.1], "is_level_confirmed": False,
    "objective": {"kind": "most_of_level", "level": 1},
    "composition_model": {"model": "sequential", "sites": 30, "attenuation": [0.5, 0.4]},
    "conditions": {"solvent": "toluene", "temperature_c": 25, "performed_on": "2026-03-31"},
}  # fmt: skip
STEP = {"method": "column", "medium": "silica", "loading_mg": 90, "volume_ml": 500,
        "fractions": [{"name": "F1", "mass_mg": 50, "level": 1, "purity": 0.98}]}  # fmt: skip
MODEL = {"model": "sequential", "sites": 30, "attenuation": [0.5, 0.25], "reagent_efficiency": 0.8}
RIGHT = {
    "/api/reactions/": PLAN,
    f"{RECORD}lines/": {"lines": LINES},
    f"{RECORD}conditions/": {"solvent": "toluene", "temperature_c": 60, "duration_min": 90,
                             "light": "dark", "atmosphere": "argon",
                             "performed_on": "2026-03-31"},
    f"{RECORD}isolation/": {"steps": [STEP]},
    f"{RECORD}conclusion/": {"conclusion": "brown", "recovered_cage_mg": 20, "title": "y"},
    f"{RECORD}observations/": {"at_min": 30, "kind": "sample", "text": "brown"},
    f"{RECORD}readings/": {"method": "hplc", "mole_fraction_by_level": {"0": 0.5, "1": 0.4},
                           "sampled_at_min": 30, "is_higher_lumped": True, "note": "x"},
    f"{RECORD}state/": {"state": "running", "seen_version": 1},
    "/api/campaigns/": {"code": "NEW", "name": "New series", "purpose": "x"},
    "/api/campaigns/ACC/members/author/": {"role": "author"},
    "/api/families/": {"key": "own", "name": "x", "sites": {"C60": 30}, "roles": [{}]},
    "/api/compute/distribution/": {**MODEL, "equivalents": 1},
    "/api/compute/plan/": {**MODEL, "objective": PLAN["objective"], "cage_mass_mg": 5},
    "/api/compute/curve/": {**MODEL, "points": 20, "highest_equivalents": 4},
    "/api/compute/amounts/": {"cage_mass_mg": 5, "solvent": "toluene", "lines": [
        {"name": "x", "smiles": "CCO", "equivalents": 2, "purity": 0.9}]},
    "/api/compute/cautions/": {"substances": [{"name": "toluene", "smiles": "Cc1ccccc1"}],
                               "temperature_c": 110, "level": 1},
}  # fmt: skip
PUTS = ("lines/", "conditions/", "isolation/", "conclusion/", "members/author/")


def places(value, path=()):
    """Return the path of every value within ``value``, its own first."""
    inner = []
    if isinstance(value, (dict, list)):
        inner = value.items() if isinstance(value, dict) else enumerate(value)
    return [path, *(place for key, part in inner for place in places(part, (*path, key)))]


def spoilt(body, path, garbage):
    if not path:
        return garbage
    whole = copy.deepcopy(body)
    node = whole
    for key in path[:-1]:
        node = node[key]
    node[path[-1]] = garbage
    return whole


@pytest.mark.parametrize("address", RIGHT)
@settings(max_examples=40, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(data=st.data())
def test_what_is_spoilt_is_refused_or_readable(api, client, author, planned, address, data):
    path = data.draw(st.sampled_from(places(RIGHT[address])))
    body = json.dumps(spoilt(RIGHT[address], path, data.draw(GARBAGE)))
    method = "PUT" if address.endswith(PUTS) else "POST"
    seen = {"If-Match": str(Reaction.objects.get(number=1).version)} if method == "PUT" else {}
    answer = api.generic(method, address, body, content_type="application/json", headers=seen)
    assert answer.status_code in {200, 201, 400, 409}, answer.content
    if answer.status_code == 400:
        assert all(texts and all(texts) for texts in answer.json()["errors"].values())
    elif "/reactions/" in address:
        label = answer.json().get("label", "ACC-1")
        client.force_login(author)
        assert api.get(f"/api/reactions/{label}/").status_code == 200
        assert client.get(f"/{label}/").status_code == 200


@pytest.mark.parametrize("address", RIGHT)
def test_what_is_right_is_let_in(api, planned, address):
    method = "PUT" if address.endswith(PUTS) else "POST"
    seen = {"If-Match": "1"} if method == "PUT" else {}
    body = json.dumps(RIGHT[address])
    answer = api.generic(method, address, body, content_type="application/json", headers=seen)
    assert answer.status_code == (400 if "families" in address else 200) or (
        answer.status_code == 201
    ), answer.content


@settings(max_examples=60, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(name=st.text(min_size=1, max_size=20), text=st.text(max_size=40))
def test_garbage_in_an_address_is_refused(api, campaign, name, text):
    assert api.get("/api/reactions/", {name: text}).status_code < 500
    assert api.get(f"/api/reactions/{name}/").status_code < 500
    for field in ("text", "family", "substructure", "addend", "solvent", "page", "performed_to"):
        assert api.get("/api/reactions/", {field: text}).status_code < 500
