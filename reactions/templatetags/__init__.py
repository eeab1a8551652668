"""Template tags and filters of the pages."""
