"""Whatever is sent, the answer is a refusal in words, never a fault of the server."""

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

pytestmark = pytest.mark.django_db

FIELDS = st.sampled_from(
    ["title", "campaign", "lines", "role", "name", "equivalents", "model", "sites", "uptake",
     "objective", "kind", "attenuation", "mole_fraction_by_level", "method", "at_min", "text",
     "steps", "fractions", "seen_version", "state", "temperature_c", "smiles", "cage", "code"]
)  # fmt: skip
LEAVES = (
    st.none()
    | st.booleans()
    | st.integers(-(10**30), 10**30)
    | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(max_size=20)
    | st.sampled_from(["\x00", "C60", "cage", "ACC", "hplc", "bingel", "plan", "∞", "1" * 400])
)
GARBAGE = st.recursive(
    LEAVES,
    lambda inner: (
        st.lists(inner, max_size=4) | st.dictionaries(FIELDS | st.text(max_size=5), inner)
    ),
    max_leaves=12,
)
WRITES = [
    ("post", "/api/reactions/"),
    ("put", "/api/reactions/ACC-1/lines/"),
    ("put", "/api/reactions/ACC-1/conditions/"),
    ("put", "/api/reactions/ACC-1/isolation/"),
    ("put", "/api/reactions/ACC-1/conclusion/"),
    ("post", "/api/reactions/ACC-1/observations/"),
    ("post", "/api/reactions/ACC-1/readings/"),
    ("post", "/api/reactions/ACC-1/state/"),
    ("post", "/api/campaigns/"),
    ("post", "/api/families/"),
    ("post", "/api/compute/distribution/"),
    ("post", "/api/compute/plan/"),
    ("post", "/api/compute/amounts/"),
    ("post", "/api/compute/cautions/"),
]


@pytest.mark.parametrize(("method", "address"), WRITES)
@settings(
    max_examples=25, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
@given(data=GARBAGE)
def test_garbage_is_refused(api, planned, method, address, data):
    answer = getattr(api, method)(address, data, format="json")
    assert answer.status_code < 500


@settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
@given(name=FIELDS | st.text(min_size=1, max_size=20), text=st.text(max_size=40))
def test_garbage_in_an_address_is_refused(api, campaign, name, text):
    assert api.get("/api/reactions/", {name: text}).status_code < 500
    assert api.get(f"/api/reactions/{name}/").status_code < 500
