"""The records, the search and the calculators over REST."""
