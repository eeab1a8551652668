"""Answering a query from the database."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from django.contrib.auth.models import User
from django.db.models import Count, Exists, F, OuterRef, Q, QuerySet

from reactions.chemistry.families import Family
from reactions.chemistry.structures import StructureError
from reactions.errors import FieldErrors
from reactions.models import (
    Addend,
    Campaign,
    Component,
    Observation,
    Reaction,
    Reading,
    known_families,
)
from reactions.models.reactions import ReactionQuerySet
from reactions.search.language import SearchQuery
from reactions.search.structures import addends_containing

__all__ = [
    "Answer",
    "BranchCount",
    "FamilyCount",
    "SearchQuery",
    "answer",
    "family_counts",
    "find",
]

UNKNOWN_BRANCH = "Not in the table"
_MOST_WORDS = 12
_COLUMN_OF_SORT = {
    "changed": ("changed_at",),
    "performed": ("performed_on",),
    "label": ("campaign__code", "number"),
    "temperature": ("temperature_c",),
    "duration": ("duration_min",),
    "level": ("level_reached",),
    "conversion": ("conversion",),
    "yield": ("yield_on_charged",),
}
_RANGES = {
    "temperature_c_lowest": "temperature_c__gte",
    "temperature_c_highest": "temperature_c__lte",
    "duration_min_lowest": "duration_min__gte",
    "duration_min_highest": "duration_min__lte",
    "level_lowest": "level_reached__gte",
    "level_highest": "level_reached__lte",
    "performed_from": "performed_on__gte",
    "performed_to": "performed_on__lte",
}
# A yield typed as 40 % may be stored as 0.39999999999999997.
_ROUNDING = 1e-9


@dataclass(frozen=True)
class FamilyCount:
    """A family of the tree and how many hits it has."""

    key: str
    name: str
    count: int
    is_chosen: bool


@dataclass(frozen=True)
class BranchCount:
    """A branch of the family tree with its families; ``is_chosen`` when all of it is asked for."""

    name: str
    count: int
    is_chosen: bool
    families: tuple[FamilyCount, ...]


@dataclass(frozen=True)
class Answer:
    """The hits of a query, and how they spread over the family tree.

    ``hits`` is lazy, with what a row of a list shows. The tree has the families of all that the
    person may see, and counts what the query would find in each if it didn't ask for one.
    """

    query: SearchQuery
    hits: QuerySet[Reaction]
    tree: tuple[BranchCount, ...]
    families: Mapping[str, Family]


def find(query: SearchQuery, user: User) -> QuerySet[Reaction]:
    """Return the reactions that ``user`` may see and that the query asks for, in its order.

    Raises ``FieldErrors`` for a family or campaign that isn't there and for a structure that can't
    be read or takes too long.
    """
    families = known_families() if query.family else {}
    return _in_order(_in_families(_in_any_family(query, user), query, families), query)


def family_counts(query: SearchQuery, user: User) -> tuple[BranchCount, ...]:
    """Return the family tree with the counts of what the query finds in each family.

    It has the families of all that ``user`` may see. Families asked for do not narrow the counts,
    so that one can be chosen beside another. Raises ``FieldErrors`` as ``find`` does.
    """
    return _tree(_in_any_family(query, user), query, known_families(), user)


def answer(query: SearchQuery, user: User) -> Answer:
    """Return the hits and the family tree together, searching structures once.

    Raises ``FieldErrors`` as ``find`` does.
    """
    families = known_families()
    found = _in_any_family(query, user)
    hits = _in_order(_in_families(found, query, families), query)
    return Answer(query, hits, _tree(found, query, families, user), families)


def _in_any_family(query: SearchQuery, user: User) -> ReactionQuerySet:
    found = Reaction.objects.visible_to(user)
    if query.campaign:
        if not Campaign.objects.visible_to(user).filter(code=query.campaign).exists():
            raise FieldErrors.at(
                "campaign", f"You are in no campaign “{query.campaign}”; choose one of yours."
            )
        found = found.filter(campaign__code=query.campaign)
    ranges = {
        lookup: getattr(query, name)
        for name, lookup in _RANGES.items()
        if getattr(query, name) is not None
    }
    if query.yield_percent_lowest is not None:
        ranges["yield_on_charged__gte"] = query.yield_percent_lowest / 100 - _ROUNDING
    if query.yield_percent_highest is not None:
        ranges["yield_on_charged__lte"] = query.yield_percent_highest / 100 + _ROUNDING
    exact = {
        "cage__iexact": query.cage,
        "solvent__iexact": query.solvent,
        "state": query.state,
        "addend_id": query.addend,
    }
    found = found.filter(**ranges, **{lookup: value for lookup, value in exact.items() if value})
    for word in query.text.split()[:_MOST_WORDS]:
        found = found.filter(_holds(word))
    return _with_substructure(found, query)


def _holds(word: str) -> Q:
    """Return the condition that a word stands somewhere in the record."""
    here = OuterRef("pk")
    code, _, number = word.upper().rpartition("-")
    label = Q(campaign__code=code, number=int(number)) if _is_number(number) else Q(pk__in=[])
    return (
        Q(title__icontains=word)
        | Q(conclusion__icontains=word)
        | Q(addend__name__icontains=word)
        | label
        | Q(Exists(Component.objects.filter(reaction=here, name__icontains=word)))
        | Q(Exists(Observation.objects.filter(reaction=here, text__icontains=word)))
        | Q(Exists(Reading.objects.filter(reaction=here, note__icontains=word)))
    )


def _is_number(text: str) -> bool:
    return text.isascii() and text.isdigit() and len(text) < 9


def _with_substructure(found: ReactionQuerySet, query: SearchQuery) -> ReactionQuerySet:
    if not query.substructure:
        return found
    among = Addend.objects.filter(pk__in=found.order_by().values("addend_id"))
    try:
        keys = addends_containing(query.substructure, query.substructure_kind, among)
    except StructureError as error:
        raise FieldErrors.at("substructure", str(error)) from error
    return found.filter(addend_id__in=sorted(keys))


def _in_families(
    found: ReactionQuerySet, query: SearchQuery, families: Mapping[str, Family]
) -> ReactionQuerySet:
    if not query.family:
        return found
    branches = {row.branch for row in families.values()}
    wanted: set[str] = set()
    condition = Q()
    for asked in query.family:
        if asked in families:
            wanted.add(asked)
        elif asked in branches:
            wanted.update(row.key for row in families.values() if row.branch == asked)
        elif asked == UNKNOWN_BRANCH:
            condition = ~Q(family_key__in=list(families))
        else:
            raise FieldErrors.at(
                "family", f"There is no addition family or branch “{asked}”; choose from the tree."
            )
    return found.filter(condition | Q(family_key__in=sorted(wanted)))


def _in_order(found: ReactionQuerySet, query: SearchQuery) -> ReactionQuerySet:
    is_down = query.sort.startswith("-")
    columns = [F(column) for column in _COLUMN_OF_SORT[query.sort.removeprefix("-")]]
    order = [
        column.desc(nulls_last=True) if is_down else column.asc(nulls_last=True)
        for column in columns
    ]
    return found.for_listing().order_by(*order, "-pk")


def _tree(
    found: ReactionQuerySet,
    query: SearchQuery,
    families: Mapping[str, Family],
    user: User,
) -> tuple[BranchCount, ...]:
    counts: dict[str, int] = dict(
        found.order_by().values_list("family_key").annotate(count=Count("pk"))
    )
    visible = Reaction.objects.visible_to(user).order_by().values_list("family_key", flat=True)
    keys = {*visible.distinct(), *query.family}
    branches: dict[str, list[FamilyCount]] = {}
    for row in families.values():
        if row.key in keys:
            branches.setdefault(row.branch, []).append(
                FamilyCount(row.key, row.name, counts.get(row.key, 0), row.key in query.family)
            )
    unknown = keys - families.keys() - {row.branch for row in families.values()} - {UNKNOWN_BRANCH}
    if unknown:
        branches[UNKNOWN_BRANCH] = [
            FamilyCount(key, key, counts.get(key, 0), False) for key in sorted(unknown)
        ]
    return tuple(_branch(name, members, query) for name, members in branches.items())


def _branch(name: str, members: list[FamilyCount], query: SearchQuery) -> BranchCount:
    count = sum(member.count for member in members)
    return BranchCount(name, count, name in query.family, tuple(members))
