"""The app does its work in someone else's site: two settings lines and one address line."""

import json
import re
import zipfile

import pytest

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
READING = {"method": "hplc", "mole_fraction_by_level": {"0": 0.4, "1": 0.45, "2": 0.15}}


def test_the_wheel_holds_the_app_its_tables_and_its_parts_and_not_the_site(wheel):
    names = zipfile.ZipFile(wheel).namelist()
    for wanted in (
        "reactions/py.typed",
        "reactions/migrations/0001_initial.py",
        "reactions/tables/families.json",
        "reactions/static/reactions/parts/openchemlib.js",
        "reactions/static/reactions/parts/licences/openchemlib.txt",
        "reactions/templates/reactions/frame.html",
    ):
        assert wanted in names
    assert not [name for name in names if name.startswith(("labbook/", "tests/", "fixtures/"))]
    assert not [name for name in names if "node_modules" in name or "package" in name]


def test_the_site_s_own_checks_find_nothing(mounted_site):
    assert "no issues" in mounted_site.manage("check")


def test_a_stranger_is_sent_to_the_log_in_page(visitor):
    address, page = visitor.get("lab/")
    assert "/lab/" in address
    assert 'name="password"' in page


def test_the_pages_bring_their_styles_and_scripts(owner):
    _, page = owner.get("lab/")
    paths = re.findall(r'(?:href|src)="(/[^"]+\.(?:css|js|svg))"', page)
    assert any("/parts/" in path for path in paths)
    for path in paths:
        owner.get(path)


def test_a_reaction_is_planned_recorded_and_found(owner):
    owner.post("lab/campaigns/", {"name": "Interlayer acceptors", "code": "ACC", "purpose": ""})
    planned = owner.send("POST", "lab/api/reactions/", PLAN)
    assert (planned["label"], planned["state"]) == ("ACC-1", "planned")
    # 1.2 equivalents of 99 mg C60; molar mass of C60 by IUPAC's atomic weights, 720.66 g/mol.
    assert planned["lines"][1]["planned_mmol"] == pytest.approx(1.2 * 99 / 720.66, rel=1e-4)

    record = "lab/api/reactions/ACC-1/"
    running = owner.send("POST", f"{record}state/", {"state": "running"})
    weighed = [
        {"role": "cage", "name": "C60", "planned_mass_mg": 100, "actual_mass_mg": 101},
        {**PLAN["lines"][1], "actual_mass_mg": 40},
    ]
    owner.send("PUT", f"{record}lines/", {"lines": weighed, "seen_version": running["version"]})
    owner.send("POST", f"{record}readings/", READING)
    done = owner.send("POST", f"{record}state/", {"state": "completed"})
    assert done["state"] == "completed"

    for path in ("lab/?text=mono-adduct", "lab/ACC-1/", "lab/ACC-1/print/"):
        _, page = owner.get(path)
        assert PLAN["title"] in page
    hits = json.loads(owner.get("lab/api/reactions/?family=bingel&substructure=C(=O)OCC")[1])
    assert [hit["label"] for hit in hits["results"]] == ["ACC-1"]


def test_a_calculator_answers(owner):
    asked = {"model": "independent_sites", "sites": 30, "uptake": 1.0}
    answer = owner.send("POST", "lab/api/compute/distribution/", asked)
    assert answer["mole_fraction"][1] == pytest.approx((29 / 30) ** 29, rel=1e-12)
