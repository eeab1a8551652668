"""A person brings a lab's spreadsheet in."""

import pytest
from playwright.sync_api import expect

_SCREENS = [(width, scheme) for width in (1280, 390) for scheme in ("light", "dark")]
HEADER = "title,family,C60 mass / mg,solvent,temp / °C,x0,x1\n"


def spreadsheet(path, count, mass="100"):
    """Write invented rows, the last of them with ``mass``."""
    rows = [f"Old run {at},bingel,100,toluene,25,40 %,60 %\n" for at in range(1, count)]
    rows.append(f"Old run {count},bingel,{mass},toluene,25,40 %,60 %\n")
    path.write_text(HEADER + "".join(rows), encoding="utf-8")
    return path


def send(page, path):
    page.goto("/history/")
    page.get_by_label("Spreadsheet").set_input_files(path)
    page.get_by_role("button", name="Read the columns").click()
    expect(page.get_by_role("heading", name="What the columns hold")).to_be_visible()


def test_a_bad_row_is_named_then_the_corrected_file_comes_in_and_is_found(logged_in_page, tmp_path):
    page = logged_in_page("chemist")
    send(page, spreadsheet(tmp_path / "old.csv", 3, mass="a pinch"))
    page.get_by_role("button", name="Check all rows").click()
    expect(page.get_by_text("nothing was stored").first).to_be_visible(timeout=60_000)
    expect(page.get_by_role("cell", name="a pinch").first).to_be_visible()
    send(page, spreadsheet(tmp_path / "corrected.csv", 3))
    page.get_by_role("button", name="Check all rows").click()
    expect(page.get_by_text("3 reactions are stored")).to_be_visible(timeout=60_000)
    page.get_by_role("link", name="See them").click()
    expect(page.get_by_text("Old run 3")).to_be_visible()


def test_a_running_import_is_watched_and_cancelled(logged_in_page, tmp_path):
    page = logged_in_page("chemist")
    send(page, spreadsheet(tmp_path / "long.csv", 40_000))
    page.get_by_role("button", name="Check all rows").click()
    expect(page.get_by_text("rows checked")).to_be_visible(timeout=60_000)
    page.get_by_role("button", name="Cancel: store nothing").click()
    expect(page.get_by_text("cancelled; nothing was stored", exact=False)).to_be_visible(
        timeout=60_000
    )


@pytest.mark.parametrize(("width", "colour_scheme"), _SCREENS)
def test_the_pages_are_accessible_and_never_scroll_sideways(
    logged_in_page, accessibility_faults, tmp_path, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto("/history/")
    assert accessibility_faults(page) == []
    send(page, spreadsheet(tmp_path / "columns.csv", 2))
    assert accessibility_faults(page) == []
    assert page.evaluate("document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize(("width", "colour_scheme"), _SCREENS)
def test_the_description_of_the_api_is_accessible(
    logged_in_page, accessibility_faults, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto("/api/")
    page.get_by_text("/api/compute/plan/").click()
    assert accessibility_faults(page) == []
    assert page.evaluate("document.documentElement.scrollWidth") <= width
