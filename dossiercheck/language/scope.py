"""How far a sentence goes, and what takes its certainty away: hedges, negations, conditions.

A claim is read only where nothing of this kind stands in it: "may be a racemate", "is not a
racemate" and "if it is a racemate" must never count as "is a racemate". Names are masked first, for
a name is full of letters and words that are no claims ("cis-", "(2S)-", "rac-").
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.language.wrapped import stretched

NAME = "\ue000"  # stands for each character of a systematic name, so that spans still count

_ABBREVIATED = re.compile(
    r"(?:\b(?:e\.g|i\.e|ca|cf|approx|resp|vs|No|Nos|Fig|Figs|Ref|Refs|Sect|Eq|al|etc|Imp|Int|Dr|abs"
    r"|config|spec|conc|wt|vol|max|min|temp))\.$"
)
_END = re.compile(r"[.!?](?:[\"”’)\]]*)(?=\s|$)|;(?=\s)")

HEDGE = re.compile(
    r"\b(?:may|might|could|can|cannot|would|should|must|will|shall|possibl[ey]|probabl[ey]"
    r"|presum\w+|assum\w+|likely|unlikely|believed|thought|expected|considered|suppose\w*"
    r"|suspect\w*|appears?|appeared|seems?|seemed|suggest\w*|indicat\w+|tentative\w*|putative\w*"
    r"|apparent\w*|potential\w*|hypothetical\w*|proposed|predicted|typically|usually|generally"
    r"|normally|mainly|mostly|predominant\w*|largely|essentially|nearly|almost|virtually"
    r"|partly|partially|sometimes|occasionally|often|initially|formerly|previously|originally"
    r"|so-called|nominal\w*|theoretical\w*|claimed|reported|said|alleged\w*|perhaps|maybe"
    r"|about|around|roughly|approximately|either|whether|or|unknown|undetermined|unclear"
    r"|uncertain|open|up to|at least|at most|more than|less than|fewer than)\b",
    re.IGNORECASE,
)
NEGATION = re.compile(
    r"\b(?:no|not|non|none|never|neither|nor|without|nobody|nothing|hardly|except|excluding"
    r"|instead of|rather than|other than|exclud\w+|ruled out|den(?:y|ied|ies)|lack(?:s|ing)?"
    r"|free (?:of|from)"
    r"|fails?|failed)\b|n['’]t\b",
    re.IGNORECASE,
)
# What only would be so, or is asked, is no claim of what is.
CONDITION = re.compile(
    r"\b(?:if|unless|when|whenever|whether|where|wherever|provided|in case|as long as|until|once"
    r"|would|should it|were it)\b|\?",
    re.IGNORECASE,
)


def sentences(text: str) -> Iterator[tuple[int, int]]:
    """Start and end of each sentence, the closing mark included; a semicolon ends one too."""
    start = 0
    for mark in _END.finditer(text):
        if mark[0] != ";" and (
            _ABBREVIATED.search(text[start : mark.start() + 1])
            or text[mark.end() : mark.end() + 2].strip()[:1].islower()
        ):
            continue
        yield from _stripped(text, start, mark.end())
        start = mark.end()
    yield from _stripped(text, start, len(text))


def _stripped(text: str, start: int, end: int) -> Iterator[tuple[int, int]]:
    piece = text[start:end]
    if piece.strip():
        yield start + len(piece) - len(piece.lstrip()), start + len(piece.rstrip())


def masked(text: str) -> str:
    """The text with the characters of systematic names replaced by NAME, line ends and the
    spaces of typesetting by common spaces; its length stays."""
    shown = list(re.sub(r"[\s\u2009\u202f]", " ", text))
    for found in stretched(text):
        for at in range(found.candidate.start, found.candidate.end):
            shown[at] = NAME
    return "".join(shown)


def is_certain(clause: str) -> bool:
    """Whether neither a hedge, nor a negation, nor a condition stands in a masked clause."""
    return not (HEDGE.search(clause) or NEGATION.search(clause) or CONDITION.search(clause))
