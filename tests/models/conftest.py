import pytest
from django.utils import timezone

from reactions.models import Reaction, State


@pytest.fixture
def planned(campaign, author):
    return Reaction.objects.create(
        campaign=campaign, number=1, title="mono-adduct", family_key="bingel", created_by=author
    )


@pytest.fixture
def completed(campaign, author):
    return Reaction.objects.create(
        campaign=campaign,
        number=2,
        title="bis-adduct",
        family_key="bingel",
        created_by=author,
        state=State.COMPLETED,
        completed_at=timezone.now(),
    )
