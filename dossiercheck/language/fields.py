"""Labelled fields in running text: "Chemical name: …", "Molecular formula – C17H19NO3".

Fields that stand together form a block, which speaks of one substance. A block ends at other
text, at a heading, at a second label, and wherever a value comes again that one substance has
once only; so two lists that follow one another do not run together.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace

from dossiercheck.language.labels import in_heading, is_label
from dossiercheck.language.lists import parts, synonyms
from dossiercheck.language.roles import (
    Aside,
    Meaning,
    could_be,
    is_nothing,
    is_other_label,
    meaning_of,
    plain,
)
from dossiercheck.language.wrapped import stretched
from dossiercheck.model import Evidence, Place, Role, Unread

_TRIMMED = (
    Role.FORMULA,
    Role.MASS,
    Role.REGISTRY,
    Role.INCHIKEY,
    Role.SMILES,
    Role.FLACK,
    Role.SPACE_GROUP,
)
_SEPARATOR = re.compile(r"\s*[:：=\t]\s*|\s+[-–—|]\s+|\s*[–—]\s+")
_BULLET = re.compile(r"\s*(?:[-*•·‣▪–]\s+|\(?\d{1,2}[.)]\s+)?")
_NEXT_FIELD = re.compile(r"\s*[;,|\t]\s*(?=[A-Z][^:;=]{1,50}[:=])")


@dataclass(frozen=True, slots=True)
class Labelled:
    """One field of a line: what it is, and where its value stands in the line."""

    meaning: Meaning
    heading: str
    start: int
    end: int
    line_start: int = 0


def labelled(text: str, columns: Mapping[str, str]) -> list[Labelled]:
    """The fields of one line, in order; none where the line does not begin with one.

    A value may be empty where the text ends after the separator: it then follows on the next
    line.
    """
    found: list[Labelled] = []
    at = 0
    while True:
        one = _field(text, at, columns)
        if one is None:
            return found
        following = None
        for joint in _NEXT_FIELD.finditer(text, one.start):
            if _field(text, joint.end(), columns):
                following = joint
                break
        if following is None:
            return [*found, one]
        found.append(replace(one, end=following.start()))
        at = following.end()


def _field(text: str, at: int, columns: Mapping[str, str]) -> Labelled | None:
    bullet = _BULLET.match(text, at)
    begin = bullet.end() if bullet else at
    for separator in _SEPARATOR.finditer(text, begin, begin + 90):
        heading = text[begin : separator.start()].strip(" *_")
        meaning = meaning_of(heading, columns) if heading else None
        if meaning is None:
            continue
        end = len(text.rstrip())
        start = min(separator.end(), end)
        return Labelled(meaning, heading, start, end, begin)
    return None


Met = tuple[Meaning, str]


def starts_next(meaning: Meaning, heading: str, met: list[Met], gap: bool = False) -> bool:
    """True when a field cannot be of the substance of the fields already `met`.

    Names in a row are synonyms, and so are labels under different headings ("Substance", then
    "Company code"); one that comes after other values is the next substance's.
    """
    if meaning not in (known for known, _ in met):
        return False
    if meaning in (Aside.IGNORED, Aside.SYNONYMS):
        return False
    if meaning is Role.NAME:
        return gap or met[-1][0] is not Role.NAME
    if meaning is Aside.LABEL:
        return gap or met[-1][0] is not Aside.LABEL or (meaning, plain(heading)) in met
    return True


@dataclass(slots=True)
class Block:
    """Fields that stand together; `said` waits for the label, which may come last."""

    path: str
    number: int
    headings: tuple[str, ...]
    label: str = ""
    also: tuple[str, ...] = ()
    said: list[Evidence] = field(default_factory=list)
    met: list[Met] = field(default_factory=list)

    def evidence(self) -> Iterator[Evidence]:
        """The block's evidence with group and label."""
        label = self.label or in_heading(self.headings)
        under = self.headings[-1] if self.headings and not label else ""
        for said in self.said:
            group = f"{self.path}#block{self.number}"
            yield replace(said, group=group, label=label, also=self.also, under=under)

    def called(self, heading: str, label: str) -> None:
        """Take a label; after the first, one that a code's heading says is the same one's."""
        if not self.label:
            self.label = label
        elif is_other_label(heading):
            self.also += (label,)


def value_evidence(
    text: str, start: int, end: int, meaning: Meaning, place: Place, heading: str
) -> Iterator[Evidence | Unread]:
    """What the value at `start` to `end` of `text` says; spans count in `text`."""
    value = text[start:end]
    if meaning is Role.NAME:
        for first, last in parts(text, start, end):
            yield from _name(text, first, last, place)
        return
    if meaning is Aside.SYNONYMS:
        for span in synonyms(text, start, end):
            yield Evidence("", Role.NAME, text[slice(*span)], replace(place, span=span))
        return
    trimmed = end
    if meaning in _TRIMMED:
        trimmed = start + len(value.rstrip(" .,;"))
    if isinstance(meaning, Role):
        yield Evidence("", meaning, text[start:trimmed], replace(place, span=(start, trimmed)))
    elif meaning is Aside.COUNT:
        # The number says nothing without its heading, so the heading is part of the text.
        begin = text.rfind(heading, 0, start)
        yield Evidence("", Role.STEREO, text[begin:end], replace(place, span=(begin, end)))


def _name(text: str, start: int, end: int, place: Place) -> Iterator[Evidence | Unread]:
    value = text[start:end]
    if re.search(r"\b(?:is|are|was|the|according|which|named)\b", value):
        for found in stretched(value):
            extents = [(found.candidate.start, found.candidate.end), *found.others]
            spans = [(start + a, start + b) for a, b in extents]
            said, *others = (
                Evidence("", Role.NAME, text[slice(*span)], replace(place, span=span))
                for span in spans
            )
            yield replace(said, instead=tuple(others))
        return
    cut = value.rstrip()
    bracket = re.search(r"\s+\(([^()]{2,60})\)\.?$", cut)
    if bracket and is_label(bracket[1]):
        cut = cut[: bracket.start()]
    if cut.endswith(".") or cut.endswith(";"):
        cut = cut[:-1]
    span = (start, start + len(cut.rstrip()))
    yield Evidence("", Role.NAME, text[slice(*span)], replace(place, span=span))


def breaks_off(value: str) -> bool:
    """True for a value that cannot end where its line ends."""
    opened = sum(c in "([{" for c in value) - sum(c in ")]}" for c in value)
    return opened > 0 or bool(re.search(r"[-‐‑–,]\s*$", value))


def is_value(meaning: Meaning, text: str) -> bool:
    """Whether a line can be the value of a field whose own line ends after the separator."""
    return not is_nothing(text) and (could_be(meaning, text) or meaning is Aside.LABEL)
