"""Bringing a lab's history in from its spreadsheet."""
