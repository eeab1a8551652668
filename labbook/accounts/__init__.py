"""Accounts of the site: the first log-ins and where they are kept."""
