import pytest
from django.conf import global_settings
from django.urls import reverse

pytestmark = pytest.mark.django_db


def test_a_stranger_is_sent_to_the_log_in_page_and_back(client, author, campaign):
    wanted = reverse("reactions:campaigns")
    response = client.get(wanted)
    assert response.status_code == 302
    assert response.url == f"{reverse('reactions:login')}?next={wanted}"

    response = client.post(
        response.url,
        {"username": "author", "password": "author-wears-gloves", "next": wanted},
    )
    assert response.url == wanted
    assert "Interlayer acceptors" in client.get(wanted).content.decode()


def test_a_wrong_password_keeps_the_name_and_says_what_is_wrong(client, author):
    response = client.post(reverse("reactions:login"), {"username": "author", "password": "no"})
    page = response.content.decode()
    assert "No account has this name with this password" in page
    assert 'value="author"' in page
    assert 'value="no"' not in page


def test_log_out_is_by_post_and_ends_the_session(client, author):
    client.force_login(author)
    assert client.get(reverse("reactions:logout")).status_code == 405
    assert client.post(reverse("reactions:logout")).url == reverse("reactions:login")
    assert client.get(reverse("reactions:campaigns")).status_code == 302


def test_a_person_already_logged_in_goes_straight_on(client, author):
    client.force_login(author)
    assert client.get(reverse("reactions:login")).url == reverse("reactions:search")


def test_log_in_never_leads_to_another_site(client, author):
    response = client.post(
        reverse("reactions:login"),
        {
            "username": "author",
            "password": "author-wears-gloves",
            "next": "https://elsewhere.example/",
        },
    )
    assert response.url == reverse("reactions:search")


def test_an_enhanced_request_without_session_gets_no_log_in_page_into_its_section(client):
    response = client.get(reverse("reactions:campaigns"), headers={"HX-Request": "true"})
    assert response.status_code == 401


def test_without_a_site_setting_the_apps_own_log_in_page_is_used(client, settings):
    settings.LOGIN_URL = global_settings.LOGIN_URL
    response = client.get(reverse("reactions:campaigns"))
    assert response.url.startswith(reverse("reactions:login"))


def test_a_sites_own_log_in_page_is_respected(client, settings):
    settings.LOGIN_URL = "/members/enter/"
    assert client.get(reverse("reactions:campaigns")).url.startswith("/members/enter/?next=")
