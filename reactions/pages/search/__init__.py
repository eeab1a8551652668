"""The reaction list, which is the search."""
