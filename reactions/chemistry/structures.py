"""Structures as typed or drawn, read into molecules."""

from __future__ import annotations


class StructureError(ValueError):
    """A structure that can't be read; the message says what is wrong and the remedy."""
