"""Campaigns: the list, a campaign with its reactions, and its members."""
