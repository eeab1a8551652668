"""Log-in and log-out, from wherever the app is mounted."""

from __future__ import annotations

from typing import Any

from django.contrib.auth import views
from django.urls import reverse

from reactions.pages.accounts.forms import LogInForm


class LogIn(views.LoginView):
    """Ask for name and password; a person already logged in goes straight on."""

    template_name = "reactions/accounts/log_in.html"
    form_class = LogInForm
    redirect_authenticated_user = True

    def get_default_redirect_url(self) -> str:
        """Return where to go when no page was asked for."""
        return reverse("reactions:search")


class LogOut(views.LogoutView):
    """Log out (by POST) and show the log-in page."""

    http_method_names = ["post", "options"]

    def get_success_url(self) -> Any:
        """Return the log-in page of this app, whatever the site's settings say."""
        return self.get_redirect_url() or reverse("reactions:login")
