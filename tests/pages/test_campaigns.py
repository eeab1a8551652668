import pytest
from django.urls import reverse

from reactions.models import Campaign, Membership, Role

pytestmark = pytest.mark.django_db


def address(campaign, name="campaign"):
    return reverse(f"reactions:{name}", args=[campaign.code])


def test_the_list_counts_reactions_by_state(signed_in, author, planned, reader):
    page = signed_in(author).get(reverse("reactions:campaigns"))
    (row,) = page.context["campaigns"]
    assert (row.reaction_count, row.planned_count, row.signed_count) == (1, 1, 0)


def test_one_sees_only_campaigns_of_which_one_is_a_member(signed_in, outsider, campaign):
    client = signed_in(outsider)
    assert "Interlayer" not in client.get(reverse("reactions:campaigns")).content.decode()
    assert client.get(address(campaign)).status_code == 404


def test_opening_a_campaign_makes_its_author(signed_in, outsider):
    response = signed_in(outsider).post(
        reverse("reactions:campaigns"), {"name": "Spin carriers", "code": "spin", "purpose": ""}
    )
    opened = Campaign.objects.get(code="SPIN")
    assert response.url == address(opened)
    assert opened.role_of(outsider) == Role.AUTHOR


def test_a_bad_code_is_said_at_its_field_and_nothing_typed_is_lost(signed_in, author):
    response = signed_in(author).post(
        reverse("reactions:campaigns"),
        {"name": "Spin <carriers>", "code": "1-2", "purpose": "hexakis"},
    )
    page = response.content.decode()
    assert response.status_code == 422
    assert "capital letters and digits" in str(response.context["form"].errors["code"])
    assert 'value="Spin &lt;carriers&gt;"' in page
    assert "hexakis" in page
    assert not Campaign.objects.exists()


def test_a_code_that_is_taken_is_refused(signed_in, author, campaign):
    response = signed_in(author).post(
        reverse("reactions:campaigns"), {"name": "Other", "code": "ACC"}
    )
    assert "code" in response.context["form"].errors


def test_its_page_stacks_found_strips_and_predicted_ones(signed_in, author, planned, campaign):
    page = signed_in(author).get(address(campaign)).content.decode()
    assert "ACC-1" in page
    assert 'aria-label="predicted: unreacted 45.0 %, mono 40.0 %' in page
    planned.found_composition = [0.5, 0.5]
    planned.save()
    page = signed_in(author).get(address(campaign)).content.decode()
    assert 'aria-label="found: unreacted 50.0 %, mono 50.0 %"' in page


def test_a_reader_sees_members_but_no_forms(signed_in, reader, campaign):
    page = signed_in(reader).get(address(campaign)).content.decode()
    assert "author: plans, records and signs" in page
    assert reverse("reactions:set-member", args=["ACC"]) not in page


def test_an_author_adds_changes_and_removes_a_member(signed_in, author, outsider, campaign):
    client = signed_in(author)
    for role in ("reader", "reviewer"):
        client.post(address(campaign, "set-member"), {"username": "outsider", "role": role})
        assert campaign.role_of(outsider) == role
    client.post(address(campaign, "remove-member"), {"username": "outsider"})
    assert campaign.role_of(outsider) is None


@pytest.mark.parametrize("role", ["reader", "reviewer"])
def test_only_authors_change_members(signed_in, campaign, outsider, role):
    Membership.objects.create(campaign=campaign, user=outsider, role=role)
    client = signed_in(outsider)
    for name in ("set-member", "remove-member"):
        response = client.post(address(campaign, name), {"username": "outsider", "role": "author"})
        assert response.status_code == 403
    assert campaign.role_of(outsider) == role


def test_an_unknown_name_is_said_at_its_field(signed_in, author, campaign):
    response = signed_in(author).post(
        address(campaign, "set-member"), {"username": "nobdy", "role": "reader"}
    )
    assert response.status_code == 422
    assert "nobdy" in str(response.context["member_form"].errors["username"])


def test_the_only_author_stays(signed_in, author, campaign):
    response = signed_in(author).post(address(campaign, "remove-member"), {"username": "author"})
    assert response.status_code == 422
    assert "only author" in response.context["refusal"]
    assert campaign.role_of(author) == Role.AUTHOR


def test_a_long_campaign_comes_in_pages(signed_in, author, campaign, planned):
    from reactions.models import Reaction

    Reaction.objects.bulk_create(
        Reaction(
            campaign=campaign, number=number, title="run", family_key="bingel", created_by=author
        )
        for number in range(2, 60)
    )
    first = signed_in(author).get(address(campaign))
    second = signed_in(author).get(address(campaign) + "?page=2")
    assert len(first.context["rows"]) == 40
    assert len(second.context["rows"]) == 19
