"""Planning amounts, as a person does it: a mono-adduct from half a gram of C60."""

import re

import pytest
from django.urls import reverse
from playwright.sync_api import expect

PLANNER = reverse("reactions:planner")
FAMILIES = reverse("reactions:families")
_TOOL_ROWS = 17


@pytest.fixture
def page(logged_in_page):
    page = logged_in_page("chemist")
    page.goto(PLANNER)
    return page


def choose_bingel(page):
    page.get_by_label("Addition family").select_option("bingel")
    expect(page.get_by_label("Substance").first).to_have_value("diethyl bromomalonate")


def weighing(page):
    return page.locator(".plan-weighing table")


def test_from_a_wish_to_a_planned_reaction(page):
    choose_bingel(page)
    expect(page.locator("#plan-cautions")).to_contain_text("H225")
    page.get_by_label("Usual in this family").select_option(index=1)
    expect(page.locator("#plan_addend_shown svg")).to_be_visible()
    page.get_by_label("Mass of cage").press_sequentially("0.5 g")
    expect(weighing(page)).to_contain_text("500 mg")
    expect(weighing(page).get_by_role("row", name=re.compile("bromomalonate"))).to_contain_text(
        re.compile(r"\d mg")
    )
    page.get_by_label("mono : multi at least").check()
    page.get_by_label("Ratio, to 1", exact=True).fill("5")
    expect(page.locator("#plan-expected")).to_contain_text("5.00 : 1")
    expect(page.locator("svg.curve")).to_be_visible()
    page.get_by_label("Campaign").select_option("ACC")
    page.get_by_label("Title").fill("Walked through by hand")
    page.get_by_role("button", name="Plan this reaction").click()
    page.wait_for_url(re.compile(r"/ACC-\d+/"))
    body = page.locator("main")
    expect(body).to_contain_text("Walked through by hand")
    expect(body).to_contain_text("diethyl bromomalonate")


def test_the_target_is_dragged_and_typed(page):
    choose_bingel(page)
    caption = page.locator(".plan-curve figcaption")
    expect(caption).to_contain_text("mono")
    slider = page.get_by_role("slider", name=re.compile("^Level"))
    slider.focus()
    slider.press("ArrowRight")
    expect(page.get_by_label("Level", exact=True)).to_have_value("2")
    expect(caption).to_contain_text("bis")
    page.get_by_label("Level", exact=True).fill("3")
    expect(caption).to_contain_text("tris")
    expect(slider).to_have_value("3")


def test_a_level_above_what_is_known_asks_to_be_confirmed(page):
    choose_bingel(page)
    page.get_by_label("Campaign").select_option("SPIN")
    page.get_by_label("Mass of cage").fill("100 mg")
    page.get_by_label("Level", exact=True).fill("9")
    expect(page.locator("#plan-question")).to_contain_text("the highest known")
    page.get_by_role("button", name="Plan this reaction").click()
    expect(page.locator("#plan-question .field-error")).to_be_visible()
    expect(page.get_by_label("Mass of cage")).to_have_value("100 mg")
    page.get_by_label("That is meant").check()
    page.get_by_role("button", name="Plan this reaction").click()
    page.wait_for_url(re.compile(r"/SPIN-\d+/"))


def test_bad_values_are_told_while_typing_and_stay(page):
    choose_bingel(page)
    mass = page.get_by_label("Mass of cage")
    mass.press_sequentially("500")
    expect(page.get_by_text("500 has no unit")).to_be_visible()
    expect(mass).to_have_attribute("aria-invalid", "true")
    mass.press_sequentially(" mg")
    expect(page.get_by_text("has no unit")).to_have_count(0)
    addend = page.get_by_label("Addend", exact=True)
    addend.fill("C(C")
    expect(page.get_by_text("can't be read as SMILES")).to_be_visible()
    expect(addend).to_have_value("C(C")


def test_what_is_typed_while_a_family_is_filled_in_is_kept(page):
    page.get_by_label("Addition family").select_option("prato")
    page.get_by_label("Mass of cage").fill("250 mg")
    expect(page.get_by_label("Substance").first).to_have_value("N-methylglycine")
    expect(page.get_by_label("Mass of cage")).to_have_value("250 mg")
    expect(weighing(page)).to_contain_text("250 mg")


def test_a_reload_keeps_what_was_typed(page):
    choose_bingel(page)
    page.get_by_label("Mass of cage").fill("0.3 g")
    expect(weighing(page)).to_contain_text("300 mg")
    page.wait_for_url(re.compile("cage_mass=0.3"))
    page.reload()
    expect(page.get_by_label("Mass of cage")).to_have_value("0.3 g")
    expect(weighing(page)).to_contain_text("300 mg")


@pytest.mark.parametrize("width", [1280, 390])
def test_an_addend_is_drawn_and_bonded_to_the_cage(logged_in_page, width):
    page = logged_in_page("chemist", width)
    page.goto(f"{PLANNER}?family=radical_alkyl")
    page.get_by_role("button", name="Draw").click()
    page.locator("[data-canvas] canvas").first.wait_for()
    page.get_by_role("button", name="Attach to the cage").scroll_into_view_if_needed()

    def boxes():
        canvas = page.locator("[data-canvas] canvas")
        return canvas.nth(0).bounding_box(), canvas.nth(1).bounding_box()

    press = page.touchscreen.tap if width < 600 else page.mouse.click
    page.evaluate("document.querySelector('[data-canvas]').scrollIntoView({block: 'center'})")
    tools, area = boxes()
    press(tools["x"] + tools["width"] * 3 / 4, tools["y"] + 8.5 * tools["height"] / _TOOL_ROWS)
    press(area["x"] + area["width"] / 2, area["y"] + area["height"] / 2)
    field = page.get_by_label("Addend", exact=True)
    expect(field).to_have_value("C1CCCCC1")
    page.get_by_role("button", name="Attach to the cage").click()
    page.evaluate("document.querySelector('[data-canvas]').scrollIntoView({block: 'center'})")
    _, area = boxes()
    press(area["x"] + area["width"] / 2, area["y"] + area["height"] / 2 - 22)
    expect(field).to_have_value("*C1CCCCC1")
    shown = page.locator("#plan_addend_shown")
    expect(shown).to_contain_text("adds 83.15 g/mol")
    expect(shown).to_contain_text("1 cage carbon")


def test_two_presses_on_the_same_place_give_one_atom_both_bonds_to_the_cage(page):
    choose_bingel(page)
    field = page.get_by_label("Addend", exact=True)
    page.get_by_role("button", name="Draw").click()
    page.locator("[data-canvas] canvas").first.wait_for()
    page.evaluate("document.querySelector('[data-canvas]').scrollIntoView({block: 'center'})")
    canvas = page.locator("[data-canvas] canvas")
    tools, area = canvas.nth(0).bounding_box(), canvas.nth(1).bounding_box()
    page.mouse.click(
        tools["x"] + tools["width"] / 4, tools["y"] + 5.5 * tools["height"] / _TOOL_ROWS
    )
    # A drawing far from the middle, and larger than the editor would have it.
    left, top = area["x"] + 60, area["y"] + 60
    for start, end in ([(0, 0), (50, 0)], [(50, 0), (50, 50)]):
        page.mouse.move(left + start[0], top + start[1])
        page.mouse.down()
        page.mouse.move(left + end[0], top + end[1], steps=3)
        page.mouse.up()
    expect(field).to_have_value("CCC")
    page.get_by_role("button", name="Attach to the cage").click()
    middle = area["x"] + area["width"] / 2, area["y"] + area["height"] / 2
    for _ in range(2):
        page.mouse.click(middle[0] + 8, middle[1] - 8)
    expect(field).to_have_value("*C(*)(C)C")


def test_a_typed_addend_is_drawn_again_when_the_drawing_is_opened(page):
    field = page.get_by_label("Addend", exact=True)
    field.fill("*C(*)(C(=O)OC)C(=O)OC")
    page.get_by_role("button", name="Draw").click()
    page.locator("[data-canvas] canvas").first.wait_for()
    expect(field).to_have_value("*C(*)(C(=O)OC)C(=O)OC")
    page.get_by_role("button", name="Clear").click()
    expect(field).to_have_value("")


def test_without_script_the_buttons_do_the_same(open_page, logged_in_page):
    cookies = logged_in_page("chemist").context.storage_state()
    page = open_page(java_script_enabled=False, storage_state=cookies)
    page.goto(PLANNER)
    page.get_by_label("Addition family").select_option("prato")
    page.get_by_role("button", name="Fill in what is usual").click()
    expect(page.get_by_label("Substance").first).to_have_value("N-methylglycine")
    page.get_by_label("Mass of cage").fill("0.5 g")
    page.get_by_role("button", name="Work out").click()
    expect(weighing(page)).to_contain_text("500 mg")
    expect(page.get_by_label("Mass of cage")).to_have_value("0.5 g")


@pytest.mark.parametrize("colour_scheme", ["light", "dark"])
@pytest.mark.parametrize("width", [1280, 390])
@pytest.mark.parametrize(
    "address",
    [
        PLANNER,
        f"{PLANNER}?family=prato&basis=cage&cage=C60&cage_mass=0.5+g&objective=band&band_lowest=1"
        "&band_highest=40&solvent=toluene&addend=C(C&lines-0-name=N-methylglycine&model=sequential",
        f"{PLANNER}?family=bingel&basis=cage&cage=C60&cage_mass=0.5+g&objective=most_of_level"
        "&level=8&solvent=toluene&solvent_volume=5+mL&addend=*C(*)(C(=O)OCC)C(=O)OCC"
        "&lines-0-name=diethyl+bromomalonate&lines-1-name=house+mixture",
        FAMILIES,
    ],
)
def test_the_pages_are_accessible_and_fit(
    logged_in_page, accessibility_faults, address, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto(address)
    page.wait_for_load_state("networkidle")
    for fold in page.locator("details > summary").all()[:6]:
        if fold.is_visible():
            fold.click()
    assert accessibility_faults(page) == []
    assert page.evaluate("document.documentElement.scrollWidth <= innerWidth")
