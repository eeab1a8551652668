import pytest
from django.core.management import call_command

from reactions.errors import FieldErrors
from reactions.models import Membership, Reaction, Role
from reactions.search.query import answer, family_counts, find

pytestmark = pytest.mark.django_db


@pytest.mark.parametrize(
    ("address", "found"),
    [
        ("", {"hot", "cool", "methano", "c70", "bare"}),
        ("family=prato", {"hot", "cool"}),
        ("family=Cyclopropanation", {"methano", "c70"}),
        ("family=prato&family=bingel", {"hot", "cool", "methano"}),
        ("cage=C70", {"c70"}),
        ("cage=c60&family=bingel_in_situ", set()),
        ("solvent=toluene", {"cool", "methano", "c70"}),
        ("temperature_c_lowest=110", {"hot", "cool"}),
        ("temperature_c_lowest=110.1", {"hot"}),
        ("temperature_c_highest=110", {"cool", "methano"}),
        ("duration_min_lowest=1 h&duration_min_highest=2 h", {"hot", "cool"}),
        ("level_lowest=2", {"hot", "cool"}),
        ("level_lowest=1&level_highest=1", {"methano"}),
        ("yield_percent_lowest=40", {"hot", "methano"}),
        ("yield_percent_highest=40", {"hot", "cool"}),
        ("campaign=ACC&state=planned", {"hot", "cool", "methano", "c70", "bare"}),
        ("state=signed", set()),
        ("performed_from=2026-03-02", {"cool", "methano"}),
        ("performed_to=2026-03-01", {"hot"}),
        ("text=methano", {"methano", "c70"}),
        ("text=DROPWISE", {"methano"}),
        ("text=sarcosine", {"cool"}),
        ("text=wine+red", {"hot"}),
        ("text=wine+blue", set()),
        ("text=drifts", {"methano"}),
        ("text=pyrrolidine+hot", {"hot"}),
        ("text=ACC-3", {"methano"}),
        ("text=acc-3", {"methano"}),
        ("text=N-methylpyrrolidine", {"hot", "cool"}),
        ("substructure=C1CCNC1", {"hot", "cool"}),
        ("substructure=C1CC1", {"methano", "c70"}),
        ("substructure=[NX3]&substructure_kind=smarts", {"hot", "cool"}),
        ("substructure=c1ccccc1", set()),
        ("substructure=C1CC1&cage=C60", {"methano"}),
    ],
)
def test_each_field_finds_what_it_asks_for(book, author, asked, address, found):
    hits = find(asked(address), author)
    assert {row.pk for row in hits} == {book[name].pk for name in found}


def test_an_addend_is_found_by_its_key(book, author, asked):
    hits = find(asked(f"addend={book['c70'].addend_id}"), author)
    assert {row.title for row in hits} == {"Methano", "Methano on the larger cage"}


def test_only_a_member_finds(book, author, outsider, others, asked):
    assert [row.title for row in find(asked("family=prato"), outsider)] == ["Theirs"]
    Membership.objects.create(campaign=others, user=author, role=Role.READER)
    assert find(asked("family=prato"), author).count() == 3


@pytest.mark.parametrize(
    ("address", "field"),
    [
        ("family=alchemy", "family"),
        ("campaign=OTH", "campaign"),
        ("campaign=NIX", "campaign"),
        ("substructure=C((", "substructure"),
        ("substructure=C1CC1&substructure_kind=molfile", "substructure"),
    ],
)
def test_what_is_not_there_is_an_error_at_its_field(book, author, asked, address, field):
    with pytest.raises(FieldErrors) as caught:
        find(asked(address), author)
    assert list(caught.value.messages) == [field]


def test_a_campaign_of_others_is_refused_as_one_that_is_not(book, author, asked):
    def words(code):
        with pytest.raises(FieldErrors) as caught:
            find(asked(f"campaign={code}"), author)
        return str(caught.value).replace(code, "")

    assert words("OTH") == words("NIX")


@pytest.mark.parametrize(
    ("sort", "first", "last"),
    [
        ("temperature", "Methano", "Methano on the larger cage"),
        ("-temperature", "Pyrrolidine, hot", "Methano on the larger cage"),
        ("yield", "Pyrrolidine, cool", "Methano on the larger cage"),
        ("-yield", "Methano", "Methano on the larger cage"),
        ("label", "Pyrrolidine, hot", "Bromine"),
        ("-label", "Bromine", "Pyrrolidine, hot"),
        ("performed", "Pyrrolidine, hot", "Methano on the larger cage"),
    ],
)
def test_hits_are_sorted_with_what_is_not_known_last(book, author, asked, sort, first, last):
    titles = [row.title for row in find(asked(f"sort={sort}"), author)]
    assert (titles[0], titles[-1]) == (first, last)


def test_the_family_tree_counts_what_is_found(book, author, asked):
    counts = {
        member.key: member.count
        for branch in family_counts(asked("solvent=toluene"), author)
        for member in branch.families
        if member.count
    }
    assert counts == {"prato": 1, "bingel": 1, "bingel_in_situ": 1}


def test_a_chosen_family_does_not_hide_the_others(book, author, asked):
    tree = {row.name: row for row in family_counts(asked("family=prato"), author)}
    assert tree["Cyclopropanation"].count == 2
    chosen = [row.key for branch in tree.values() for row in branch.families if row.is_chosen]
    assert chosen == ["prato"]


def test_a_family_that_is_no_longer_known_is_counted_and_found(
    book, campaign, record, author, asked
):
    record(campaign, 9, title="Old", family_key="forgotten")
    unknown = family_counts(asked(), author)[-1]
    assert (unknown.name, unknown.count) == ("Not in the table", 1)
    assert [row.title for row in find(asked(f"family={unknown.name}"), author)] == ["Old"]


def test_a_page_of_hits_takes_few_queries(book, author, asked, django_assert_max_num_queries):
    with django_assert_max_num_queries(12):
        found = answer(asked("substructure=C1CCNC1&campaign=ACC"), author)
        assert [row.label for row in found.hits]
        assert found.tree
        assert all(str(row.addend) for row in found.hits)


def test_the_demo_answers_the_question_of_every_day(author, asked):
    call_command("load_demo")
    chemist = Membership.objects.filter(role=Role.AUTHOR, campaign__code="ACC").get().user
    query = asked("substructure=C1CCNC1&solvent=1,2-dichlorobenzene&temperature_c_lowest=120 °C")
    hits = find(query, chemist)
    assert 0 < hits.count() < Reaction.objects.count()
    assert all(row.temperature_c >= 120 for row in hits)
    assert all("pyrrolidine" in row.addend.name for row in hits)
