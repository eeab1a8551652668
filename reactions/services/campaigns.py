"""Opening campaigns and saying who may do what in them."""

from __future__ import annotations

from django.contrib.auth import get_user_model
from django.contrib.auth.models import User
from django.core.exceptions import ValidationError
from django.db import transaction

from reactions.errors import FieldErrors
from reactions.models import Campaign, Membership, Role
from reactions.services.revising import require_role


@transaction.atomic
def open_campaign(
    user: User, *, code: str, name: str, purpose: str = "", is_invented: bool = False
) -> Campaign:
    """Open a campaign whose first author is ``user``; raises ``FieldErrors``."""
    campaign = Campaign(
        code=code.strip().upper(), name=name.strip(), purpose=purpose, is_invented=is_invented
    )
    try:
        campaign.full_clean()
    except ValidationError as error:
        raise FieldErrors(error.message_dict) from error
    campaign.save()
    Membership.objects.create(campaign=campaign, user=user, role=Role.AUTHOR)
    return campaign


@transaction.atomic
def set_member(user: User, campaign: Campaign, username: str, role: str) -> Membership:
    """Give the person called ``username`` a role in ``campaign``; an author may.

    Raises ``NotAllowed``, or ``FieldErrors`` for an unknown name or role, or when it would leave
    the campaign without an author.
    """
    require_role(user, campaign, Role.AUTHOR)
    if role not in Role.values:
        raise FieldErrors.at("role", f"“{role}” is no role; choose {', '.join(Role.values)}.")
    person = get_user_model().objects.filter(username=username.strip()).first()
    if person is None:
        raise FieldErrors.at(
            "username", f"Nobody logs in as “{username}”; ask for an account first."
        )
    if role != Role.AUTHOR:
        _keep_an_author(campaign, person, "role")
    membership, _ = Membership.objects.update_or_create(
        campaign=campaign, user=person, defaults={"role": role}
    )
    return membership


@transaction.atomic
def remove_member(user: User, campaign: Campaign, username: str) -> None:
    """Take a person out of ``campaign``; an author may. Raises as ``set_member`` does."""
    require_role(user, campaign, Role.AUTHOR)
    membership = campaign.memberships.filter(user__username=username).first()
    if membership is None:
        raise FieldErrors.at("username", f"“{username}” is not a member of this campaign.")
    _keep_an_author(campaign, membership.user, "username")
    membership.delete()


def _keep_an_author(campaign: Campaign, leaving: User, field: str) -> None:
    """Raise when ``leaving`` is the campaign's only author."""
    authors = campaign.memberships.select_for_update().filter(role=Role.AUTHOR)
    if not [row for row in authors if row.user_id != leaving.pk]:
        raise FieldErrors.at(
            field, "This is the campaign's only author; make someone else an author first."
        )
