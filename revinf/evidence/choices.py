"""How an assessment is made, apart from the claim itself."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

from revinf.evidence.cautions.thresholds import Thresholds, read_thresholds
from revinf.evidence.selectivity import SHOWN_RIVALS
from revinf.evidence.vocabulary import Vocabulary, chosen_vocabulary
from revinf.exceptions import InvalidClaimError
from revinf.stats.estimates import check_level
from revinf.stats.ratio import DEFAULT_LIMIT, RatioPrior

__all__ = ["Choices", "choices_of"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Choices:
    """How an assessment is made.

    Parameters
    ----------
    level : float, probability
        Posterior probability that each interval holds.
    ratio_prior : {"shared", "independent"}
        Prior of the two rates behind the likelihood ratio.
    ratio_limit : float
        95 % of the shared prior lies between 1/limit and limit.
    vocabulary : Vocabulary, optional
        Kinds and domains of terms; the shipped ones where left out.
    thresholds : Thresholds
        Where cautions begin.
    shown_rivals : int or None
        How many rivals are listed, best first; None lists all.
    """

    level: float = 0.95
    ratio_prior: RatioPrior = "shared"
    ratio_limit: float = DEFAULT_LIMIT
    vocabulary: Vocabulary | None = None
    thresholds: Thresholds = field(default_factory=Thresholds)
    shown_rivals: int | None = SHOWN_RIVALS


def choices_of(
    *,
    level: float = 0.95,
    ratio_prior: str = "shared",
    ratio_limit: float = 20.0,
    kinds: str | Path | None = None,
    thresholds: str | Path | None = None,
    every_rival: bool = False,
) -> Choices:
    """Return choices as somebody typed them, checked.

    Parameters
    ----------
    level : float, probability
        Posterior probability that each interval holds.
    ratio_prior : str
        "shared" or "independent".
    ratio_limit : float, ratio > 1
        Limit of the shared prior.
    kinds : path, optional
        A table of kinds, domains and synonyms.
    thresholds : path, optional
        A TOML file of thresholds.
    every_rival : bool, default False
        List all rivals.

    Returns
    -------
    Choices
        Checked.

    Raises
    ------
    InvalidClaimError
        If the prior's name is unknown.
    InputFileError
        If a file cannot be used.

    Examples
    --------
    >>> choices_of(level=0.9, ratio_prior="shared", ratio_limit=20).level
    0.9
    """
    if ratio_prior not in ("shared", "independent"):
        raise InvalidClaimError(f"ratio prior must be shared or independent, but got {ratio_prior!r}; use shared")
    return Choices(
        level=check_level(level),
        ratio_prior="shared" if ratio_prior == "shared" else "independent",
        ratio_limit=ratio_limit,
        vocabulary=chosen_vocabulary(kinds),
        thresholds=read_thresholds(thresholds),
        shown_rivals=None if every_rival else SHOWN_RIVALS,
    )
