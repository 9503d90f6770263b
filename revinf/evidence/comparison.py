"""Do two literatures agree? The same claims, asked of both."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import asdict, dataclass, replace
from typing import Any, Literal

from revinf.evidence.assess import assess
from revinf.evidence.assessment import Assessment
from revinf.evidence.choices import Choices
from revinf.evidence.claim import Claim
from revinf.evidence.claims_table import ClaimsTable
from revinf.evidence.parts import LiteratureFacts
from revinf.evidence.sources import LiteratureSource, Source, as_source
from revinf.evidence.vocabulary import Vocabulary, shipped_vocabulary
from revinf.exceptions import InvalidClaimError, RevinfError, UnknownTermError
from revinf.stats.estimates import Estimate
from revinf.stats.ratio_of_ratios import ratio_of_ratios

__all__ = ["Agreement", "ComparedClaim", "Comparison", "compare"]

Agreement = Literal["agree", "contradict", "one undecided", "both undecided"]


@dataclass(frozen=True, slots=True, kw_only=True)
class ComparedClaim:
    """One claim in two literatures.

    Parameters
    ----------
    claim : Claim
        As it was asked.
    terms : (str, str)
        What each literature calls the process.
    first, second : Assessment or None
        The answers.
    agreement : Agreement or None
        None where one of them cannot answer.
    quotient : Estimate or None
        First ratio over the second.
    probability_larger : float or None
        That the first is larger.
    problems : tuple of str
        Why an answer is missing.
    """

    claim: Claim
    terms: tuple[str, str]
    first: Assessment | None
    second: Assessment | None
    agreement: Agreement | None
    quotient: Estimate | None
    probability_larger: float | None
    problems: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Comparison:
    """All claims in two literatures; `shared_studies` have the same id or DOI in both, and make agreement easy."""

    first: LiteratureFacts
    second: LiteratureFacts
    shared_studies: int
    claims: tuple[ComparedClaim, ...]

    def counts(self) -> Counter[Agreement]:
        """Return how many claims agree, contradict, or are undecided."""
        return Counter(item.agreement for item in self.claims if item.agreement is not None)

    def verdict(self) -> str:
        """Say in one sentence how far they agree, and no more."""
        found = self.counts()
        both = sum(found.values())
        if not both:
            return "No claim could be assessed in both, so nothing can be said of their agreement."
        decided = found["agree"] + found["contradict"]
        words = (
            f"Of {both} claims that both can assess, both decide {decided}: they agree on {found['agree']} and "
            f"contradict each other on {found['contradict']}; {found['one undecided']} are decided by one only and "
            f"{found['both undecided']} by none."
        )
        if self.shared_studies:
            words += f" They share {self.shared_studies} studies, so part of the agreement is built in."
        return words

    def to_dict(self) -> dict[str, Any]:
        """Return it as plain data of schema revinf/comparison/1."""
        return {
            "schema": "revinf/comparison/1",
            "first": self.first.to_dict(),
            "second": self.second.to_dict(),
            "shared_studies": self.shared_studies,
            "counts": {
                name: self.counts()[name] for name in ("agree", "contradict", "one undecided", "both undecided")
            },
            "verdict": self.verdict(),
            "claims": [
                {
                    "id": item.claim.id,
                    "terms": list(item.terms),
                    "agreement": item.agreement,
                    "quotient": None if item.quotient is None else asdict(item.quotient),
                    "probability_larger": item.probability_larger,
                    "first": None if item.first is None else item.first.to_dict(),
                    "second": None if item.second is None else item.second.to_dict(),
                    "problems": list(item.problems),
                }
                for item in self.claims
            ],
        }


def compare(
    claims: Sequence[Claim] | ClaimsTable,
    first: Any,
    second: Any,
    choices: Choices | None = None,
    *,
    progress: Callable[[int, int], None] | None = None,
) -> Comparison:
    """Ask two literatures, or tables, about the same claims.

    Parameters
    ----------
    claims : sequence of Claim, or ClaimsTable
        What to ask.
    first, second : Literature, BaseRateTable or Source
        Whom to ask.
    choices : Choices, optional
        As for `revinf.assess`.
    progress : callable, optional
        Told how many claims are done, of how many.

    Returns
    -------
    Comparison
        Claims that one cannot assess are kept with the reason.

    Raises
    ------
    InvalidClaimError
        If there is no claim.
    """
    listed = list(claims.claims) if isinstance(claims, ClaimsTable) else list(claims)
    if not listed:
        raise InvalidClaimError("there is no claim with a place to compare; fill in its coordinates")
    one, two = as_source(first), as_source(second)
    choices = choices or Choices()
    compared = []
    for done, claim in enumerate(listed, start=1):
        compared.append(_compared(claim, one, two, choices))
        if progress is not None:
            progress(done, len(listed))
    return Comparison(first=one.facts, second=two.facts, shared_studies=_shared(one, two), claims=tuple(compared))


def _compared(claim: Claim, first: Source, second: Source, choices: Choices) -> ComparedClaim:
    """Ask both about one claim."""
    words = choices.vocabulary or shipped_vocabulary()
    problems: list[str] = []
    answers, terms = [], []
    for source in (first, second):
        asked, answer = _asked(claim, source, choices, words, problems)
        answers.append(answer)
        terms.append(asked)
    one, two = answers
    if one is None or two is None:
        agreement, quotient = None, None
    else:
        agreement = _agreement(one.likelihood_ratio.direction, two.likelihood_ratio.direction)
        quotient = ratio_of_ratios(
            one.counts, two.counts, level=choices.level, prior=choices.ratio_prior, limit=choices.ratio_limit
        )
    return ComparedClaim(
        claim=claim,
        terms=(terms[0], terms[1]),
        first=one,
        second=two,
        agreement=agreement,
        quotient=None if quotient is None else quotient.ratio,
        probability_larger=None if quotient is None else quotient.probability_larger,
        problems=tuple(problems),
    )


def _asked(
    claim: Claim, source: Source, choices: Choices, words: Vocabulary, problems: list[str]
) -> tuple[str, Assessment | None]:
    """Assess a claim, under a synonym where only that is known; collect what is wrong."""
    try:
        return claim.term, assess(claim, source, choices)
    except UnknownTermError as error:
        same = sorted(set(error.near) & (words.names_of(claim.term) - {claim.term}))
        if same:
            try:
                return same[0], assess(replace(claim, term=same[0]), source, choices)
            except RevinfError as again:
                problems.append(f"{source.facts.name}: {again}")
                return claim.term, None
        problems.append(f"{source.facts.name}: {error}")
    except RevinfError as error:
        problems.append(f"{source.facts.name}: {error}")
    return claim.term, None


def _agreement(first: str, second: str) -> Agreement:
    """Say how two directions stand to one another."""
    undecided = (first == "undecided") + (second == "undecided")
    if undecided == 2:
        return "both undecided"
    if undecided == 1:
        return "one undecided"
    return "agree" if first == second else "contradict"


def _shared(first: Source, second: Source) -> int:
    """Count the studies of the first that the second has, too, by id or DOI."""
    if not isinstance(first, LiteratureSource) or not isinstance(second, LiteratureSource):
        return 0
    one, two = first.literature, second.literature
    ids, dois = set(two.study_ids), {doi.lower() for doi in two.study_dois if doi}
    return sum(
        study in ids or (bool(doi) and doi.lower() in dois)
        for study, doi in zip(one.study_ids, one.study_dois, strict=True)
    )
