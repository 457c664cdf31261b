"""What a stereochemistry field claims: the kind of stereo, and how many centres.

Only plain claims are read. A negation or a hedge makes the whole text unread: "not a racemate"
must never count as "racemate".
"""

from __future__ import annotations

import re

from dossiercheck.language.claims import only_statement
from dossiercheck.language.predicates import NUMBERS, Statement

__all__ = ["Statement", "read_statement"]

_WORDS = tuple(word for word in NUMBERS if word not in ("a", "a single"))
_COUNT = re.compile(
    r"\b(\d+|" + "|".join(_WORDS) + r")\s+(?:defined\s+|specified\s+|tetrahedral\s+)?"
    r"(?:stereo(?:genic\s+|chemical\s+)?|chiral(?:ity)?\s+|asymmetric\s+)"
    r"(?:cent(?:er|re)s?|carbons?(?:\s+atoms?)?)\b",
    re.IGNORECASE,
)
# A count field with its heading before it, as `records` and `tables` put the two together.
_COUNTED = re.compile(
    r"(?:number\s+of\s+|no\.?\s+of\s+)?(?:stereo(?:genic\s+|chemical\s+)?|chiral\s+|asymmetric\s+)"
    r"(?:cent(?:er|re)s?|carbon\s+atoms?)\s*[:=]?\s*(\d+|" + "|".join(_WORDS) + r")",
    re.IGNORECASE,
)
# Codes that structured exports use whole; inside a sentence the words mean other things.
_CODES = {
    "mixed": "mixture",
    "epimeric": "mixture",
    "+": "active",
    "-": "active",
    "−": "active",
    "(+)": "active",
    "(-)": "active",
    "(−)": "active",
    "+/-": "racemic",
    "(+/-)": "racemic",
    "±": "racemic",
    "dextrorotatory": "active",
    "levorotatory": "active",
    "laevorotatory": "active",
}
_DOUBT = re.compile(
    r"\b(?:not|non|without|neither|nor|cannot|may|might|possibly|probably|presumed|unless"
    r"|unknown|undetermined|except|if)\b|n['’]t\b",
    re.IGNORECASE,
)
_KINDS = (
    ("racemic", re.compile(r"\brac(?:emic|emate)\b|\(±\)|\brac-", re.IGNORECASE)),
    ("relative", re.compile(r"\brelative\b", re.IGNORECASE)),
    (
        "absolute",
        re.compile(
            r"\bsingle\s+(?:enantiomer|stereoisomer|isomer)\b|\babsolute\b|\bhomochiral\b"
            r"|\benantio(?:pure|merically\s+pure)\b",
            re.IGNORECASE,
        ),
    ),
    ("achiral", re.compile(r"\bachiral\b|\bmeso\b", re.IGNORECASE)),
)


def read_statement(text: str) -> Statement | None:
    """The claim of a stereochemistry field, None where it is not understood for certain."""
    counted = _COUNTED.fullmatch(text.strip())
    if counted:
        return Statement(centres=_number(counted[1]))
    code = _CODES.get(re.sub(r"\s", "", text).casefold())
    if code:
        return Statement(code)
    said = only_statement(text)
    if said is not None:
        return said
    counts = {_number(found) for found in _COUNT.findall(text)}
    rest = _COUNT.sub(" ", text)
    if _DOUBT.search(rest) or len(counts) > 1:
        return None
    kinds = [kind for kind, pattern in _KINDS if pattern.search(rest)]
    if len(kinds) > 1 or not (kinds or counts):
        return None
    return Statement(kinds[0] if kinds else "", counts.pop() if counts else None)


def _number(word: str) -> int:
    return int(word) if word.isdigit() else NUMBERS[word.lower()]
