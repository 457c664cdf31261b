"""Systematic names with stereodescriptors in running text.

A candidate starts from a bracketed descriptor, `(2R,3S)`, `(E)`, `(2~{R})`, or from "rac-",
"rel-" or "(±)-" before a name without one, and grows over the characters that names are made of,
brackets balanced. Over a space it grows only where names have one: esters, acids, salts,
hydrates. Whether it *is* a name the name parser says; the shorter alternatives are there for it
to try.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from dossiercheck.language.inverted import begins
from dossiercheck.language.joints import GROUP_END, leftwards, of_acid, rightwards
from dossiercheck.language.stretch import (
    GROUP,
    HYPHENS,
    LONGEST,
    PRIMES,
    SPACE,
    is_chemical,
    token_around,
)
from dossiercheck.model import Place, Unread

__all__ = ["HYPHENS", "PRIMES", "Candidate", "candidates", "is_substituent", "substituent"]

_RINGS = re.compile(r"(?:bi|bis|ter|quater)(?:phenyl|naphthyl|pyridyl|thienyl|[a-z]{3,}yl)$", re.I)
_PREFIX_END = re.compile(r"(?:amino|oxy|imino|thio|sulfanyl)[\])}]+$", re.IGNORECASE)

# Before a name without descriptors these say what its configuration is.
_ANCHOR = re.compile(
    rf"{GROUP.pattern}|(?<![{HYPHENS}\w])(?:rac|rel)(?=[{HYPHENS}][\w(\[{{])"
    rf"|\((?:±|\+/[{HYPHENS}])\)(?=[{HYPHENS}]\w)"
)


@dataclass(frozen=True, slots=True)
class Candidate:
    """A stretch of text that may be a name; `alternatives` are shorter ones, longest first."""

    start: int
    end: int
    alternatives: tuple[tuple[int, int], ...] = ()


def candidates(text: str) -> list[Candidate]:
    """The candidates in a text, left to right, none overlapping another."""
    found: list[Candidate] = []
    for group in _ANCHOR.finditer(text):
        if found and group.start() < found[-1].end:
            continue
        floor = found[-1].end if found else 0
        inverted = begins(text, group.start(), group.end(), floor)
        if inverted is not None:
            found.append(Candidate(inverted, group.end() + 1))
            continue
        candidate = _grow(text, group.start(), group.end(), floor)
        if candidate:
            if found and _is_half(text, found[-1], candidate):
                # An ester whose halves both have descriptors and whose joint is not understood:
                # either half alone would be another compound.
                candidate = Candidate(found.pop().start, candidate.end)
            found.append(candidate)
    return found


def is_substituent(name: str) -> bool:
    """True for the name of a group, such as "(1R)-1-phenylethyl": no compound by itself.

    Two like rings joined, as in "1,1'-binaphthyl", end in the same way and are compounds.
    """
    return of_acid(name) or bool(GROUP_END.search(name) and not _RINGS.search(name))


def substituent(place: Place, text: str) -> Unread:
    """The name of a group is no evidence of a substance."""
    detail = "The text names a group and not a compound."
    return Unread(place, "substituent", detail, text)


def _is_half(text: str, first: Candidate, second: Candidate) -> bool:
    gap = text[first.end : second.start]
    name = text[first.start : first.end]
    return gap in tuple(SPACE) and (is_substituent(name) or _PREFIX_END.search(name) is not None)


def _grow(text: str, start: int, end: int, floor: int) -> Candidate | None:
    token = token_around(text, start, end, floor)
    if token is None:
        return None
    left, right = token
    if right - left > LONGEST:
        return Candidate(left, right)
    acid = re.match(r"(?i)[ \u00a0]acid\b", text[right : right + 6]) is not None
    if not is_chemical(text[left:right], text[start:end], acid):
        return None
    rights = rightwards(text, left, right)
    lefts = leftwards(text, left, rights, floor)
    spans = [(left_end, right_end) for left_end in lefts for right_end in rights]
    spans = sorted(set(spans), key=lambda span: (span[0] - span[1], span[0]))
    best, *others = spans
    return Candidate(*best, tuple(others))
