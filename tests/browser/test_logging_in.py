"""Logging in, as a person does it."""

import pytest
from django.urls import reverse
from playwright.sync_api import expect


@pytest.mark.parametrize("colour_scheme", ["light", "dark"])
@pytest.mark.parametrize("width", [1280, 390])
def test_the_log_in_page_is_accessible(open_page, accessibility_faults, width, colour_scheme):
    page = open_page(width, colour_scheme)
    page.goto(reverse("reactions:login"))
    assert accessibility_faults(page) == []


@pytest.mark.parametrize("role", ["chemist", "reviewer", "guest"])
def test_each_of_the_demo_s_people_gets_in(logged_in_page, role):
    page = logged_in_page(role)
    page.goto("/")
    assert reverse("reactions:login") not in page.url
    assert role in page.locator("body").inner_text()


def test_a_wrong_password_keeps_the_name_and_says_so(open_page):
    page = open_page()
    page.goto(reverse("reactions:login"))
    page.fill("input[name=username]", "chemist")
    page.fill("input[name=password]", "not-the-password")
    page.press("input[name=password]", "Enter")
    expect(page.get_by_text("No account has this name with this password")).to_be_visible()
    expect(page.locator("input[name=username]")).to_have_value("chemist")
    expect(page.locator("input[name=password]")).to_have_value("")
