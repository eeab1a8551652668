"""The request of a person who is logged in, for the type checker."""

from __future__ import annotations

from django.contrib.auth.models import User
from django.http import HttpRequest


class SignedInRequest(HttpRequest):
    """A request behind ``login_required``: its user is a real one."""

    user: User
