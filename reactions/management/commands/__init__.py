"""Commands, each a thin door to a service or a calculator."""
