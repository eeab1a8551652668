import pytest
from django.urls import reverse

from reactions.models import Reaction

pytestmark = pytest.mark.django_db
SEARCH = "reactions:search"


@pytest.fixture
def look(signed_in, author):
    """Return a function that opens the search at an address, as a whole page or as htmx does."""

    def look(address="", person=author, enhanced=False):
        return signed_in(person, enhanced=enhanced).get(f"{reverse(SEARCH)}?{address}")

    return look


@pytest.fixture
def many(author, campaign):
    """Sixty runs, invented."""
    return Reaction.objects.bulk_create(
        Reaction(
            campaign=campaign,
            number=number,
            title=f"run {number}",
            family_key="prato" if number % 2 else "bingel",
            solvent="toluene",
            temperature_c=20.0 + number,
            created_by=author,
            found_composition=[0.4, 0.4, 0.2],
        )
        for number in range(1, 61)
    )


def titles(response):
    return [row.title for row, _ in response.context["rows"]]


def test_a_stranger_is_sent_to_log_in(client, db):
    response = client.get(reverse(SEARCH))
    assert response.status_code == 302
    assert reverse("reactions:login") in response.url


def test_an_empty_book_says_where_to_begin(look):
    assert b"Plan a reaction" in look().content


def test_the_root_lists_what_is_planned(look, planned):
    body = look().content.decode()
    assert planned.label in body
    assert planned.title in body
    assert reverse("reactions:sheet", args=[planned.campaign.code, planned.number]) in body
    assert reverse("reactions:addend-picture", args=[planned.addend_id]) in body
    assert 'class="strip' in body


def test_others_see_nothing_of_it(look, planned, outsider):
    body = look(person=outsider).content.decode()
    assert planned.title not in body
    assert planned.label not in body


def test_a_question_in_the_address_is_answered(look, many):
    response = look("family=prato&temperature_c_lowest=70 °C&sort=temperature")
    assert titles(response) == [f"run {number}" for number in range(51, 61, 2)]


def test_the_question_stands_in_the_form(look, many):
    body = look("family=prato&temperature_c_lowest=70 °C&solvent=toluene").content.decode()
    assert 'value="70 °C"' in body
    assert '<option value="toluene" selected>' in body
    assert 'id="family-prato" checked' in body


def test_a_solvent_not_on_record_stays_as_typed(look, many):
    assert '<option value="brine" selected>' in look("solvent=brine").content.decode()


@pytest.mark.parametrize(
    ("address", "field", "typed"),
    [
        ("temperature_c_lowest=warm", "temperature_c_lowest", "warm"),
        ("duration_min_lowest=3 kg", "duration_min_lowest", "3 kg"),
        ("substructure=C1(", "substructure", "C1("),
        ("family=alchemy", "family", None),
        ("sort=colour", "sort", None),
        ("level_lowest=5&level_highest=2", "level_highest", "2"),
    ],
)
def test_a_bad_value_is_told_at_its_field_and_kept(look, many, address, field, typed):
    response = look(address)
    assert response.status_code == 422
    assert list(response.context["form"].errors) == [field]
    if typed:
        assert typed in response.content.decode()


def test_an_unknown_parameter_is_told(look, many):
    response = look("colour=red")
    assert response.status_code == 422
    assert "colour" in response.content.decode()


@pytest.mark.parametrize(
    "address",
    ["page=99", "page=nothing", "page=-1", "family=%00", "text=%00", "addend=99999999999999999999"],
)
def test_garbage_is_no_server_error(look, many, address):
    assert look(address).status_code in (200, 422)


def test_hits_are_paged_and_each_page_keeps_the_question(look, many):
    response = look("solvent=toluene&sort=label")
    assert len(titles(response)) == 25
    assert "?solvent=toluene&amp;sort=label&amp;page=2" in response.content.decode()
    second = look("solvent=toluene&sort=label&page=3")
    assert titles(second) == [f"run {number}" for number in range(51, 61)]


def test_an_empty_answer_says_what_to_leave_out(look, many):
    response = look("solvent=toluene&temperature_c_lowest=200&family=bingel")
    (loosening,) = response.context["question"].loosenings
    assert (loosening.condition.words, loosening.count) == ("at 200 °C or hotter", 30)
    assert loosening.condition.address_without == "family=bingel&solvent=toluene"
    assert "30 reactions" in response.content.decode()


def test_htmx_gets_the_answer_with_counts_and_the_address_to_show(look, many):
    response = look("text=&family=prato&temperature_c_lowest=70 °C&sort=-changed", enhanced=True)
    body = response.content.decode()
    assert response["HX-Push-Url"] == f"{reverse(SEARCH)}?family=prato&temperature_c_lowest=70"
    assert "<html" not in body
    assert '<span class="tree-count" id="count-family-bingel" hx-swap-oob="true">6</span>' in body
    assert 'id="ask_temperature_c_lowest_error"' in body
    assert "HX-Request" in response["Vary"]


def test_htmx_gets_errors_in_their_places(look, many):
    response = look("temperature_c_lowest=warm", enhanced=True)
    assert response.status_code == 200
    assert "holds no number" in response.content.decode()
    assert response["HX-Push-Url"].endswith("?temperature_c_lowest=warm")


def test_a_page_of_hits_takes_few_queries(signed_in, author, many, django_assert_max_num_queries):
    client = signed_in(author)
    with django_assert_max_num_queries(12):
        client.get(reverse(SEARCH), {"solvent": "toluene", "family": "prato"})


def test_what_a_person_wrote_can_not_become_markup(look, planned):
    Reaction.objects.filter(pk=planned.pk).update(title="<script>alert(1)</script>")
    assert "<script>alert" not in look().content.decode()
    assert "<script>alert" not in look("text=<script>alert(1)").content.decode()
