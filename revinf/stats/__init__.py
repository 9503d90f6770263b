"""Pure functions of counts and probabilities: no files, no brain, no words.

Letters: H1 is "the process was engaged" (a study carries the term), H0 "it was not". `active` means that
the study has a peak in the region. `n11` in the formulas is active and term, `n10` inactive and term,
`n01` active and other, `n00` inactive and other.
"""
