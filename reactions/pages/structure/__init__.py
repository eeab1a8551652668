"""Structures drawn or typed, shown back; and the pictures of stored addends."""
