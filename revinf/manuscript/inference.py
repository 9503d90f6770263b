"""A sentence with what was found in it, and the steps from activity to processes that it makes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from revinf.manuscript.cues import CueMention
from revinf.manuscript.places import PlaceMention
from revinf.manuscript.processes import ProcessMention

__all__ = ["Inference", "Reading", "Statement", "StatementKind"]

StatementKind = Literal["claim", "negated", "reported", "background", "forward", "none"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Reading:
    """A sentence with all that was found in it."""

    text: str
    places: Sequence[PlaceMention]
    processes: Sequence[ProcessMention]
    cues: Sequence[CueMention]


@dataclass(frozen=True, slots=True, kw_only=True)
class Inference:
    """One step from activity to a process.

    Parameters
    ----------
    process : ProcessMention
        The claimed process, in this sentence.
    places : tuple of PlaceMention
        Where the activity is.
    from_before : bool
        The places stand in the sentence before.
    cue : CueMention
        What makes it an inference.
    hedged : bool
        Said with reserve.
    """

    process: ProcessMention
    places: tuple[PlaceMention, ...]
    from_before: bool
    cue: CueMention
    hedged: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Statement:
    """What a sentence does, and its inferences where it is a claim."""

    kind: StatementKind
    inferences: tuple[Inference, ...] = ()
