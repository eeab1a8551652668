"""Recording a reaction at the bench, from the balance to the signature, as a person types it."""

import re

import pytest
from django.urls import reverse
from playwright.sync_api import expect

# A plan that is not in the demo, of invented amounts, in a campaign of its own.
_PLAN = """
from django.contrib.auth import get_user_model
from reactions.models import Campaign, Membership
from reactions.services.campaigns import open_campaign, set_member
from reactions.services.inputs import ConditionsInput, LineInput, PlanInput
from reactions.services.planning import plan_reaction
person = get_user_model().objects.get(username="chemist")
campaign = Campaign.objects.filter(code="BENCH").first() or open_campaign(
    person, code="BENCH", name="Bench trials", is_invented=True
)
set_member(person, campaign, "reviewer", "reviewer")
set_member(person, campaign, "guest", "reader")
reaction = plan_reaction(person, campaign, PlanInput(
    title="Diisopropyl malonate mono-adduct", family_key="bingel", target_level=1,
    addend="*C(*)(C(=O)OC(C)C)C(=O)OC(C)C", addend_name="diisopropyl malonate",
    objective={"kind": "most_of_level", "level": 1}, predicted_composition=[0.4, 0.4, 0.15, 0.05],
    lines=[
        LineInput(role="cage", name="C60", planned_mass_mg=200),
        LineInput(role="reagent", name="diisopropyl bromomalonate",
                  smiles="CC(C)OC(=O)C(Br)C(=O)OC(C)C", equivalents=1.2),
        LineInput(role="base", name="DBU", smiles="C1CCC2=NCCCN2CC1", equivalents=1.5,
                  density_g_per_ml=1.018),
    ],
    conditions=ConditionsInput(solvent="toluene", solvent_volume_ml=100, temperature_c=22),
))
print("planned", reaction.number)
"""


@pytest.fixture
def planned(demo_server):
    """The address of a planned reaction of the chemist's own."""
    printed = demo_server.manage("shell", "-c", _PLAN)
    return reverse("reactions:sheet", args=["BENCH", int(printed.split()[-1])])


@pytest.fixture
def sheet(logged_in_page, planned):
    page = logged_in_page("chemist")
    page.goto(planned)
    return page


def store(page, part):
    page.locator(f"#{part}-save").click()
    expect(page.locator(f"#{part} .stored")).to_be_visible()


def type_into(page, label, text, part):
    field = page.locator(f"#{part}").get_by_label(label, exact=True)
    field.click()
    field.press("Control+a")
    field.press_sequentially(text)


def test_a_reaction_is_recorded_from_the_balance_to_the_signature(sheet, planned, logged_in_page):
    page = sheet
    expect(page.get_by_role("heading", level=1)).to_contain_text("Diisopropyl malonate")

    # Enter one mass: all else follows while it is typed, before anything is stored.
    cage = page.get_by_role("group", name="Line 1: C60")
    reagent = page.get_by_role("group", name="Line 2: diisopropyl bromomalonate")
    cage.get_by_label("Plan").fill("")
    cage.get_by_label("Plan").press_sequentially("0.4 g")
    expect(cage).to_contain_text("0.555 mmol")  # 400 / 720.66; derived
    expect(reagent).to_contain_text("0.6661 mmol")  # 1.2 · 400 / 720.66; derived
    expect(page.locator("#lines .unstored")).to_be_visible()

    # Actual amounts beside the planned ones.
    cage.get_by_label("Went in").press_sequentially("401.2 mg")
    reagent.get_by_label("Went in").press_sequentially("180")
    expect(reagent).to_contain_text("180 has no unit")
    reagent.get_by_label("Went in").press_sequentially(" mg")
    expect(reagent).to_contain_text("1.21 eq")  # 180 / 267.12 over 401.2 / 720.66; derived
    store(page, "lines")

    # An unplanned reagent during the run.
    page.get_by_role("button", name="Add a line").click()
    more = page.get_by_role("group", name="Line 4")
    more.get_by_label("Substance").press_sequentially("triethylamine")
    more.get_by_label("Went in").press_sequentially("0.05 mmol")
    more.locator("summary").click()
    more.get_by_label("Structure (SMILES)").press_sequentially("CCN(CC)CC")
    expect(more).to_contain_text("0.08981 eq")  # 0.05 over 401.2 / 720.66; derived
    store(page, "lines")

    # The run.
    page.get_by_role("button", name="Start the run").click()
    expect(page.locator("#sheet-head .state")).to_have_text("running")
    type_into(page, "Time", "1 h 30 min", "conditions")
    store(page, "conditions")
    expect(page.locator("#conditions").get_by_label("Time")).to_have_value("90 min")
    type_into(page, "Time after the start", "40 min", "time-line")
    page.locator("#time-line").get_by_label("What happened").select_option("sample taken")
    type_into(page, "In words", "0.2 mL, purple to wine red", "time-line")
    store(page, "time-line")
    expect(page.locator("#time-line-rows")).to_contain_text("0.2 mL, purple to wine red")

    # A reading: the strip is drawn while the shares are typed, then stands under the plan's.
    for level, share in enumerate(("41.5", "43", "12.5", "3")):
        page.locator(f"#id_readings-level_{level}").press_sequentially(share)
    expect(page.locator("#reading-preview")).to_contain_text("Sum 100.0 %")
    store(page, "readings")
    strips = page.locator("#composition .strip")
    expect(strips.nth(0)).to_have_attribute("aria-label", re.compile("^predicted: unreacted 40.0"))
    expect(strips.nth(1)).to_have_attribute("aria-label", re.compile("^found: unreacted 41.5 %"))

    # The isolation closes the mass balance.
    page.get_by_role("button", name="Add a step").click()
    step = page.get_by_role("group", name="Step 1")
    step.get_by_label("Method").select_option("column")
    step.get_by_label("Mass").press_sequentially("0.18 g")
    step.get_by_label("Level").press_sequentially("1")
    store(page, "isolation")
    # 180 / (720.66 + 186.21) over 401.2 / 720.66; derived.
    expect(page.locator("#found")).to_contain_text("35.7 %")

    # Sign-off.
    type_into(page, "Conclusion", "Clean; repeat at 1.0 eq.", "conclusion")
    store(page, "conclusion")
    page.get_by_role("button", name="Complete the run").click()
    page.get_by_label("I have read this record").check()
    page.get_by_role("button", name="Sign as chemist").click()
    expect(page.locator("#sheet-head .state")).to_have_text("signed")
    expect(page.locator("form[data-part]")).to_have_count(0)

    reviewer = logged_in_page("reviewer")
    reviewer.goto(planned)
    reviewer.get_by_label("I have read this record").check()
    reviewer.get_by_role("button", name="Countersign as reviewer").click()
    expect(reviewer.locator(".signature-intact")).to_have_count(2)

    # On paper.
    reviewer.get_by_role("link", name="Print").click()
    expect(reviewer.locator(".paper-signatures")).to_contain_text("countersigned as reviewer")
    assert reviewer.pdf(prefer_css_page_size=True).startswith(b"%PDF")


def test_the_second_of_two_people_sees_what_changed_and_keeps_what_was_typed(
    sheet, planned, logged_in_page
):
    other = logged_in_page("chemist")
    other.goto(planned)
    type_into(other, "Temperature", "40 °C", "conditions")
    store(other, "conditions")

    type_into(sheet, "Temperature", "60 °C", "conditions")
    sheet.locator("#conditions-save").click()
    conditions = sheet.locator("#conditions")
    expect(conditions.get_by_role("alert")).to_contain_text("chemist changed this section")
    expect(conditions.get_by_role("alert")).to_contain_text("40 °C")
    expect(conditions.get_by_label("Temperature")).to_have_value("60 °C")
    conditions.get_by_role("button", name="Put mine in its place").click()
    expect(conditions.locator(".stored")).to_be_visible()
    expect(conditions.get_by_label("Temperature")).to_have_value("60 °C")


def test_an_error_stands_at_its_field_which_gets_the_focus(sheet):
    type_into(sheet, "Temperature", "hot", "conditions")
    sheet.locator("#conditions-save").click()
    field = sheet.locator("#conditions").get_by_label("Temperature")
    expect(field).to_be_focused()
    expect(field).to_have_value("hot")
    expect(field).to_have_attribute("aria-invalid", "true")
    expect(sheet.locator("#id_conditions-temperature_c_error")).to_contain_text("110 °C")


def test_a_page_with_something_not_stored_is_not_left_without_asking(sheet):
    asked = []

    def stay(dialog):
        asked.append(dialog.type)
        dialog.dismiss()

    sheet.on("dialog", stay)
    type_into(sheet, "Conclusion", "half a thought", "conclusion")
    sheet.get_by_role("link", name="Campaigns", exact=True).click()
    expect(sheet.locator("#conclusion").get_by_label("Conclusion")).to_have_value("half a thought")
    assert asked == ["beforeunload"]


def test_the_sheet_works_without_scripts(open_page, planned, logged_in_page):
    state = logged_in_page("chemist").context.storage_state()
    page = open_page(java_script_enabled=False, storage_state=state)
    page.goto(planned)
    page.fill("#id_conditions-temperature_c", "60 °C")
    page.click("#conditions-save")
    expect(page.locator("#id_conditions-temperature_c")).to_have_value("60 °C")
    page.fill("#id_lines-0-charge", "1 g")
    page.get_by_role("button", name="Work out").click()
    expect(page.get_by_role("group", name="Line 1: C60")).to_contain_text("1.388 mmol")
    page.fill("#id_readings-level_0", "61")
    page.click("#readings-save")
    expect(page.locator("#readings-rows")).to_contain_text("unreacted 61.0 %")


def test_the_keyboard_alone_reaches_and_stores(sheet):
    sheet.locator("#id_conditions-solvent").focus()
    for _ in range(2):
        sheet.keyboard.press("Tab")
    expect(sheet.locator("#id_conditions-temperature_c")).to_be_focused()
    sheet.keyboard.press("Control+a")
    sheet.keyboard.type("35 °C")
    sheet.keyboard.press("Enter")
    expect(sheet.locator("#conditions .stored")).to_be_visible()
    expect(sheet.locator("#announcement")).to_contain_text("Conditions: stored")
