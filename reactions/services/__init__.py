"""The only writers. Each function is one transaction and writes one revision."""
