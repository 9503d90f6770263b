"""The four counts of every (region, term): counted from a literature, or read from a table."""
