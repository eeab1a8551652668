"""The form of the log-in page."""

from __future__ import annotations

from django.contrib.auth.forms import AuthenticationForm


class LogInForm(AuthenticationForm):
    """User name and password; the message says what to do, not which of the two is wrong."""

    error_messages = {
        "invalid_login": "No account has this name with this password. Capitals count in both.",
        "inactive": "This account is closed; ask the person who looks after the accounts.",
    }
