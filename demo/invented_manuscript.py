"""The invented short paper of the demonstration: its text, its table, the quotes of the claims.

EVERYTHING HERE IS INVENTED. Holds words only; coordinates come from invented_world.py, so that
paper and claims cannot disagree.
"""

from __future__ import annotations

from invented_world import CLAIMS

# claim: (paragraph of the discussion, the sentence that makes it)
QUOTES: dict[str, tuple[int, str]] = {
    "c01": (1, "Activity in the left amygdala shows that viewers were in a state of fear during"
               " the storm scenes."),
    "c02": (1, "The right parahippocampal response suggests that viewers engaged in navigation"
               " while the camera moved through the harbour."),
    "c03": (2, "Because the right anterior insula was active, we conclude that viewers felt"
               " disgust when the cook tasted the soup."),
    "c04": (2, "Activation of the dorsal midcingulate cortex indicates that viewers relived"
               " scenes of their own lives, that is, autobiographical memory."),
    "c05": (3, "The left fusiform gyrus, which has been tied to humour, lit up at the punch lines,"
               " proving that viewers found them funny."),
    "c06": (3, "The peak in the right caudate may reflect trust in the lighthouse keeper."),
    "c07": (4, "The left parietal peak implies that motor learning took place although nobody"
               " moved."),
    "c08": (4, "The right parietal peak reveals that spatial attention followed the boats."),
    "c09": (4, "Activity in the right fusiform gyrus means that viewers were looking at faces."),
    "c10": (5, "Joint activity of the right temporo-parietal junction and the medial prefrontal"
               " cortex demonstrates that viewers engaged theory of mind."),
    "c11": (5, "The left hand area was active, which is evidence that viewers were finger"
               " tapping along with the oars."),
}  # fmt: skip

_HEAD = """# What goes on in viewers of a film that does not exist

**INVENTED. This paper is made up for the demonstration of revinf. No such study was run, the film
does not exist, no person, journal or institution stands behind it, and every number is invented.**

## Abstract

Twenty-four invented volunteers watched an invented film about a harbour town while their brains
were scanned. Storm scenes, walks through the harbour, meals, jokes and quiet moments were compared
with a fixation cross. Storm scenes activated the left amygdala (x = -22, y = -4, z = -18), which
shows that the film evoked fear. Meals activated the right anterior insula (36, 22, -2), suggesting
disgust. We conclude that films can be read from the brain, a sentence this demonstration exists to
check.

## Methods

Fear was induced by cutting from calm water to sudden waves. Participants were instructed to watch
without moving. Coordinates are given in MNI152 space in mm, except the last row of Table 1, which
is in Talairach space. The threshold was p < 0.001, uncorrected.

## Results

Storm scenes compared with fixation increased activity in the left amygdala. Harbour walks
increased activity in the right parahippocampal gyrus. Table 1 lists all peaks.

**Table 1. Peaks (INVENTED).**

"""

# What the discussion says around the claims, paragraph by paragraph: before them and after them.
# Forward statements, background and hedges stand among the inferences on purpose.
_AROUND: tuple[tuple[str, str], ...] = (
    ("The film was designed to frighten, and fear is known to activate the left amygdala. Earlier"
     " invented studies reported that navigation engages the parahippocampal gyrus.",
     "Ratings collected after each scene agreed: storm scenes were rated as frightening by all"
     " viewers."),
    ("The anterior insula is a region that many tasks activate.",
     "It is conceivable that the same insula response had to do with pain rather than disgust."),
    ("Jokes were timed to fall on every fourth minute.",
     "We cannot infer from the caudate alone whether reward anticipation was present."),
    ("Three peaks were not expected.",
     "The response in the left inferior frontal gyrus could indicate inner speech, but we did not"
     " test this. Working memory tasks activate the left dorsolateral prefrontal cortex; our film"
     " had no such task."),
    ("Viewers had to follow who knew what about the missing boat.",
     "Future work should measure theory of mind in behaviour as well. The present results do not"
     " show that any single viewer was afraid, lied or remembered anything."),
)  # fmt: skip


def write_manuscript() -> str:
    """Return the whole paper as Markdown."""
    rows = ["| region | x | y | z | space |", "|---|---|---|---|---|"]
    rows += [f"| {region} | {x} | {y} | {z} | {space} |" for _, _, (x, y, z), space, _, _, region in CLAIMS]
    text = [_HEAD + "\n".join(rows), "## Discussion"]
    for number, (before, after) in enumerate(_AROUND, start=1):
        claims = [f"{quote}" for paragraph, quote in QUOTES.values() if paragraph == number]
        text.append(" ".join([before, *claims, after]))
    text.append(
        "## Note\n\nINVENTED throughout. The sentences above are of very different strength; that is "
        "what `revinf scan` and `revinf audit` are for."
    )
    return "\n\n".join(text) + "\n"
