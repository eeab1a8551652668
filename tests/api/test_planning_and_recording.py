import pytest

pytestmark = pytest.mark.django_db
LINES = "/api/reactions/ACC-1/lines/"


def test_a_plan_comes_back_worked_out(planned):
    assert (planned["label"], planned["state"], planned["version"]) == ("ACC-1", "planned", 1)
    reagent = planned["lines"][1]
    # Derived: 1.2 · 99 mg / 720.66 g/mol.
    assert reagent["planned_mmol"] == pytest.approx(1.2 * 99 / 720.66, rel=1e-4)
    assert planned["addend"]["formula"] == "C7H10O4"


def test_the_whole_record_over_the_api(api, planned):
    address = "/api/reactions/ACC-1/"
    assert api.post(f"{address}state/", {"state": "running"}, format="json").status_code == 200
    lines = [
        {**_typed(planned["lines"][0]), "actual_mass_mg": 101.0},
        {**_typed(planned["lines"][1]), "actual_mass_mg": 40.0},
    ]
    answer = api.put(LINES, {"lines": lines, "seen_version": 2}, format="json")
    assert answer.json()["lines"][1]["actual_equivalents"] == pytest.approx(
        40 / 239.065 / (101 * 0.99 / 720.66), rel=1e-4
    )
    observed = {"at_min": 30, "kind": "sample", "text": "dark brown"}
    assert api.post(f"{address}observations/", observed, format="json").status_code == 201
    reading = {"method": "hplc", "mole_fraction_by_level": {"0": 0.4, "1": 0.45, "2": 0.15}}
    assert api.post(f"{address}readings/", reading, format="json").status_code == 201
    steps = [{"method": "column", "fractions": [{"mass_mg": 50, "level": 1}]}]
    isolated = api.put(
        f"{address}isolation/", {"steps": steps, "seen_version": 5}, format="json"
    ).json()
    assert isolated["mass_balance"]["yield_on_charged"] == pytest.approx(
        50 / 878.813 / (101 * 0.99 / 720.66), rel=1e-4
    )
    concluded = {"conclusion": "as planned", "seen_version": 6}
    assert api.put(f"{address}conclusion/", concluded, format="json").status_code == 200
    assert api.post(f"{address}state/", {"state": "completed"}, format="json").status_code == 200
    signed = api.post(f"{address}signature/", {"seen_version": 8}, format="json").json()
    assert signed["state"] == "signed"
    assert signed["signatures"][0]["is_true_today"]
    assert api.put(f"{address}conclusion/", concluded, format="json").status_code == 409


def _typed(line):
    computed = {"planned_mmol", "planned_volume_ml", "actual_equivalents"}
    kept = {name: value for name, value in line.items() if name not in computed}
    if line["role"] != "cage":
        kept["planned_mass_mg"] = None
    return kept


def test_a_conflict_says_what_changed_and_stores_nothing(api, api_of, second_author, planned):
    address = "/api/reactions/ACC-1/conditions/"
    api.put(address, {"temperature_c": 60, "seen_version": 1}, format="json")
    other = api_of(second_author)
    answer = other.put(address, {"temperature_c": 80, "seen_version": 1}, format="json")
    assert answer.status_code == 409
    changes = answer.json()["conflict"]["changes"]
    assert {"field": "temperature_c", "before": 25.0, "after": 60.0, "made_by": "author"} in changes
    assert api.get("/api/reactions/ACC-1/").json()["temperature_c"] == 60


def test_an_unusual_level_is_confirmed(api, campaign, plan):
    high = {**plan, "target_level": 20}
    answer = api.post("/api/reactions/", high, format="json")
    assert (answer.status_code, answer.json()["confirm"]["field"]) == (409, "target_level")
    confirmed = {**high, "is_level_confirmed": True}
    assert api.post("/api/reactions/", confirmed, format="json").status_code == 201


@pytest.mark.parametrize(
    ("change", "field"),
    [
        ({"title": ""}, "title"),
        ({"family_key": "bingle"}, "family_key"),
        ({"addend": "C(C"}, "addend"),
        ({"cage": "glass"}, "cage"),
        ({"target_level": 31}, "target_level"),
        ({"campaign": "NONE"}, "campaign"),
        ({"conditions": {"temperature_c": -400}}, "conditions.temperature_c"),
        ({"lines": [{"role": "base", "name": "DBU", "purity": 1.2}]}, "lines.0.purity"),
        ({"lines": [{"role": "base", "name": "DBU", "smiles": "C(("}]}, "lines.0.smiles"),
        ({"colour": "brown"}, "colour"),
        ({"objective": {"kind": "most_of_level", "level": None}}, "objective.level"),
        ({"objective": {"kind": "best"}}, "objective"),
        ({"composition_model": {"model": "guess"}}, "composition_model.model"),
        ({"predicted_composition": [1.2]}, "predicted_composition.0"),
    ],
)
def test_bad_input_is_an_error_at_its_field(api, campaign, plan, change, field):
    answer = api.post("/api/reactions/", {**plan, **change}, format="json")
    assert answer.status_code == 400
    assert list(answer.json()["errors"]) == [field]


def test_rows_are_taken_out_again(api, planned):
    address = "/api/reactions/ACC-1/"
    observed = api.post(f"{address}observations/", {"at_min": 1, "text": "x"}, format="json").json()
    read = {"method": "nmr", "mole_fraction_by_level": {"1": 1}}
    reading = api.post(f"{address}readings/", read, format="json").json()
    first, second = observed["observations"][0]["id"], reading["readings"][0]["id"]
    assert api.delete(f"{address}observations/{first}/").json()["observations"] == []
    assert api.delete(f"{address}readings/{second}/").json()["readings"] == []
    assert api.delete(f"{address}readings/{second}/").status_code == 400


def test_a_reviewer_countersigns(api, api_of, reviewer, planned):
    address = "/api/reactions/ACC-1/"
    for state in ("running", "completed"):
        api.post(f"{address}state/", {"state": state}, format="json")
    assert api_of(reviewer).post(f"{address}countersignature/").status_code == 409
    assert api.post(f"{address}signature/", headers={"If-Match": '"3"'}).status_code == 200
    answer = api_of(reviewer).post(f"{address}countersignature/")
    assert [row["role"] for row in answer.json()["signatures"]] == ["author", "reviewer"]
