"""The app does its work in someone else's site: two settings lines and one address line."""

import zipfile

import pytest

pytestmark = pytest.mark.xdist_group("mounted")


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
