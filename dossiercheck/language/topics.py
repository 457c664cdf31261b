"""Matters that a section of a dossier speaks of, by plain words: is a thing said anywhere?

What exactly is said is for the statements; here it only counts that a matter is raised. A
sentence by which it is open ("was not determined") raises nothing.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.model import Place

_PATTERNS = {
    "absolute configuration": r"\babsolute\s+(?:configuration|stereochemistry|structure)\b",
    "configuration evidence": (
        r"\bX-?ray\b|\bcrystallograph|\bsingle[ -]crystal|\banomalous (?:dispersion|scattering)"
        r"|\bFlack\b|\b(?:vibrational|electronic)?\s*circular dichroism\b|\bVCD\b|\bECD\b"
        r"|\bMosher|\bchemical correlation|\bcorrelat\w+ (?:to|with)\b|\bchiral pool\b"
        r"|\bknown (?:absolute )?configuration\b|\bRaman optical activity\b"
    ),
    "rotation": (
        r"\b(?:specific|optical|molar)\s+(?:optical\s+)?rotation\b|\[\s*[αa]\s*\]|\bpolarimet"
        r"|\b(?:dextro|la?evo)rotatory\b|\brotatory power\b"
    ),
    "enantiomer": (
        r"\benantiomer(?:s|ic)?\b|\bantipodes?\b|\bchiral (?:purity|impurit)|\boptical (?:purity"
        r"|isomer)|\bmirror[ -]image\b|\benantio(?:purity|meric)|\b(?:undesired|opposite|other)"
        r" (?:\([RS]\)-)?isomer\b|\([RS]\)-(?:isomer|enantiomer)"
    ),
    "stereoisomers": (
        r"\bdiastereo(?:iso)?mer|\bepimer|\bstereoisomer|\bstereochemical(?:ly)? (?:purity|impur)"
    ),
    "chiral identity": (
        r"\b(?:specific|optical)\s+(?:optical\s+)?rotation\b|\[\s*[αa]\s*\]|\bchiral\b"
        r"|\benantio(?:mer|select|specific|pur)|\bcircular dichroism\b|\bpolarimet"
    ),
}
_TOPICS = {topic: re.compile(pattern, re.IGNORECASE) for topic, pattern in _PATTERNS.items()}
_ANY = re.compile("|".join(_PATTERNS.values()), re.IGNORECASE)
_OPEN = re.compile(
    r"\b(?:not|never)\s+(?:yet\s+|been\s+){0,2}(?:determined|established|assigned|known|available"
    r"|measured|investigated|tested|given|stated|performed|addressed|controlled|proven|studied)\b"
    r"|\b(?:unknown|undetermined|unassigned)\b|\bto be (?:determined|established|confirmed)\b",
    re.IGNORECASE,
)
_SENTENCE = re.compile(r"(?<=[.;!?])\s+(?=\S)|\n")

TOPICS = tuple(_PATTERNS)


@dataclass(frozen=True, slots=True)
class Mention:
    """A place that raises a matter: `topic` is one of TOPICS, `section` as in `ctd`."""

    topic: str
    section: str
    place: Place
    text: str


def mentions(text: str, place: Place, section: str) -> Iterator[Mention]:
    """Every matter that a text raises, once each."""
    if not _ANY.search(text):
        return
    raised: set[str] = set()
    for sentence in _SENTENCE.split(text):
        if _OPEN.search(sentence):
            continue
        for topic, pattern in _TOPICS.items():
            if topic not in raised and pattern.search(sentence):
                raised.add(topic)
                yield Mention(topic, section, place, " ".join(sentence.split())[:300])
