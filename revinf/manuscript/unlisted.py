"""Processes that the table does not list, by the nouns and verbs that bring them in.

"tactile imagery", "a feeling of nostalgia", "viewers felt nostalgic": a reader would see a process there. They
are taken only where nothing listed is found, and are marked, since no literature may know them.
"""

from __future__ import annotations

import re

from revinf.manuscript.phrases import Token
from revinf.manuscript.processes import ProcessMention

__all__ = ["named_after", "named_clause", "speaks_of_people", "unlisted_processes"]

_HEADS_WORDS = """
    perception processing memory memories learning control regulation imagery attention monitoring detection
    inhibition retrieval recognition recollection integration anticipation prediction expectation awareness
    reasoning inference cognition comprehension understanding production planning preparation selection
    switching updating maintenance rehearsal encoding consolidation evaluation valuation appraisal judgement
    judgment judgements judgments thinking thought thoughts imagination simulation empathy sympathy emotion
    emotions motivation seeking aversion avoidance conditioning extinction suppression discrimination
    categorisation categorization naming generation execution coordination orienting vigilance arousal
    experience sensation segmentation representation computation estimation deliberation attribution attachment
    bonding curiosity craving desire regret relief pride envy jealousy shame guilt contempt admiration awe
    boredom frustration disappointment nostalgia hope loneliness gratitude longing suspense tension rehearsal
    mimicry synchronisation synchronization adaptation exploration foraging persuasion introspection reflection
    fluency completion binding abstraction association comparison search tracking mapping timing conflict effort
    fatigue metacognition insight intuition hesitation doubt confidence mentalising mentalizing visualisation
    visualization verbalisation verbalization remembering forgetting feeling feelings
"""
_HEADS = frozenset(_HEADS_WORDS.split())
"""Last words of the names of processes."""

_LOOSE_WORDS = """
    experience feeling feelings representation computation reflection effort association comparison search
    mapping conflict tension selection adaptation completion execution sensation thought thoughts tracking
    timing generation preparation binding control learning memory emotion emotions attention awareness
    understanding thinking
"""
_LOOSE = frozenset(_LOOSE_WORDS.split())
"""Heads that alone say too little; a word before them must say of what."""

_FELT = re.compile(
    r"\b(?:felt|feel|feeling|experienced|experience|experiencing|sensed|became|were|grew)\s+"
    r"(?:(?:a|an|some|the|more|very|rather|quite|strong|strongly|deep|deeply|intense|intensely|genuinely|indeed)\s+)*"
    r"(?P<what>[a-z][a-z-]+(?:al|ed|ic|ous|ful|ive|ious|less|ant|ent|gia|ness|ment|ity|tion|ion|ry|ief|"
    r"ror|ror|dom|ship|thy))\b"
)
_DONE_TO = frozenset(
    [
        "engaged",
        "involved",
        "recruited",
        "activated",
        "observed",
        "found",
        "included",
        "excluded",
        "scanned",
        "instructed",
        "asked",
        "presented",
        "required",
        "used",
        "tested",
        "trained",
        "recorded",
        "measured",
        "compared",
        "associated",
        "related",
        "modulated",
        "increased",
        "decreased",
        "reduced",
        "enhanced",
        "located",
        "correlated",
        "corrected",
        "reported",
        "shown",
        "expected",
        "predicted",
    ]
)
"""Participles of what was done to people and places, which no one feels."""

_STATE_OF = re.compile(
    r"\b(?:feelings?|sense|state|experience|sensation|moment|kind|form|act|process|processes|bout)\s+of\s+"
    r"(?:(?:a|an|the|some|their|strong|mild|deep)\s+)*(?P<what>[a-z][a-z-]+(?:\s+[a-z][a-z-]+)?)\b"
)
_STOP_WORDS = """
    the a an of in on at to for with by from and or but not as than that this these those their his her its our
    my some any no such each every all both more most less least very strong stronger weak mere covert
    spontaneous automatic ongoing increased decreased enhanced heightened greater active during after before
    while when where which who whose is are was were be been being has have had do does did may might could
    would should can must will greater higher lower same other another different underlying kind form form signs
    sign evidence engagement recruitment involvement presence use current present own implicit explicit general
    additional successful possible likely genuine true actual real further continued
"""
_STOP = frozenset(_STOP_WORDS.split())


_VERB = re.compile(
    r"(?:suggest|indicat|impl[iy]|reflect|show|reveal|signal|demonstrat|point|mean|meant|evok|engag|involv|"
    r"support|requir|"
    r"induc|activat|index|denot|prov[ei]|confirm|betray|convey|mirror|express|document|betoken|trigger|recruit)\w*$"
)


def unlisted_processes(text: str, words: list[Token]) -> list[ProcessMention]:
    """Return what looks like a process in a sentence.

    Parameters
    ----------
    text : str
        The sentence.
    words : list of Token
        Its words.

    Returns
    -------
    list of ProcessMention
        Marked as not listed; the term is the words themselves.

    Examples
    --------
    >>> from revinf.manuscript.phrases import tokens
    >>> sentence = "This suggests tactile imagery, or that viewers felt nostalgic."
    >>> [mention.term for mention in unlisted_processes(sentence, tokens(sentence))]
    ['tactile imagery', 'nostalgic']
    """
    found: list[ProcessMention] = []
    for position, word in enumerate(words):
        if word.text.lower() not in _HEADS:
            continue
        first = position
        while first > 0 and position - first < 2 and words[first].joined and _modifies(words[first - 1]):
            first -= 1
        if first == position and word.text.lower() in _LOOSE:
            continue
        start, end = words[first].start, word.end
        found.append(ProcessMention(term=text[start:end].lower(), start=start, end=end, listed=False))
    for pattern in (_FELT, _STATE_OF):
        for match in pattern.finditer(text):
            start, end = match.span("what")
            if match["what"] not in _DONE_TO and not any(
                mention.start < end and start < mention.end for mention in found
            ):
                found.append(ProcessMention(term=match["what"], start=start, end=end, listed=False))
    return sorted(found, key=lambda mention: mention.start)


def named_clause(text: str, start: int, end: int) -> ProcessMention | None:
    """Return what a clause says that people did, felt or were, where no process has a name in it.

    Parameters
    ----------
    text : str
        The sentence.
    start, end : int
        Of the clause.

    Returns
    -------
    ProcessMention or None
        None where the clause speaks of the study itself.

    Examples
    --------
    >>> named_clause("Buyers anticipated the loss, as shown by the insula.", 0, 27).term
    'anticipated the loss'
    """
    adverb = _ADVERB.match(text, start, end)
    start = adverb.end() if adverb else start
    found = _PEOPLE.match(text, start, end) or _BE.match(text, start, end)
    if found is None or _STUDY.search(text, start, end):
        return None
    words = found["what"].strip()
    return ProcessMention(term=words.lower(), start=found.start("what"), end=found.end("what"), listed=False)


def speaks_of_people(text: str, start: int) -> bool:
    """Tell whether a clause begins with people: "the guests were hungry"."""
    return _PEOPLE.match(text, start) is not None


def named_after(text: str, start: int) -> ProcessMention | None:
    """Return what stands right after a cue, where no process has a name there.

    "... suggests that readers found the menu repulsive": a reader sees a claim, whatever the process is called.

    Parameters
    ----------
    text : str
        The sentence.
    start : int
        End of the cue.

    Returns
    -------
    ProcessMention or None
        The words of what people did or felt, or the noun after the cue; None where it speaks of the study itself.

    Examples
    --------
    >>> named_after("It suggests that readers found the menu repulsive.", 11).term
    'found the menu repulsive'
    >>> named_after("It suggests an effect of sample size.", 11) is None
    True
    """
    opinion = _OPINION.match(text, start)
    start = opinion.end() if opinion else start
    for pattern in (_PEOPLE, _CLAUSE, _NOUN):
        found = pattern.match(text, start)
        if found is None:
            continue
        words = found["what"].strip()
        if _STUDY.search(words) or not re.search(r"[A-Za-z]{3}", words):
            return None
        return ProcessMention(term=words.lower(), start=found.start("what"), end=found.end("what"), listed=False)
    return None


_WHO = (
    r"(?:participants?|volunteers?|viewers?|listeners?|readers?|subjects?|observers?|players?|speakers?|"
    r"patients?|people|"
    r"persons?|children|adults|drivers?|sleepers?|musicians?|students?|learners?|smokers?|buyers?|"
    r"travell?ers?|walkers?|"
    r"\w+(?:eers|ists|goers)|consumers?|diners?|raters?|workers?|teenagers?|teachers?|pupils?|owners?|shoppers?|"
    r"they|individuals?|respondents?|audiences?|everyone|everybody|crowd|commuters?|investors?|gamblers?|"
    r"singers?|dancers?|climbers?|tasters?|parents?|mothers?|fathers?|"
    r"the brain|men|women|infants?|users?|customers?|visitors?|guests?|members?|athletes?|pilots?)"
)
_PEOPLE = re.compile(
    rf"\W*(?:that\s+|how\s+)?(?:even\s+|also\s+|these\s+|the\s+|our\s+|most\s+|many\s+|some\s+|all\s+)*"
    rf"(?:[\w'’-]+\s+){{0,2}}?{_WHO}\s+(?:must\s+have\s+|may\s+have\s+|had\s+|have\s+|were\s+|was\s+|did\s+|"
    rf"indeed\s+|"
    r"also\s+|already\s+|still\s+|actually\s+|spontaneously\s+|implicitly\s+|covertly\s+|automatically\s+)*"
    r"(?P<what>[\w'’-]+(?:\s+[\w'’-]+){0,5})",
    re.IGNORECASE,
)
_ADVERB = re.compile(r"\W*(?:\w+ly|thus|hence|therefore|perhaps|so|then|in short|in sum),?\s", re.IGNORECASE)
_BE = re.compile(
    r"\W*(?P<what>(?:[\w'’-]+\s+){1,3}?(?:was|were|is|are|can|could|had|seemed|appeared|felt|became|"
    r"(?:must|may|might|will) have)"
    r"(?:\s+[\w'’-]+){1,4})",
    re.IGNORECASE,
)
_CLAUSE = re.compile(
    r"(?:\W*(?:that|how)\s+|(?<=\bthat)\s+|(?<=\bhow)\s+)(?P<what>[\w'’-]+(?:\s+[\w'’-]+){1,7})", re.IGNORECASE
)
_OPINION = re.compile(
    r"\W*(?:(?:the|a|an|our|this)\s+)?(?:idea|notion|view|hypothesis|assumption|possibility|interpretation|account|"
    r"claim|proposal|conclusion|suspicion|impression|fact)\s+(?:that|of\s+how)(?=\s)",
    re.IGNORECASE,
)
"""Words that only bring in a clause: "in line with the idea that"."""
_NOUN = re.compile(
    r"\W*(?:of\s+|for\s+|to\s+|with\s+|at\s+)?(?:a\s+|an\s+|the\s+|some\s+|their\s+|such\s+|more\s+|"
    r"greater\s+|increased\s+|"
    r"heightened\s+|enhanced\s+|covert\s+|spontaneous\s+|automatic\s+|implicit\s+|continued\s+|sustained\s+)*"
    r"(?:(?:engagement|recruitment|presence|use|involvement|deployment|operation|occurrence|form|kind|act|"
    r"process|degree)"
    r"\s+(?:of|in)\s+(?:a\s+|an\s+|the\s+)?)?(?P<what>(?!that\b|it\b|this\b|these\b|there\b|how\b|"
    r"whether\b)[a-z][\w'’-]+"
    r"(?:\s+(?!and\b|or\b|but\b|in\b|during\b|when\b|while\b|by\b|from\b|was\b|were\b|is\b|are\b)[\w'’-]+){0,3})"
)
_STUDY = re.compile(
    r"\b(?:effects?|differences?|sample|size|sizes|power|noise|arte?facts?|motion correction|thresholds?|"
    r"variance|anatomy|"
    r"groups?|methods?|smoothing|scanner|contrasts?|results?|findings?|data|hypothes\w+|models?|"
    r"predictions? of|studies|study|"
    r"literature|regions?|areas?|cort\w+|gyr\w+|network|networks|activ\w+|respon\w+|signal\w*|cluster\w*|peak\w*|"
    r"connectivity|role|roles|function|functions|importance|interactions?|correlations?|replicat\w+|caution|"
    r"view|account|"
    r"notion|idea|possibility|interpretation|previous|earlier|prior work|statistic\w*|significan\w+|future|"
    r"further|limit\w*|from the brain|"
    r"scanners?|drop-?outs?|masks?|age|sex|gender|handedness|runs|baselines?|coils?|resolution|registration|"
    r"normali[sz]ation|susceptibility|breathing|heart rates?|head motion)\b",
    re.IGNORECASE,
)


def _modifies(word: Token) -> bool:
    """Tell whether a word may belong to the name of a process."""
    text = word.text.lower()
    return text not in _STOP and text.isalpha() and not text.endswith("ly") and _VERB.match(text) is None
