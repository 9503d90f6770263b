"""The toy world behind the invented literature: which place answers to which process, and the claims.

EVERYTHING HERE IS INVENTED. The terms are ordinary words, the coordinates are MNI152 mm in places
where a brain has grey matter, but no rate and no link between the two was taken from any study.
Holds no random draw: make_demo.py does the drawing.
"""

from __future__ import annotations

Place = tuple[int, int, int]
# One home: how often a study of the process reports it, and the places that appear together.
Home = tuple[float, tuple[Place, ...]]

INSULA: Place = (36, 22, -2)
CINGULATE: Place = (2, 18, 46)
FEAR_PLACE: Place = (-22, -4, -18)
NAVIGATION_PLACE: Place = (26, -38, -12)
# A rare term's two lucky hits are drawn at a place that nobody owns, then moved to the home of reading.
FLUKE_DRAWN_AT: Place = (-30, 50, 8)
FLUKE_PLACE: Place = (-44, -56, -14)
# Two places that answer together in every process that uses them: their evidence is not independent.
PAIR: tuple[Place, Place] = ((54, -54, 22), (4, 54, 18))

# Broad places: every study reports them this often, whatever it was about ...
BROAD: dict[Place, float] = {INSULA: 0.24, CINGULATE: 0.26}
# ... but for these (process, place), so that one popular claim has the evidence against it.
BROAD_EXCEPTIONS: dict[tuple[str, Place], float] = {("autobiographical memory", CINGULATE): 0.02}
# Background rate at which any study reports the pair of places as a decrease.
PAIR_DECREASE_RATE = 0.05

# process: (how popular it is among the invented papers, its homes)
PROCESSES: dict[str, tuple[float, tuple[Home, ...]]] = {
    "autobiographical memory": (3.2, ((0.4, ((-4, -54, 24),)), (0.25, PAIR))),
    "episodic retrieval": (3.0, ((0.4, ((-44, -60, 38),)), (0.3, ((-24, -22, -16),)))),
    "memory encoding": (2.0, ((0.45, ((24, -18, -18),)), (0.25, ((-46, 12, 28),)))),
    "recognition memory": (1.6, ((0.4, ((-38, -58, 46),)),)),
    "working memory": (4.0, ((0.5, ((-44, 32, 22), (-38, -48, 44))), (0.3, ((42, 36, 26),)))),
    "semantic cognition": (3.0, ((0.5, ((-50, 24, 8),)), (0.4, ((-56, -42, -2),)))),
    "language comprehension": (2.4, ((0.5, ((-56, -38, 2),)), (0.2, ((-50, 24, 8),)))),
    "speech production": (1.6, ((0.5, ((-50, -8, 36),)), (0.3, ((50, -6, 34),)))),
    "reading": (2.0, ((0.55, ((-44, -56, -14),)), (0.2, ((-50, 24, 8),)))),
    "phonology": (1.2, ((0.4, ((-54, 10, 14),)),)),
    "theory of mind": (3.4, ((0.55, PAIR), (0.25, ((-54, -56, 24),)))),
    "empathy": (1.6, ((0.3, ((-36, 18, 0),)),)),
    "action observation": (1.6, ((0.45, ((-50, -66, 4),)), (0.3, ((-54, 8, 30),)))),
    "moral judgement": (1.4, ((0.35, PAIR),)),
    "fear": (3.2, ((0.62, (FEAR_PLACE,)), (0.3, ((22, -2, -18),)))),
    "threat detection": (0.25, ((0.1, (FEAR_PLACE,)), (0.2, ((22, -2, -18),)))),
    "disgust": (3.4, ((0.3, ((-28, 2, -2),)),)),
    "sadness": (1.2, ((0.4, ((-4, 26, -8),)),)),
    "emotion regulation": (2.0, ((0.4, ((-46, 26, -10),)), (0.3, ((-6, 12, 62),)))),
    "reward anticipation": (2.2, ((0.55, ((-12, 10, -6), (12, 10, -6))),)),
    "reward receipt": (1.6, ((0.4, ((2, 48, -12),)), (0.3, ((12, 10, -6),)))),
    "risk taking": (1.4, ((0.25, ((12, 10, -6),)),)),
    "delay discounting": (1.2, ((0.3, ((2, 48, -12),)), (0.2, ((-4, -34, 34),)))),
    "response inhibition": (2.8, ((0.4, ((48, 18, 24),)), (0.3, ((56, -44, 34),)))),
    "conflict monitoring": (2.0, ((0.35, ((-42, 8, 32),)),)),
    "task switching": (1.6, ((0.4, ((-30, -62, 46),)), (0.2, ((-42, 8, 32),)))),
    "error monitoring": (1.4, ((0.3, ((-32, 20, 4),)),)),
    "spatial attention": (2.4, ((0.5, ((28, -60, 52), (-26, -60, 52))), (0.3, ((28, -4, 54),)))),
    "sustained attention": (1.4, ((0.35, ((44, 10, 34),)),)),
    "mind wandering": (1.3, ((0.4, PAIR), (0.2, ((-4, -54, 24),)))),
    "face perception": (2.6, ((0.65, ((40, -52, -20),)), (0.3, ((46, -76, -6),)))),
    "scene perception": (1.4, ((0.35, ((14, -54, 10),)), (0.25, ((32, -84, 16),)))),
    "motion perception": (1.6, ((0.6, ((46, -66, 2), (-44, -70, 2))),)),
    "object recognition": (1.6, ((0.5, ((-42, -74, -10),)),)),
    "auditory perception": (2.2, ((0.6, ((-54, -22, 8), (58, -20, 6))),)),
    "touch": (1.4, ((0.5, ((-54, -24, 44),)), (0.35, ((-52, -24, 18),)))),
    "taste": (1.0, ((0.45, ((-38, -6, 10),)), (0.3, ((26, 32, -14),)))),
    "smell": (1.0, ((0.45, ((-22, 4, -22),)), (0.3, ((26, 32, -14),)))),
    "pain": (2.4, ((0.45, ((38, -18, 16),)), (0.35, ((10, -14, 8),)))),
    "finger tapping": (2.0, ((0.65, ((-38, -22, 56),)), (0.45, ((18, -52, -22),)))),
    "motor imagery": (1.4, ((0.4, ((-28, -6, 58),)), (0.25, ((-40, -38, 46),)))),
    "motor learning": (1.4, ((0.35, ((-26, -62, -24),)), (0.3, ((-26, -2, 6),)))),
    "eye movements": (1.4, ((0.5, ((-26, -4, 54), (28, -4, 54))),)),
    "grasping": (1.0, ((0.45, ((-40, -38, 46),)),)),
    "navigation": (2.0, ((0.62, (NAVIGATION_PLACE, (-26, -40, -10))), (0.3, ((14, -54, 10),)))),
    "mental rotation": (1.2, ((0.45, ((28, -60, 52),)),)),
    "calculation": (1.4, ((0.45, ((-32, -58, 44),)),)),
    "self-referential processing": (1.8, ((0.45, ((-4, 50, 2),)), (0.2, PAIR))),
    "interoception": (1.2, ((0.4, ((40, -4, 4),)),)),
    "time perception": (1.2, ((0.4, ((4, 2, 62),)),)),
    "music perception": (1.2, ((0.45, ((52, -8, 0),)),)),
    "reinforcement learning": (1.4, ((0.4, ((-14, 8, 10),)),)),
}
# A term nearly always given together with another: kin, never a rival.
KIN: tuple[str, str] = ("fear", "threat detection")
KIN_RATE = 0.6
# Terms on a handful of studies, each of another paper: (term, studies, studies that hit, place).
RARE_TERMS: tuple[tuple[str, int, int, Place], ...] = (
    ("humour", 3, 2, FLUKE_DRAWN_AT),
    ("trust", 4, 1, (10, 8, 8)),
)
# Papers on this process list many peaks, whatever they find.
BUSY_PROCESS = "pain"
SELECTIVE_PLACES: tuple[Place, ...] = (FEAR_PLACE, NAVIGATION_PLACE, (-26, -40, -10))
# Places no process owns: peaks fall there now and then.
FILLERS: tuple[Place, ...] = (
    (-6, -86, 2), (8, -84, 4), (-30, -88, -4), (34, -86, 4), (6, -72, 36), (-20, -54, -24),
    (32, -58, -28), (4, -70, -28), (24, -68, 38), (44, -40, 46), (60, -30, 24), (52, 10, -16),
    (-48, 12, -26), (-58, -12, -14), (58, -34, -6), (30, 50, 4), FLUKE_DRAWN_AT, (-24, 32, -12),
    (-20, 24, 50), (22, 28, 48), (16, 6, 16), (-10, -18, 8), (28, 4, 2), (6, -28, -8),
    (-26, -30, 30), (24, -38, 30), (10, 8, 8), (50, -6, 44), (-58, -40, 32), (52, -58, -10),
)  # fmt: skip

# label: share of the studies that carry it whatever they are about. None is a mental process.
LABELS: dict[str, float] = {
    "healthy adults": 0.12,
    "older adults": 0.04,
    "children": 0.03,
    "visual presentation": 0.12,
    "auditory presentation": 0.05,
    "verbal material": 0.06,
    "nonverbal material": 0.05,
    "pictures": 0.05,
    "film clips": 0.03,
    "words": 0.04,
    "faces": 0.02,
    "emotional faces": 0.02,
    "scenes": 0.02,
    "block design": 0.06,
    "event-related design": 0.06,
    "passive viewing": 0.03,
    "reaction time": 0.04,
    "individual differences": 0.03,
    "task-induced deactivation": 0.02,
}
# Labels that follow from what a study did: (process, label, how often).
LABELS_OF_PROCESS: tuple[tuple[str, str, float], ...] = (
    ("face perception", "faces", 0.6),
    ("fear", "emotional faces", 0.35),
    ("scene perception", "scenes", 0.5),
    ("language comprehension", "verbal material", 0.4),
    ("auditory perception", "auditory presentation", 0.5),
)

CLAIM_COLUMNS = (
    *("claim", "term", "x", "y", "z", "space", "radius_mm", "prior"),
    *("context", "rivals", "region", "quote", "location"),
)
# claim, term, place, space, context, rivals, region. All: 10 mm, even odds. The quotes are in
# invented_manuscript.py under the same ids. A place is written in the space the row names.
ClaimRow = tuple[str, str, Place, str, str, str, str]
CLAIMS: tuple[ClaimRow, ...] = (
    ("c01", "fear", FEAR_PLACE, "MNI", "", "disgust;reward anticipation", "left amygdala"),
    ("c02", "navigation", NAVIGATION_PLACE, "MNI", "episodic retrieval;memory encoding;navigation",
     "scene perception", "right parahippocampal gyrus"),
    ("c03", "disgust", INSULA, "MNI", "", "pain;taste", "right anterior insula"),
    ("c04", "autobiographical memory", CINGULATE, "MNI", "", "", "dorsal midcingulate cortex"),
    ("c05", "humour", FLUKE_PLACE, "MNI", "", "", "left fusiform gyrus"),
    ("c06", "trust", (10, 8, 8), "MNI", "", "", "right caudate"),
    ("c07", "motor learning", (-26, -30, 30), "MNI", "", "", "left parietal white matter"),
    ("c08", "spatial attention", (60, -60, 62), "MNI", "", "", "right parietal cortex"),
    ("c09", "faces", (40, -52, -20), "MNI", "", "", "right fusiform gyrus"),
    ("c10", "theory of mind", PAIR[0], "MNI", "", "", "right temporo-parietal junction"),
    ("c10", "theory of mind", PAIR[1], "MNI", "", "", "medial prefrontal cortex"),
    ("c11", "finger tapping", (-37, -24, 51), "TAL", "", "", "left hand area"),
)  # fmt: skip
