"""One slide a claim, readable from the back of a room: a PDF of all and a PNG of each."""

from __future__ import annotations

from pathlib import Path
from textwrap import fill
from typing import TYPE_CHECKING, Any

from revinf.reports.cells import one_line
from revinf.reports.comments import place_words
from revinf.reports.figures import ACCENT, INK, MUTED
from revinf.reports.numbers import count, interval, probability, ratio

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, AuditedClaim

__all__ = ["write_slides"]

_SIZE = (13.333, 7.5)
_BIG, _TEXT, _SMALL = 30, 20, 14
"""Points on a slide of 7.5 inches: 20 points is about 1/27 of its height, 14 is for the source line only."""


def write_slides(audit: Audit, folder: Path) -> list[Path]:
    """Write the slides.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    folder : pathlib.Path
        Where `slides.pdf` and `slide-NN.png` go; it must exist.

    Returns
    -------
    list of pathlib.Path
        The files.
    """
    from matplotlib import rc_context
    from matplotlib.backends.backend_pdf import PdfPages

    written = [folder / "slides.pdf"]
    with (
        rc_context({"svg.hashsalt": "revinf"}),
        PdfPages(written[0], metadata={"Title": "Claims against base rates", "CreationDate": None}) as pages,
    ):
        for number, item in enumerate(audit.audited, start=1):
            figure = _slide(item, audit)
            pages.savefig(figure)
            path = folder / f"slide-{number:02d}.png"
            figure.savefig(path, metadata={"Title": f"Claim {one_line(item.claim.id)}", "Software": None})
            written.append(path)
    return written


def _slide(item: AuditedClaim, audit: Audit) -> Any:
    """Draw one slide."""
    from matplotlib.figure import Figure

    figure = Figure(figsize=_SIZE, dpi=96, facecolor="white")
    title = f"Does activity here mean {_plain(item.claim.term)}?"
    if item.claim.absent:
        title = f"Does no activity here mean no {_plain(item.claim.term)}?"
    figure.text(0.05, 0.93, fill(title, 52), fontsize=_BIG, weight="bold", va="top", color=INK)
    figure.text(0.05, 0.80, _plain(place_words(item)), fontsize=_TEXT, va="top", color=MUTED)
    if item.assessment is None:
        problem = item.problem.message if item.problem else "Not assessed."
        figure.text(0.05, 0.6, fill(_plain(problem), 70), fontsize=_TEXT, va="top", color=INK)
    else:
        _numbers(figure, item.assessment)
        _curve(figure, item.assessment)
        _conclusion(figure, item)
    facts = audit.source
    source = f"{_plain(facts.name)}: {count(facts.n_studies)} {_plain(facts.study_is)}"
    source += ". About a literature, never a person."
    if facts.invented:
        source = f"INVENTED DATA. {source}"
    figure.text(0.05, 0.04, source, fontsize=_SMALL, color=INK)
    return figure


def _plain(text: str) -> str:
    """Return text that the drawing library shows as it is: a dollar sign would start a formula."""
    return one_line(text).replace("$", r"\$")


def _numbers(figure: Any, assessment: Assessment) -> None:
    """Write the four counts and the ratio."""
    counts, answer = assessment.counts, assessment.likelihood_ratio
    lines = [
        f"{count(counts.term_active)} of {count(counts.term_total)} studies of it",
        f"{count(counts.other_active)} of {count(counts.other_total)} others",
        "",
        f"ratio {interval(answer.value, ratio)}",
        {"for": "speaks for it", "against": "speaks against it"}.get(answer.direction, "undecided"),
    ]
    for row, line in enumerate(lines):
        weight = "bold" if row == len(lines) - 1 else "normal"
        figure.text(0.05, 0.66 - 0.075 * row, line, fontsize=_TEXT + 2, weight=weight, color=INK, va="top")


def _curve(figure: Any, assessment: Assessment) -> None:
    """Draw posterior against prior with its interval band."""
    axis = figure.add_axes((0.57, 0.27, 0.38, 0.46))
    value, asked = assessment.likelihood_ratio.value, assessment.posterior
    priors = [step / 200 for step in range(1, 200)]

    def image(r: float) -> list[float]:
        return [1 / (1 + (1 - prior) / prior / r) for prior in priors]

    axis.fill_between(priors, image(value.low), image(value.high), color=ACCENT, alpha=0.2, lw=0)
    axis.plot(priors, image(value.estimate), color=ACCENT, lw=3)
    axis.plot([0, 1], [0, 1], color=MUTED, lw=1.5, ls="--")
    axis.plot([asked.prior], [asked.value.estimate], "o", color=INK, ms=12)
    axis.annotate(
        f"{probability(asked.value.estimate)}",
        (asked.prior, asked.value.estimate),
        xytext=(12, -22),
        textcoords="offset points",
        fontsize=_TEXT,
        color=INK,
    )
    axis.set_xlabel("before (prior)", fontsize=_TEXT)
    axis.set_ylabel("after (posterior)", fontsize=_TEXT)
    axis.set_xlim(0, 1)
    axis.set_ylim(0, 1)
    axis.set_xticks([0, 0.5, 1])
    axis.set_yticks([0, 0.5, 1])
    axis.tick_params(labelsize=_TEXT - 2)
    axis.spines[["top", "right"]].set_visible(False)


def _conclusion(figure: Any, item: AuditedClaim) -> None:
    """Write the advice and the severest cautions."""
    if item.assessment is None or item.advice is None:
        return
    codes = [caution.code for caution in item.assessment.cautions if caution.severity != "note"]
    codes = [code for code in codes if code != "invented-data"]
    line = item.advice.change.capitalize() + "."
    if codes:
        line += " Watch: " + ", ".join(codes[:4]) + (" ..." if len(codes) > 4 else "")
    figure.text(0.05, 0.17, fill(line, 88), fontsize=_TEXT, color=INK, va="top")
