"""Finding past conditions, as a person does it: pyrrolidines in a hot aromatic solvent."""

import csv
import io
import json
import re

import pytest
from django.urls import reverse
from playwright.sync_api import expect

SEARCH = reverse("reactions:search")
# One press of the pointer in the drawing, in the editor's own measure: the tools stand in a column
# of two by seventeen, the ring of five in the ninth row.
_TOOL_ROWS = 17


@pytest.fixture
def page(logged_in_page):
    page = logged_in_page("chemist")
    page.goto(SEARCH)
    return page


def hits(page):
    return int(re.match(r"\d+", page.locator("#hits-count").inner_text()).group())


def wait_for_address(page, part):
    page.wait_for_url(lambda address: part in address)


def test_pyrrolidines_in_dichlorobenzene_above_120(page):
    everything = hits(page)
    page.get_by_label("Part of the addend").press_sequentially("C1CCNC1")
    wait_for_address(page, "substructure=C1CCNC1")
    expect(page.locator("#ask_substructure_shown svg")).to_be_visible()
    page.get_by_label("Solvent").select_option("1,2-dichlorobenzene")
    wait_for_address(page, "solvent=")
    page.get_by_label("Temperature, from").fill("120 °C")
    page.get_by_label("Temperature, from").press("Tab")
    wait_for_address(page, "temperature_c_lowest=120")
    few = hits(page)
    assert 0 < few < everything
    rows = page.locator(".hit")
    expect(rows).to_have_count(few)
    for row in rows.all():
        expect(row).to_contain_text("1,2-dichlorobenzene")
        assert float(re.search(r"(\d+) °C", row.inner_text()).group(1)) >= 120
        expect(row.locator("svg.strip").or_(row.get_by_text("no composition"))).to_be_visible()
        expect(row.locator("img")).to_have_attribute("alt", re.compile("pyrrolidine"))
    page.reload()
    assert hits(page) == few
    expect(page.get_by_label("Temperature, from")).to_have_value("120")


def test_a_kind_of_addition_is_chosen_in_the_tree_and_left_out_again(page):
    everything = hits(page)
    family = page.get_by_label(re.compile("^Prato"))
    family.check()
    wait_for_address(page, "family=prato")
    assert hits(page) == int(page.locator("#count-family-prato").inner_text())
    expect(family).to_be_checked()
    page.get_by_role("link", name=re.compile("by Prato")).click()
    page.wait_for_url(lambda address: "prato" not in address)
    assert hits(page) == everything


def test_going_back_takes_up_the_last_question(page):
    page.get_by_label("Cage", exact=True).select_option("C70")
    wait_for_address(page, "cage=C70")
    page.go_back()
    expect(page.get_by_label("Cage", exact=True)).to_have_value("")


def test_hits_are_sorted(page):
    page.get_by_label("Sorted by").select_option("-temperature")
    wait_for_address(page, "sort=-temperature")
    shown = re.findall(r"(\d+) °C", page.locator(".hits-list").inner_text())
    temperatures = [float(value) for value in shown]
    assert len(temperatures) > 5
    assert temperatures == sorted(temperatures, reverse=True)


def test_a_bad_value_is_told_while_typing_and_stays(page):
    field = page.get_by_label("Temperature, from")
    field.fill("warm")
    field.press("Tab")
    expect(page.get_by_text("“warm” holds no number")).to_be_visible()
    expect(field).to_have_value("warm")
    expect(field).to_have_attribute("aria-invalid", "true")
    field.fill("100")
    field.press("Tab")
    expect(page.get_by_text("holds no number")).to_have_count(0)
    expect(field).not_to_have_attribute("aria-invalid", "true")


def test_nothing_found_says_what_to_leave_out(page):
    page.goto(f"{SEARCH}?substructure=C1CCNC1&level_lowest=60")
    page.get_by_role("link", name=re.compile("without “level 60")).click()
    assert hits(page) > 0


def test_a_ring_is_drawn_and_found(page):
    everything = hits(page)
    page.get_by_role("button", name="Draw").click()
    tools, area = (
        page.locator("[data-canvas] canvas").nth(place).bounding_box() for place in (0, 1)
    )
    row = tools["height"] / _TOOL_ROWS
    page.mouse.click(tools["x"] + tools["width"] / 4, tools["y"] + 8.5 * row)
    page.mouse.click(area["x"] + area["width"] / 2, area["y"] + area["height"] / 2)
    wait_for_address(page, "substructure=C1CCCC1")
    assert 0 <= hits(page) < everything


def test_all_hits_are_downloaded(page):
    page.goto(f"{SEARCH}?family=prato")
    count = hits(page)
    with page.expect_download() as caught:
        page.get_by_role("link", name="CSV").click()
    text = caught.value.path().read_text(encoding="utf-8-sig")
    assert len(list(csv.DictReader(io.StringIO(text)))) == count
    with page.expect_download() as caught:
        page.get_by_role("link", name="JSON").click()
    rows = json.loads(caught.value.path().read_text(encoding="utf-8"))
    assert {row["family_key"] for row in rows} == {"prato"}
    assert len(rows) == count


def test_without_script_the_form_asks_as_well(open_page, logged_in_page):
    cookies = logged_in_page("chemist").context.storage_state()
    page = open_page(java_script_enabled=False, storage_state=cookies)
    page.goto(SEARCH)
    page.get_by_label("Cage", exact=True).select_option("C70")
    page.get_by_role("button", name="Find").click()
    assert "cage=C70" in page.url
    assert hits(page) > 0


@pytest.mark.parametrize("colour_scheme", ["light", "dark"])
@pytest.mark.parametrize("width", [1280, 390])
@pytest.mark.parametrize(
    "address",
    [
        "",
        "?substructure=C1CCNC1&family=prato&level_lowest=1",
        "?level_lowest=60&cage=C70",
        "?temperature_c_lowest=warm&substructure=C1(",
    ],
)
def test_the_page_is_accessible_and_fits(
    logged_in_page, accessibility_faults, address, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto(f"{SEARCH}{address}")
    page.wait_for_load_state("networkidle")
    assert accessibility_faults(page) == []
    assert page.evaluate("document.documentElement.scrollWidth <= innerWidth")
