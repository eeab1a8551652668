"""The addition families: the table, and the lab's own."""
