"""A session that ended while a person was typing: nothing typed is lost, and it can be stored."""

import re

import pytest
from django.urls import reverse
from playwright.sync_api import expect

PLAN = (
    "?family=prato&basis=cage&cage=C60&cage_mass=0.5+g&objective=most_of_level&level=1"
    "&solvent=toluene&addend=*CN(C)C*&campaign=ACC&title=Typed+before+the+session+ended"
)


@pytest.fixture
def log_in(demo_server):
    """Return a function that logs ``chemist`` in by typing, in a further tab."""

    def log_in(context):
        tab = context.new_page()
        tab.goto(reverse("reactions:login"))
        tab.fill("input[name=username]", "chemist")
        tab.fill("input[name=password]", demo_server.log_ins["chemist"])
        tab.press("input[name=password]", "Enter")
        tab.wait_for_url(lambda address: reverse("reactions:login") not in address)

    return log_in


@pytest.fixture
def context(chromium, demo_server, log_in):
    """A browser of its own: what is refused is written to its console, which is as it should be."""
    context = chromium.new_context(base_url=demo_server.address)
    context.set_default_timeout(10_000)
    log_in(context)
    yield context
    context.close()


def plan(context):
    page = context.new_page()
    page.goto(reverse("reactions:planner") + PLAN)
    return page


def press_to_plan(page):
    page.get_by_role("button", name="Plan this reaction").click()


def test_a_plan_waits_for_the_log_in_and_is_then_stored(context, log_in):
    page = plan(context)
    context.clear_cookies(name="sessionid")
    press_to_plan(page)
    expect(page.locator("#not-stored")).to_contain_text("Log in in another tab")
    expect(page.get_by_label("Title")).to_have_value("Typed before the session ended")
    log_in(context)
    press_to_plan(page)
    page.wait_for_url(re.compile(r"/ACC-\d+/"))
    expect(page.locator("main")).to_contain_text("Typed before the session ended")


def test_a_part_of_a_sheet_is_stored_after_the_log_in(context, log_in):
    page = plan(context)
    press_to_plan(page)
    page.wait_for_url(re.compile(r"/ACC-\d+/"))
    context.clear_cookies(name="sessionid")
    page.get_by_role("textbox", name="Conclusion").fill("Typed while logged out")
    store = page.get_by_role("button", name="Store conclusion")
    store.click()
    expect(page.locator("#not-stored")).to_contain_text("You are logged out")
    log_in(context)
    store.click()
    expect(page.locator("#not-stored")).to_be_empty()
    page.reload()
    expect(page.get_by_role("textbox", name="Conclusion")).to_have_value("Typed while logged out")


def test_two_presses_plan_one_reaction(context):
    page = plan(context)
    planned = []
    page.on("request", lambda request: planned.append(request) if request.method == "POST" else 0)
    page.get_by_role("button", name="Plan this reaction").dblclick()
    page.wait_for_url(re.compile(r"/ACC-\d+/"))
    assert len(planned) == 1
