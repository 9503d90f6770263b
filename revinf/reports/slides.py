"""One slide a claim, readable from the back of a room: a PDF of all and a PNG of each."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Any

from revinf.in_processes import each
from revinf.reports.cells import one_line
from revinf.reports.comments import place_words
from revinf.reports.drawn_text import fitted
from revinf.reports.figures import ACCENT, INK, MUTED
from revinf.reports.numbers import count, interval, probability, ratio

if TYPE_CHECKING:
    from revinf.evidence.assessment import Assessment
    from revinf.evidence.audit import Audit, AuditedClaim
    from revinf.evidence.parts import LiteratureFacts

__all__ = ["write_slides"]

_SIZE = (13.333, 7.5)
_BIG, _TEXT, _SMALL = 30, 20, 14
"""Points on a slide of 7.5 inches: 20 points is about 1/27 of its height, 14 is for quote and source only."""
_MANY = 16
"""From this number of slides on it pays to start other processes."""
_LEFT, _WIDE, _HALF = 0.05, 0.90, 0.43


def write_slides(audit: Audit, folder: Path, *, progress: Callable[[int, int], None] | None = None) -> list[Path]:
    """Write the slides.

    Parameters
    ----------
    audit : Audit
        From `revinf.audit`.
    folder : pathlib.Path
        Where `slides.pdf` and `slide-NN.png` go; it must exist.
    progress : callable, optional
        Told how many slides are drawn, of how many.

    Returns
    -------
    list of pathlib.Path
        The files.
    """
    from matplotlib import rc_context
    from matplotlib.backends.backend_pdf import PdfPages

    written = [folder / "slides.pdf"]
    with (
        rc_context({"svg.hashsalt": "revinf", "font.family": "DejaVu Sans"}),
        PdfPages(written[0], metadata={"Title": "Claims against base rates", "CreationDate": None}) as pages,
    ):
        for number, (item, path) in enumerate(zip(audit.audited, _images(audit, folder), strict=True), start=1):
            pages.savefig(slide(item, audit.source))
            written.append(path)
            if progress is not None:
                progress(number, len(audit.audited))
    return written


def _images(audit: Audit, folder: Path) -> Iterator[Path]:
    """Write the PNG of each slide and give the paths in order; many of them beside each other."""
    named = [(item, folder / f"slide-{number:02d}.png") for number, item in enumerate(audit.audited, start=1)]
    if len(named) < _MANY:
        for item, path in named:
            _write_image(item, audit.source, path)
            yield path
        return
    written = each(_write_image, ((item, audit.source, path) for item, path in named))
    for _, (_, path) in zip(written, named, strict=True):
        yield path


def _write_image(item: AuditedClaim, facts: LiteratureFacts, path: Path) -> None:
    """Write one slide as an image."""
    from matplotlib import rc_context

    with rc_context({"font.family": "DejaVu Sans"}):
        figure = slide(item, facts)
        figure.savefig(path, metadata={"Title": f"Claim {one_line(item.claim.id)}", "Software": None})


def slide(item: AuditedClaim, facts: LiteratureFacts) -> Any:
    """Draw one slide.

    Parameters
    ----------
    item : AuditedClaim
        The claim.
    facts : LiteratureFacts
        Of the literature that it was asked of.

    Returns
    -------
    matplotlib.figure.Figure
        13.3 by 7.5 inches.
    """
    from matplotlib.figure import Figure

    figure = Figure(figsize=_SIZE, dpi=96, facecolor="white")
    title = f"Does activity here mean {item.claim.term}?"
    if item.claim.absent:
        title = f"Does no activity here mean no {item.claim.term}?"
    top = _write(figure, 0.95, title, _BIG, lines=2, weight="bold")
    top = _write(figure, top - 0.015, place_words(item), _TEXT, lines=1)
    quote = f"{item.claim.id}: \u201c{item.claim.quote}\u201d" if item.claim.quote else f"claim {item.claim.id}"
    _write(figure, top - 0.01, quote, _SMALL, lines=1, style="italic" if item.claim.quote else "normal")
    if item.assessment is None:
        problem = item.problem.message if item.problem else "Not assessed."
        _write(figure, 0.6, problem, _TEXT, lines=9)
    else:
        _numbers(figure, item.assessment)
        _curve(figure, item.assessment)
        _conclusion(figure, item)
    source = f"{facts.name}: {count(facts.n_studies)} {facts.study_is}. About a literature, never a person."
    _write(figure, 0.055, f"INVENTED DATA. {source}" if facts.invented else source, _SMALL, lines=1)
    return figure


def _write(figure: Any, top: float, text: str, size: float, *, lines: int, width: float = _WIDE, **look: Any) -> float:
    """Write text at the left edge and return the height, as a share of the slide, at which it ends."""
    broken = fitted(figure, text, size, width=width, lines=lines, weight=look.get("weight", "normal"))
    look.setdefault("color", INK)
    figure.text(_LEFT, top, broken, fontsize=size, va="top", linespacing=1.2, **look)
    return top - (broken.count("\n") + 1) * size * 1.25 / (72 * _SIZE[1])


def _numbers(figure: Any, assessment: Assessment) -> None:
    """Write the four counts and the ratio."""
    counts, answer = assessment.counts, assessment.likelihood_ratio
    seen = "without activity" if assessment.claim.absent else "active"
    verdict = {"for": "speaks for it", "against": "speaks against it"}.get(answer.direction, "undecided")
    lines = [
        f"{seen} in {count(counts.term_active)} of {count(counts.term_total)} studies of it",
        f"and in {count(counts.other_active)} of {count(counts.other_total)} others",
        "",
        f"ratio {interval(answer.value, ratio)}",
        verdict,
    ]
    for row, line in enumerate(lines):
        if line:
            weight = "bold" if line == verdict else "normal"
            _write(figure, 0.63 - 0.073 * row, line, _TEXT + 2, lines=1, width=_HALF, weight=weight)


def _curve(figure: Any, assessment: Assessment) -> None:
    """Draw posterior against prior with its interval band."""
    axis = figure.add_axes((0.57, 0.27, 0.38, 0.40))
    value, asked = assessment.likelihood_ratio.value, assessment.posterior
    priors = [step / 200 for step in range(1, 200)]

    def image(r: float) -> list[float]:
        return [1 / (1 + (1 - prior) / prior / r) for prior in priors]

    axis.fill_between(priors, image(value.low), image(value.high), color=ACCENT, alpha=0.2, lw=0)
    axis.plot(priors, image(value.estimate), color=ACCENT, lw=3)
    axis.plot([0, 1], [0, 1], color=MUTED, lw=1.5, ls="--")
    point = (asked.prior, asked.value.estimate)
    axis.plot(*[[value] for value in point], "o", color=INK, ms=12, clip_on=False)
    # The number stands on the side of the curve's empty corner, inside the axes wherever the point is.
    right, up = point[0] < 0.7, point[1] < 0.3
    axis.annotate(
        probability(point[1]),
        point,
        xytext=(14 if right else -14, 14 if up else -14),
        textcoords="offset points",
        ha="left" if right else "right",
        va="bottom" if up else "top",
        fontsize=_TEXT,
        weight="bold",
        color=INK,
        bbox={"boxstyle": "round,pad=0.15", "facecolor": "white", "edgecolor": "none", "alpha": 0.8},
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
        line += " Watch: " + ", ".join(codes[:4]) + (" …" if len(codes) > 4 else "")
    _write(figure, 0.165, line, _TEXT, lines=2)
