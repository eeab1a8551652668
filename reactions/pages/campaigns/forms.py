"""What is typed on the pages of campaigns."""

from __future__ import annotations

from django import forms

from reactions.models import Role


class CampaignForm(forms.Form):
    """A new campaign."""

    name = forms.CharField(max_length=120, help_text="The product it works toward.")
    code = forms.CharField(
        max_length=12,
        help_text="2 to 12 capital letters and digits. Stands before each number, as in ACC-17.",
        widget=forms.TextInput(attrs={"autocapitalize": "characters", "autocomplete": "off"}),
    )
    purpose = forms.CharField(required=False, widget=forms.Textarea(attrs={"rows": 3}))


class MemberForm(forms.Form):
    """A person and what they may do."""

    username = forms.CharField(
        max_length=150, label="User name", widget=forms.TextInput(attrs={"autocomplete": "off"})
    )
    role = forms.ChoiceField(choices=Role, initial=Role.READER)
