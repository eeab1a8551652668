"""Log-in and log-out, from wherever the app is mounted."""

from __future__ import annotations

from math import comb
from typing import Any

from django.contrib.auth import views
from django.urls import reverse

from reactions.pages.accounts.forms import LogInForm

# The picture on the log-in page: a run with more and more reagent, from hardly any to hexakis.
_SITES = 30
_UPTAKES = (0.15, 0.5, 1.0, 1.6, 2.3, 3.1, 4.0, 5.0)


class LogIn(views.LoginView):
    """Ask for name and password; a person already logged in goes straight on."""

    http_method_names = ["get", "head", "post", "options"]
    template_name = "reactions/accounts/log_in.html"
    form_class = LogInForm
    redirect_authenticated_user = True

    def get_context_data(self, **kwargs: Any) -> dict[str, Any]:
        """Add the compositions of the picture."""
        return super().get_context_data(
            compositions=[_by_chance(uptake) for uptake in _UPTAKES], **kwargs
        )

    def get_default_redirect_url(self) -> str:
        """Return where to go when no page was asked for."""
        return reverse("reactions:search")


def _by_chance(uptake: float) -> list[float]:
    """Return the binomial composition at a mean number of additions over independent sites."""
    share = uptake / _SITES
    return [
        comb(_SITES, level) * share**level * (1 - share) ** (_SITES - level)
        for level in range(_SITES + 1)
    ]


class LogOut(views.LogoutView):
    """Log out (by POST) and show the log-in page."""

    http_method_names = ["post", "options"]

    def get_success_url(self) -> Any:
        """Return the log-in page of this app, whatever the site's settings say."""
        return self.get_redirect_url() or reverse("reactions:login")
