"""The table of families by branch, and the form that adds the lab's own."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from django import forms
from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from reactions.chemistry.families import Family
from reactions.chemistry.families import families as built_in
from reactions.chemistry.quantity_text import format_duration, format_temperature
from reactions.errors import WHOLE, FieldErrors
from reactions.models import Membership, Role, known_families
from reactions.pages.access import member_page, person_of
from reactions.pages.families.forms import (
    BY_PRODUCT_LINES,
    ROLE_LINES,
    ByProductForm,
    FamilyForm,
    RoleForm,
)
from reactions.services.families import define_family

# Where the chemistry's name of a field differs from the form's.
_FIELDS = {
    "sites": "sites_c60",
    "highest_level": "highest_c60",
    "usual_temperature_c": "temperature_lowest",
    "usual_duration_min": "duration_lowest",
}


@require_http_methods(["GET", "HEAD", "POST"])
@member_page
def families(request: HttpRequest) -> HttpResponse:
    """Show every family by branch; add one of the lab's own by POST."""
    user = person_of(request)
    data = request.POST if request.method == "POST" else None
    form = FamilyForm(data)
    roles = [RoleForm(data, prefix=f"roles-{place}") for place in range(ROLE_LINES)]
    by_products = [
        ByProductForm(data, prefix=f"by_products-{place}") for place in range(BY_PRODUCT_LINES)
    ]
    if data is not None and _all_valid([form, *roles, *by_products]):
        try:
            added = define_family(user, _definition(form, roles, by_products))
        except FieldErrors as error:
            _place(error, form, _filled(roles), _filled(by_products))
        else:
            messages.success(request, f"“{added.name}” is one of your families now.")
            return redirect("reactions:families")
    known = known_families()
    context: dict[str, Any] = {
        "navigation": "families",
        "branches": _branches(known),
        "count": len(known),
        "form": form,
        "roles": roles,
        "by_products": by_products,
        "may_add": Membership.objects.filter(user=user, role=Role.AUTHOR).exists(),
    }
    status = 200 if data is None else 422
    return render(request, "reactions/families/families.html", context, status=status)


def _all_valid(each: list[forms.Form]) -> bool:
    return not [form for form in each if not form.is_valid()]


def _filled(each: list[Any]) -> list[Any]:
    return [form for form in each if form.cleaned_data.get("name")]


def _definition(
    form: FamilyForm, roles: list[RoleForm], by_products: list[ByProductForm]
) -> dict[str, Any]:
    return {
        **form.definition(),
        "roles": [
            {
                "role": role.cleaned_data["role"] or "reagent",
                "name": role.cleaned_data["name"],
                "equivalents_per_addition": role.cleaned_data["equivalents_per_addition"],
            }
            for role in _filled(roles)
        ],
        "by_products": [
            {
                "name": row.cleaned_data["name"],
                "smiles": row.cleaned_data["smiles"] or None,
                "per_addition": row.cleaned_data["per_addition"],
                "is_gas": row.cleaned_data["is_gas"],
            }
            for row in _filled(by_products)
        ],
    }


def _place(
    error: FieldErrors, form: FamilyForm, roles: list[RoleForm], by_products: list[ByProductForm]
) -> None:
    """Put what the chemistry objects to at the fields it was typed in."""
    lines: dict[str, list[Any]] = {"roles": roles, "by_products": by_products}
    for path, texts in error.messages.items():
        target: forms.Form = form
        field = _FIELDS.get(path, path)
        parts = path.split(".")
        if len(parts) == 3 and parts[0] in lines and int(parts[1]) < len(lines[parts[0]]):
            target, field = lines[parts[0]][int(parts[1])], parts[2]
        for text in texts:
            if field in target.fields:
                target.add_error(field, text)
            else:
                form.add_error(None, text if path == WHOLE else f"{path}: {text}")


def _branches(known: Mapping[str, Family]) -> list[tuple[str, list[dict[str, Any]]]]:
    branches: dict[str, list[dict[str, Any]]] = {}
    for row in known.values():
        branches.setdefault(row.branch, []).append(_shown(row))
    return list(branches.items())


def _shown(row: Family) -> dict[str, Any]:
    """Return a family with its ranges in words."""
    return {
        "family": row,
        "is_own": row.key not in built_in(),
        "sites": list(row.sites.items()),
        "highest": list(row.highest_level.items()),
        "temperature": _range(row.usual_temperature_c, format_temperature),
        "duration": _range(row.usual_duration_min, format_duration),
    }


def _range(ends: tuple[float, float] | None, show: Any) -> str:
    if ends is None:
        return ""
    lowest, highest = (show(end) for end in ends)
    return lowest if lowest == highest else f"{lowest} to {highest}"
