"""The fields of the search, each named as in the query language."""

from __future__ import annotations

from typing import Any

from django import forms
from django.contrib.auth.models import User

from reactions.models import Campaign, Reaction, State
from reactions.search.language import NEWEST_FIRST

_SORTS = (
    ("-changed", "last changed"),
    ("-performed", "date, latest first"),
    ("performed", "date, earliest first"),
    ("label", "label, A to Z"),
    ("-label", "label, Z to A"),
    ("temperature", "temperature, lowest first"),
    ("-temperature", "temperature, highest first"),
    ("duration", "time, shortest first"),
    ("-duration", "time, longest first"),
    ("-level", "level reached, highest first"),
    ("level", "level reached, lowest first"),
    ("-conversion", "conversion, highest first"),
    ("conversion", "conversion, lowest first"),
    ("-yield", "yield, highest first"),
    ("yield", "yield, lowest first"),
    ("changed", "longest unchanged"),
)
_KINDS = (
    ("auto", "SMILES or SMARTS"),
    ("smiles", "SMILES"),
    ("smarts", "SMARTS"),
    ("molfile", "molfile"),
)
# Fields below this fold are shown when one of them is asked for.
FURTHER_FIELDS = (
    "duration_min_lowest", "duration_min_highest", "level_lowest", "level_highest",
    "yield_percent_lowest", "yield_percent_highest", "performed_from", "performed_to", "campaign",
    "state", "addend",
)  # fmt: skip


def _end(placeholder: str) -> forms.CharField:
    """Return one end of a range, in which the unit may be left out or typed."""
    attrs = {"placeholder": placeholder, "autocomplete": "off"}
    return forms.CharField(required=False, widget=forms.TextInput(attrs=attrs))


def _chosen(label: str, any_of: str, values: list[tuple[str, str]], typed: str) -> forms.CharField:
    """Return a field to choose from ``values``, among them what was typed though it isn't known."""
    if typed and typed not in dict(values):
        values = [*values, (typed, typed)]
    widget = forms.Select(choices=[("", any_of), *values])
    return forms.CharField(required=False, label=label, widget=widget)


class SearchForm(forms.Form):
    """What a person can ask; whether it can be answered is the query language's to say.

    ``family`` is drawn as a tree by the template; here it carries its errors.
    """

    family = forms.CharField(required=False, widget=forms.HiddenInput)

    text = forms.CharField(
        required=False,
        label="Words",
        widget=forms.TextInput(attrs={"type": "search", "placeholder": "in title, notes, lines"}),
    )
    substructure = forms.CharField(
        required=False,
        label="Part of the addend",
        strip=False,
        widget=forms.Textarea(
            attrs={"rows": 1, "placeholder": "C1CCNC1", "spellcheck": "false",
                   "autocapitalize": "off", "autocomplete": "off"}
        ),
    )  # fmt: skip
    substructure_kind = forms.CharField(
        required=False, label="Read it as", widget=forms.Select(choices=_KINDS)
    )
    temperature_c_lowest = _end("°C")
    temperature_c_highest = _end("°C")
    duration_min_lowest = _end("min")
    duration_min_highest = _end("min")
    level_lowest = _end("0")
    level_highest = _end("6")
    yield_percent_lowest = _end("%")
    yield_percent_highest = _end("%")
    performed_from = forms.CharField(required=False, widget=forms.TextInput(attrs={"type": "date"}))
    performed_to = forms.CharField(required=False, widget=forms.TextInput(attrs={"type": "date"}))
    addend = forms.CharField(required=False, widget=forms.HiddenInput)
    sort = forms.CharField(
        required=False, label="Sorted by", widget=forms.Select(choices=_SORTS),
        initial=NEWEST_FIRST,
    )  # fmt: skip

    def __init__(self, data: Any, user: User) -> None:
        super().__init__(data, auto_id="ask_%s")
        visible = Reaction.objects.visible_to(user)
        for name, label, any_of in (
            ("cage", "Cage", "any cage"),
            ("solvent", "Solvent", "any solvent"),
        ):
            values = visible.exclude(**{name: ""}).order_by(name).values_list(name, flat=True)
            known = [(value, value) for value in values.distinct()]
            self.fields[name] = _chosen(label, any_of, known, data.get(name, ""))
        campaigns = [
            (row.code, f"{row.code} {row.name}") for row in Campaign.objects.visible_to(user)
        ]
        self.fields["campaign"] = _chosen(
            "Campaign", "all of yours", campaigns, data.get("campaign", "")
        )
        states = [(state.value, str(state.label)) for state in State]
        self.fields["state"] = _chosen("State", "any state", states, data.get("state", ""))

    @property
    def asks_further(self) -> bool:
        """Return whether one of the folded fields asks something or is faulty."""
        return any(self.data.get(name) or name in self.errors for name in FURTHER_FIELDS)
