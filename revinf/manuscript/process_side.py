"""Which processes a cue leads to: not the task, and none beyond the turn of the thought."""

from __future__ import annotations

import re

from revinf.manuscript.inference import Reading
from revinf.manuscript.processes import ProcessMention
from revinf.manuscript.statement_patterns import ACTIVITY, DURING, LABEL_OF, STOP, SUBJECT, TASK_NOUN

__all__ = ["processes_after", "task_free"]


def processes_after(sentence: Reading, start: int) -> list[ProcessMention]:
    """Return the processes that a cue leads to: those after it, up to where the thought turns."""
    later = [process for process in sentence.processes if process.start >= start]
    turn = STOP.search(sentence.text, start)
    while turn and re.match(r"not only\b", sentence.text[turn.start() :], re.IGNORECASE):
        turn = STOP.search(sentence.text, turn.end())
    kept = [process for process in later if turn is None or process.start < turn.start()]
    near = []
    for process in kept:
        # What matters is the clause that names the process: "from the response, that fear ...".
        between = re.split(r"\bthat\b", sentence.text[start : process.start])[-1]
        activity = ACTIVITY.search(between)
        if activity and not LABEL_OF.search(between) and not _is_about_process(between):
            continue
        near.append(process)
    return task_free(sentence, near)


def _is_about_process(between: str) -> bool:
    """Tell whether activity words before a process only bring it in: "that viewers engaged in fear"."""
    last = list(ACTIVITY.finditer(between))[-1]
    return bool(
        re.match(r"(?:engag\w*|recruit\w*|involvement|activ\w+|respon\w+)$", last.group(), re.IGNORECASE)
        and re.fullmatch(
            r"(?:\s+(?:in|of|the|a|an|some|to|their|his|her|its|with|own|more|covert|strong|by|\w+ly))*\s*",
            between[last.end() :],
        )
    )


def task_free(sentence: Reading, processes: list[ProcessMention]) -> list[ProcessMention]:
    """Leave out processes that only name the task, unless nothing else is there."""

    def names_task(process: ProcessMention) -> bool:
        following = sentence.text[process.end : process.end + 60]
        return bool(TASK_NOUN.match(following) or DURING.search(sentence.text[: process.start]))

    chosen = [process for process in processes if not names_task(process)]
    chosen = [
        process
        for at, process in enumerate(chosen)
        if not any(SUBJECT.match(sentence.text[process.end : other.start]) for other in chosen[at + 1 :])
    ]
    return chosen or processes[:1]
