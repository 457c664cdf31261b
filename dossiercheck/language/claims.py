"""Claims of stereochemistry in running text: whom a sentence speaks of, and what it says.

A claim has a frame ("DX-101 is …", "the configuration at C-4 of DX-101 is …") whose every word is
understood. A sentence that plainly claims something and is not understood is reported as such;
one that only speaks of chiral columns, limits or processes is no claim.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace

from dossiercheck.language.frames import Framed, framed
from dossiercheck.language.labels import LABEL
from dossiercheck.language.predicates import (
    INVENTED,
    LOWER,
    PART,
    SHORT_CODE,
    Statement,
    is_name_of_one,
    predicate,
)
from dossiercheck.language.rotation import read_rotation, speaks_of_rotation
from dossiercheck.language.scope import CONDITION, is_certain, masked, sentences
from dossiercheck.language.wording import CLAIMED, TRIGGER

ROTATION = "rotation"
STEREO = "stereo"

_LABELS = re.compile(rf"{LABEL.pattern}|{SHORT_CODE}|\b{PART}\b|(?<![\w-]){INVENTED}(?![\w-])")
_RELATIVE = re.compile(
    r"\b(?:enantiomer|antipode|diastereo(?:iso)?mer|epimer|isomer|racemate|salt|precursor|solution"
    r"|mixture)s?\s+(?:of|to|in)\s+(?:the\s+)?$",
    re.IGNORECASE,
)
_JOINED = re.compile(
    r", and |, while |, whereas |, but | and | while | whereas |, (?=[A-Z]|the double bond)"
    r"|: (?=C-?\d)"
)
_OF_SMALL = re.compile(rf"\brotation of ({LOWER})(?![\w-])")
_MEASURED = re.compile(
    r"°(?!\s?C)|\bdeg(?:rees?)?\b|\]\s?\S{0,8}\s*(?:=|:|of|is)?\s*[+−–-]?\s?\d", re.IGNORECASE
)


@dataclass(frozen=True, slots=True)
class Claim:
    """The characters from `start` to `end` of a text claim something of the substance `label`.

    `label` is "" where the text only points to it ("it", "the compound") or names none; `other`
    is what "its" stands for. `why` says why nothing is made of the claim, "" where it is
    understood.
    """

    start: int
    end: int
    form: str
    label: str = ""
    other: str = ""
    why: str = ""


def claims(text: str, under: str = "", before: str = "") -> Iterator[Claim]:
    """The claims of one line or cell.

    `under` is the substance that the place is about, `before` the one that the text before it
    spoke of last; each "" where there is none or no single one.
    """
    if not TRIGGER.search(text):
        return
    last: str | None = None  # None until the text has named a substance
    shown = masked(text)
    for start, end in sentences(shown):
        for first, stop in _clauses(shown, start, end):
            clause = shown[first:stop]
            spoken = ""
            for one in _of_clause(clause):
                pointed = before if last is None else last
                label = one.label or (under if last is None else last)
                other = pointed if one.other == "its" else ""
                why = one.why
                if not why and one.other == "its" and (not other or other == label):
                    why = "the sentence does not say of what substance it is a relative"
                if not why and not label:
                    why = "the text does not say of which substance it speaks"
                yield Claim(first + one.start, first + one.end, one.form, label, other, why)
                spoken = one.label
            named = _labels(clause) or ([spoken] if spoken else [])
            if named:
                last = named[0] if len(named) == 1 else ""


def only_statement(text: str) -> Statement | None:
    """The one statement that a text makes, as a sentence or as a field's value; None where it
    makes none or several, or is not understood."""
    shown = masked(text.strip())
    whole = predicate(shown)
    if whole is not None:
        return whole
    found = framed(shown)
    return found.statement if found and found.statement else None


def cell_claim(text: str) -> Claim | None:
    """What a cell beside a label claims of it without naming it ("enantiomer of DX-101")."""
    shown = masked(text)
    if not TRIGGER.search(text):
        return None
    said = predicate(shown.strip())
    if said is not None and said.kind != "chiral":
        return Claim(0, len(text), STEREO)
    if CLAIMED.match(f"is {shown.strip()}") and not CONDITION.search(shown):
        return Claim(0, len(text), STEREO, why=NOT_UNDERSTOOD)
    return None


def only_label(text: str) -> str:
    """The one label in a text, "" where there is none or more than one."""
    found = _labels(masked(text))
    return found[0] if len(found) == 1 else ""


NOT_UNDERSTOOD = "the statement is not one the program understands for certain"


def _clauses(shown: str, start: int, end: int) -> list[tuple[int, int]]:
    """A sentence cut where another subject with a frame of its own begins."""
    cuts = [start]
    for joint in _JOINED.finditer(shown, start, end):
        rest = shown[joint.end() : end]
        if (joint[0] == ": " or framed(shown[cuts[-1] : joint.start()])) and _opens(rest):
            cuts.append(joint.end())
    ends = [*(_before(shown, cut) for cut in cuts[1:]), end]
    return list(zip(cuts, ends, strict=True))


def _opens(rest: str) -> bool:
    """Whether a frame begins here, as far as the next place where another may begin."""
    joint = _JOINED.search(rest)
    return framed(rest) is not None or (
        joint is not None and framed(rest[: joint.start()]) is not None
    )


def _before(shown: str, cut: int) -> int:
    words = re.search(r",?\s+(?:and|while|whereas|but)\s$|[,:]\s$", shown[:cut])
    return words.start() if words else cut


def _of_clause(clause: str) -> Iterator[Framed]:
    if speaks_of_rotation(clause) and _MEASURED.search(clause):
        yield _rotation(clause)
        return
    found = framed(clause)
    if found:
        yield replace(found, form=STEREO)
    elif CLAIMED.search(clause) and not CONDITION.search(clause):
        yield Framed(0, len(clause), why=NOT_UNDERSTOOD, form=STEREO)


def _rotation(clause: str) -> Framed:
    named = _labels(clause)
    small = _OF_SMALL.search(clause)
    if small and not named:
        named = [small[1]]
    whole = Framed(0, len(clause.rstrip(" .;")), form=ROTATION)
    if not is_certain(re.sub(r"\b(?:not (?:less|more) than|or)\b", "", clause)):
        return replace(whole, why=NOT_UNDERSTOOD)
    if read_rotation(clause) is None:
        return replace(whole, why="the rotation is not read as one value")
    if len(named) > 1:
        return replace(whole, why="the text does not say of which substance it speaks")
    if named and _RELATIVE.search(clause[: clause.index(named[0])].replace("solution of ", "")):
        return replace(whole, why="the text does not say of which substance it speaks")
    return replace(whole, label=named[0] if named else "")


def _labels(clause: str) -> list[str]:
    """The different labels that a masked clause names, in their order."""
    found = (match[0] for match in _LABELS.finditer(clause))
    return list(dict.fromkeys(re.sub(r"^[Tt]he ", "", one) for one in found if is_name_of_one(one)))
