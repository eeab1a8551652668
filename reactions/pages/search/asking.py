"""Taking a question from an address: what was typed, what is wrong with it, what answers it."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from django.contrib.auth.models import User
from django.http import QueryDict

from reactions.errors import FieldErrors
from reactions.pages.form_errors import add_errors
from reactions.pages.search.forms import SearchForm
from reactions.pages.search.words import Condition, Loosening, conditions, loosenings
from reactions.search.language import SearchQuery
from reactions.search.query import Answer, BranchCount, answer


@dataclass(frozen=True)
class Question:
    """A question as typed in an address; ``found`` is None when it can't be answered."""

    user: User
    parameters: QueryDict
    form: SearchForm
    query: SearchQuery
    found: Answer | None
    errors: FieldErrors | None

    @property
    def address(self) -> str:
        """Return the question as the parameters of an address: as understood, else as typed."""
        if self.found is None:
            return self.parameters.urlencode()
        return self.query.to_address()

    @cached_property
    def tree(self) -> tuple[BranchCount, ...]:
        """Return the family tree with counts; of everything when the question can't be answered."""
        if self.found is not None:
            return self.found.tree
        typed = tuple(self.parameters.getlist("family"))
        everything = answer(SearchQuery(), self.user)
        known = {*everything.families, *(branch.name for branch in everything.tree)}
        asked = SearchQuery(family=tuple(name for name in typed if name in known))
        return answer(asked, self.user).tree

    @cached_property
    def conditions(self) -> list[Condition]:
        """Return what is asked, in words."""
        return conditions(self.query, self.found.families, self.user) if self.found else []

    @cached_property
    def loosenings(self) -> list[Loosening]:
        """Return what to leave out when nothing is found."""
        return loosenings(self.query, self.found.families, self.user) if self.found else []


def ask(parameters: QueryDict, user: User) -> Question:
    """Read a question from an address and answer it; what is wrong stands at its field."""
    form = SearchForm(parameters, user)
    try:
        query = SearchQuery.from_address(parameters)
        return Question(user, parameters, form, query, answer(query, user), None)
    except FieldErrors as error:
        add_errors(form, error)
        return Question(user, parameters, form, SearchQuery(), None, error)
