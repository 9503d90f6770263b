"""What weakens a claim: pure functions from the numbers of an assessment to a caution or none.

One family a file; `registry` lists them in the order in which they are shown. The docstring of each is the
explanation that a reader gets, thresholds stand in `thresholds`.
"""
