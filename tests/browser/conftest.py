"""A real Chromium at a real server."""

import os
import shutil
from pathlib import Path

import pytest
from django.urls import reverse
from playwright.sync_api import sync_playwright

# Playwright keeps an event loop in this thread for as long as it runs, which Django takes for a
# reason to refuse the database to every other test of the session.
os.environ["DJANGO_ALLOW_ASYNC_UNSAFE"] = "true"

AXE = Path(__file__).parents[2] / "reactions/parts/node_modules/axe-core/axe.min.js"
WIDTHS = (1280, 390)
COLOUR_SCHEMES = ("light", "dark")
_HEIGHTS = {1280: 900, 390: 844}
# A container's Chromium runs as root, without a graphics card and without a network outside.
_FLAGS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-dev-shm-usage",
)
# What a person must be able to rely on: WCAG 2.2 A and AA, and axe's good practice.
_AXE_RULES = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"]


def pytest_collection_modifyitems(items):
    for item in items:
        if Path(__file__).parent in item.path.parents:
            item.add_marker(pytest.mark.browser)


@pytest.fixture(scope="session")
def chromium():
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(
            executable_path=shutil.which("chromium"), args=list(_FLAGS)
        )
        yield browser
        browser.close()


@pytest.fixture
def open_page(chromium, demo_server):
    """Return a function that opens an empty page of a width and colour scheme.

    Whatever the page's scripts throw, and whatever the content-security policy refuses, fails the
    test at its end.
    """
    contexts, troubles = [], []

    def note(message):
        if message.type == "error" and "Failed to load resource" not in message.text:
            troubles.append(message.text)

    def open_page(width=1280, colour_scheme="light", **options):
        context = chromium.new_context(
            base_url=demo_server.address,
            viewport={"width": width, "height": _HEIGHTS.get(width, 900)},
            color_scheme=colour_scheme,
            has_touch=width < 600,
            **options,
        )
        context.set_default_timeout(10_000)
        contexts.append(context)
        page = context.new_page()
        page.on("pageerror", lambda error: troubles.append(str(error)))
        page.on("console", note)
        return page

    yield open_page
    for context in contexts:
        context.close()
    assert not troubles, "\n".join(troubles)


@pytest.fixture(scope="session")
def _kept_cookies():
    return {}


@pytest.fixture
def logged_in_page(open_page, demo_server, _kept_cookies):
    """Return a function that opens a page as ``chemist``, ``reviewer`` or ``guest``.

    The first page of each person types the name and password; later ones take up the session.
    """

    def logged_in_page(role="chemist", width=1280, colour_scheme="light"):
        if role in _kept_cookies:
            return open_page(width, colour_scheme, storage_state=_kept_cookies[role])
        page = open_page(width, colour_scheme)
        page.goto(reverse("reactions:login"))
        page.fill("input[name=username]", role)
        page.fill("input[name=password]", demo_server.log_ins[role])
        page.press("input[name=password]", "Enter")
        page.wait_for_url(lambda address: reverse("reactions:login") not in address)
        _kept_cookies[role] = page.context.storage_state()
        return page

    return logged_in_page


@pytest.fixture(scope="session")
def accessibility_faults():
    """Return a function that runs axe on a page and returns its findings, one line each."""
    axe = AXE.read_text(encoding="utf-8")

    def accessibility_faults(page):
        page.evaluate(axe)
        found = page.evaluate(
            "rules => axe.run({runOnly: rules, resultTypes: ['violations']})", _AXE_RULES
        )
        return [
            f"{fault['id']}: {node['target']} {node['failureSummary']}"
            for fault in found["violations"]
            for node in fault["nodes"]
        ]

    return accessibility_faults
