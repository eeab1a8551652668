"""The planner: what to weigh out for what is wanted, and what it will give."""
