"""Logging in and out."""
