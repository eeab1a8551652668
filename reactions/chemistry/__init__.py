"""The chemistry: pure functions over plain values; no Django, no database, no network."""
