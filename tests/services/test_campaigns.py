import pytest

from reactions.errors import FieldErrors
from reactions.models import Campaign, Role
from reactions.services.campaigns import open_campaign, remove_member, set_member
from reactions.services.errors import NotAllowed

pytestmark = pytest.mark.django_db


def test_who_opens_a_campaign_is_its_author(outsider):
    campaign = open_campaign(outsider, code="new", name="A new series")
    assert (campaign.code, campaign.role_of(outsider)) == ("NEW", Role.AUTHOR)


@pytest.mark.parametrize("code", ["A", "7UP", "A-B", "", "ACC"])
def test_a_bad_or_taken_code_is_an_error_at_the_field(campaign, outsider, code):
    with pytest.raises(FieldErrors) as caught:
        open_campaign(outsider, code=code, name="x")
    assert "code" in caught.value.messages
    assert Campaign.objects.count() == 1


def test_an_author_gives_and_takes_roles(author, campaign, outsider):
    set_member(author, campaign, "outsider", "reader")
    assert campaign.role_of(outsider) == Role.READER
    set_member(author, campaign, "outsider", "reviewer")
    assert campaign.role_of(outsider) == Role.REVIEWER
    remove_member(author, campaign, "outsider")
    assert campaign.role_of(outsider) is None


def test_a_reader_gives_no_roles(reader, campaign):
    with pytest.raises(NotAllowed):
        set_member(reader, campaign, "reader", "author")


def test_the_last_author_stays(author, campaign):
    with pytest.raises(FieldErrors, match="only author"):
        remove_member(author, campaign, "author")
    with pytest.raises(FieldErrors, match="only author"):
        set_member(author, campaign, "author", "reader")


def test_an_unknown_person_is_an_error_at_the_field(author, campaign):
    with pytest.raises(FieldErrors) as caught:
        set_member(author, campaign, "nobody", "reader")
    assert "nobody" in caught.value.messages["username"][0]
