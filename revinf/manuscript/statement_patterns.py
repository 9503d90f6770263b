"""The patterns by which `revinf.manuscript.statements` reads a sentence; words only, no rule of when they count."""

from __future__ import annotations

import re

__all__ = [
    "ACTIVITY",
    "ANAPHOR",
    "CONTRASTED",
    "DURING",
    "JOINT",
    "LABEL_OF",
    "NEGATOR",
    "SELF",
    "STOP",
    "SUBJECT",
    "TASK_NOUN",
]

ACTIVITY = re.compile(
    r"\b(?:activ\w+|respon\w+|engage\w*|recruit\w*|BOLD|signals?|fir(?:ed|ing)|lit up|light\w* up|peaks?|clusters?|"
    r"de-?activ\w+|hyperactiv\w+|involvement|increases?|modulat\w+|coupling|connectivity|suppress\w*|"
    r"came on(?:line)?|on-?line|flared|spiked?|rose|surged?)\b",
    re.IGNORECASE,
)
ANAPHOR = re.compile(
    r"\b(?:this|these|such|that|the same|its|their|both|the latter|the former|each of these|those|"
    r"the)\s+(?:[\w'’-]+\s+){0,4}?"
    r"(?:activ\w+|respon\w+|engagement|recruitment|findings?|results?|patterns?|effects?|increases?|clusters?|peaks?|"
    r"signals?|regions?|areas?|involvement|observations?|profiles?|combination|conjunction|foc(?:us|i)|"
    r"hot ?spots?|sites?|"
    r"structures?|networks?|coupling|deactivations?|data|changes?|differences?|modulations?|bursts?|surges?|"
    r"recruitments?|overlap|contrasts?|outcomes?|lateralization|lateralisation|asymmetry|sensitivity|behaviou?r|"
    r"decrease|decreases|suppression|elevation|rise)\b"
    r"|^\W*(?:(?:taken together|together|in turn|again|here|clearly|crucially|importantly|overall|moreover|"
    r"thus|hence|"
    r"therefore|accordingly|in our (?:view|opinion|eyes|reading|judge?ment|minds?)|to us|to our minds?|in short|"
    r"in sum|in fact|indeed|so|then|also|finally|notably|interestingly|consequently|as a result|arguably|"
    r"apparently|evidently|obviously|similarly|likewise|"
    r"in addition|furthermore|if anything|most likely|perhaps|possibly|presumably|tentatively|we|I|authors?|"
    r"on this basis|"
    r"from this|from these|for this reason)\b[\s,]*)*"
    r"(?:this|these|that|which|it|both|all of this|they|what this|from this|from these|on this basis|as such)\b"
    r"|\b(?:this|these|that|it|them|which)\b(?=[\s,]+(?:as|to be|suggest|indicat|impl|reflect|mean|point|show|"
    r"reveal|we|may|"
    r"might|could|would|is|was|are|were|can|seems?|appears?|must))"
    r"|\b(?:interpret\w*|take|took|read|view|see|regard|attribut\w*|ascrib\w*|understand)\s+(?:this|these|it|"
    r"them|that|both)\b",
    re.IGNORECASE,
)
STOP = re.compile(
    r";|\b(?:rather than|instead of|as opposed to|and not|but not|not of|not because|but|whereas|while|"
    r"although|though|"
    r"even though|despite|in contrast to|unlike|without|except|until|unless|not)\b",
    re.IGNORECASE,
)
LABEL_OF = re.compile(
    r"\b(?:engag\w*|recruit\w*|involv\w*|activat\w*|use|uses|onset|presence)(?:\s+(?:of|in|the|a|an|some))*\s*$", re.I
)
TASK_NOUN = re.compile(
    r"^[\s-]*(?:task|tasks|condition|conditions|trial|trials|blocks?|scenes?|paradigms?|stimul\w+|runs?|"
    r"sessions?|phase|"
    r"periods?|localiser|localizer|contrasts?|networks?|scores?|questionnaires?|ratings?|instructions?|group|"
    r"clinic|list|"
    r"manipulation|materials?|experiments?|studies|literature|research|volunteers|participants|patients|"
    r"individuals|people|"
    r"subjects|controls|persons?|adults|children)\b",
    re.IGNORECASE,
)
DURING = re.compile(
    r"\b(?:during|while|whilst|when|throughout|after|before|in the|under)\s+(?:[\w'’-]+\s+){0,3}$", re.IGNORECASE
)
SUBJECT = re.compile(
    r"^[^.;]{0,60}?\b(?:engag\w*|recruit\w*|involv\w*|requir\w*|rel(?:y|ies|ied|ying)|draws?|drew|drawn|"
    r"evok\w*|elicit\w*|"
    r"induc\w*|trigger\w*|tax\w*|call\w* (?:up)?on|depend\w*|provok\w*|arous\w*|brought about|led to|made)\b",
    re.IGNORECASE,
)
NEGATOR = re.compile(r"(?:\b(?:not|cannot|never|hardly|scarcely|neither)|n't)(?:\s+[\w'’-]+){0,3}\s*$", re.IGNORECASE)
CONTRASTED = re.compile(
    r"\b(?:unlike|in contrast to|as opposed to|rather than|but not|not in|without|except|compared (?:with|to)|"
    r"relative to)\s+"
    r"(?:[\w'’-]+\s+){0,5}$",
    re.IGNORECASE,
)
JOINT = re.compile(
    r"[\s,]*(?:and|or|,|/|with|plus|as well as|together with|along with|but also|to)?[\s,]*"
    r"(?:(?:the|in|of|that|both|also|its|activ\w+|respon\w+|left|right|bilateral|adjacent|neighbou?ring|"
    r"nearby|same|dorsal|"
    r"ventral|anterior|posterior|medial|lateral)[\s,]+)*",
    re.IGNORECASE,
)
SELF = re.compile(
    r"\b(?:we|I|here|(?:our|the present|the current) (?:own )?(?:results?|findings?|data|views?|"
    r"interpretations?|observations?|study))\b",
    re.IGNORECASE,
)
