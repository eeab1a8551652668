"""Campaigns, sheets and their print, to everyone: axe, both widths, light and dark."""

import pytest
from django.urls import reverse

_ONE_OF_EACH_STATE = """
from reactions.models import Reaction
for state in ("planned", "completed", "signed"):
    row = Reaction.objects.filter(state=state, campaign__is_invented=True).order_by("pk").first()
    print("found", state, row.campaign.code, row.number)
"""
_SCREENS = [(width, scheme) for width in (1280, 390) for scheme in ("light", "dark")]


@pytest.fixture(scope="module")
def addresses(demo_server):
    printed = demo_server.manage("shell", "-c", _ONE_OF_EACH_STATE)
    rows = [line.split()[1:] for line in printed.splitlines() if line.startswith("found ")]
    found = {state: reverse("reactions:sheet", args=[code, int(no)]) for state, code, no in rows}
    return {
        **found,
        "print": f"{found['signed']}print/",
        "campaigns": reverse("reactions:campaigns"),
        "campaign": reverse("reactions:campaign", args=["ACC"]),
    }


@pytest.mark.parametrize(
    "name", ["planned", "completed", "signed", "print", "campaigns", "campaign"]
)
@pytest.mark.parametrize(("width", "colour_scheme"), _SCREENS)
def test_a_page_is_accessible_and_never_scrolls_sideways(
    logged_in_page, accessibility_faults, addresses, name, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto(addresses[name])
    assert accessibility_faults(page) == []
    assert page.evaluate("document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize(("width", "colour_scheme"), _SCREENS)
def test_a_part_with_errors_is_accessible(
    logged_in_page, accessibility_faults, addresses, width, colour_scheme
):
    page = logged_in_page("chemist", width, colour_scheme)
    page.goto(addresses["planned"])
    page.fill("#id_conditions-temperature_c", "hot")
    page.click("#conditions-save")
    page.wait_for_selector("#id_conditions-temperature_c_error")
    assert accessibility_faults(page) == []


@pytest.mark.parametrize("name", ["planned", "campaigns", "campaign"])
def test_gloved_fingers_find_every_control(logged_in_page, addresses, name):
    page = logged_in_page("chemist", 390)
    page.goto(addresses[name])
    small = page.evaluate(
        """() => [...document.querySelectorAll("button, input, select, textarea, summary")]
            .filter(control => control.checkVisibility() && !control.matches(".unseen"))
            .map(control => control.type === "checkbox" ? control.closest("label") : control)
            .filter(control => control.getBoundingClientRect().height < 43.9)
            .map(control => control.outerHTML.slice(0, 120))"""
    )
    assert small == []
