"""Text over line ends that the layout made: where names in it begin and end.

At such a line end a word may go on, with a hyphen or without. The search for names sees one
character there, a joint where the name certainly goes on and a space where it may have ended; the
text itself is not changed, so that spans count in it. How the lines join is for `names` to say.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace

from dossiercheck.language.changes import touched
from dossiercheck.language.labels import beside
from dossiercheck.language.running import (
    HYPHENS,
    PRIMES,
    Candidate,
    candidates,
    is_substituent,
    substituent,
)
from dossiercheck.model import Cell, Evidence, Passage, Role, Unread

_JOINT = "\u2060"
_END = re.compile(rf"[A-Za-zα-ω\d)\]}}{re.escape(PRIMES)}]")
_CUT_WORD = re.compile(r"(?<=[A-Za-z])([-‐\u00ad]\n)(?=[a-z])")
_TIGHT = (Role.SMILES, Role.INCHI, Role.INCHIKEY, Role.REGISTRY, Role.FORMULA)


@dataclass(frozen=True, slots=True)
class Stretched:
    """A candidate, and the other extents that it has if it goes on over a line end next to it."""

    candidate: Candidate
    others: tuple[tuple[int, int], ...]


def hard_lines(text: str, breaks: tuple[int, ...]) -> Iterator[tuple[int, int]]:
    """Start and end of each line that the author ended."""
    soft = frozenset(breaks)
    start = 0
    for at, character in enumerate(text):
        if character == "\n" and at not in soft:
            yield start, at
            start = at + 1
    yield start, len(text)


def stretched(text: str) -> Iterator[Stretched]:
    """The candidates of a text in which every line feed is the layout's."""
    if "\n" not in text:
        for candidate in candidates(text):
            yield Stretched(candidate, ())
        return
    view = _view(text)
    cut = list(_without_hyphens(text, view))
    for candidate in candidates(view):
        others = dict.fromkeys([*_beyond(text, view, candidate), *_near(cut, candidate)])
        others.pop((candidate.start, candidate.end), None)
        yield Stretched(candidate, tuple(others))


def _view(text: str) -> str:
    """The text with each line end as a joint or a space."""
    characters = list(text)
    for at, character in enumerate(text):
        if character == "\n":
            characters[at] = _JOINT if _goes_on(text, at) else " "
    return "".join(characters)


def _goes_on(text: str, at: int) -> bool:
    """Whether a name that reaches the line end at `at` goes on behind it for certain."""
    before, after = text[:at], text[at + 1 : at + 2]
    if not before or not after:
        return False
    last = before[-1]
    if last in HYPHENS or last == "\u00ad":
        return _END.search(before[-2:-1]) is not None
    if last in "([{" or after in ")]}" + HYPHENS:
        return True
    if last == ",":
        return re.search(r"\d[a-z]?,$", before) is not None and bool(re.match(r"[\dRSEZN]", after))
    return _in_bracket_of_a_name(before[-200:])


def _in_bracket_of_a_name(before: str) -> bool:
    """Inside the brackets of a name there is no space; a sentence's bracket begins a word."""
    start = before.rfind(" ") + 1
    word = before[start:]
    if sum(c in "([{" for c in word) <= sum(c in ")]}" for c in word):
        return False
    return word[0] not in "([{" or re.search(r"[\d-]", word) is not None


def _beyond(text: str, view: str, candidate: Candidate) -> Iterator[tuple[int, int]]:
    """The extents with the word beyond a line end that the candidate touches."""
    edges = [
        at
        for at in (candidate.end, candidate.start - 1)
        if 0 <= at < len(text) and text[at] == "\n" and view[at] == " "
    ]
    for places in (edges[:1], edges[1:], edges):
        if not places:
            continue
        joined = list(view)
        for at in places:
            joined[at] = _JOINT
        found = [(other.start, other.end) for other in candidates("".join(joined))]
        yield from _near(found, candidate)


def _without_hyphens(text: str, view: str) -> Iterator[tuple[int, int]]:
    """The extents that candidates have when the hyphens that a layout may have put into words are
    taken out: "hydro-" and "chloride" are a salt's word only so."""
    gone = {at for match in _CUT_WORD.finditer(text) for at in range(*match.span(1))}
    if not gone:
        return
    offsets = [at for at in range(len(view)) if at not in gone]
    for candidate in candidates("".join(view[at] for at in offsets)):
        yield offsets[candidate.start], offsets[candidate.end - 1] + 1


def _near(found: Iterable[tuple[int, int]], candidate: Candidate) -> Iterator[tuple[int, int]]:
    return (one for one in found if one[0] < candidate.end and one[1] > candidate.start)


def loose_names(holder: Passage | Cell, start: int, end: int) -> Iterator[Evidence | Unread]:
    """The names in one line of the author's, as evidence that stands alone."""
    text = holder.text[start:end]
    for found in stretched(text):
        candidate = found.candidate
        yield loose_name(holder, start, end, found, beside(text, candidate.start, candidate.end))


def loose_name(
    holder: Passage | Cell, start: int, end: int, found: Stretched, label: str
) -> Evidence | Unread:
    """One name of a line from `start` to `end`, with its other extents."""
    text = holder.text[start:end]
    extents = [(found.candidate.start, found.candidate.end), *found.others]
    names = [
        Evidence("", Role.NAME, text[a:b], holder.at(start + a, start + b), label=label)
        for a, b in extents
    ]
    names = [touched(said, holder.pending, holder.text) for said in names]
    compounds = [said for said in names if not is_substituent(said.text)]
    if not compounds:
        return substituent(names[0].place, names[0].text)
    return replace(compounds[0], instead=tuple(compounds[1:]))


def placed(said: Evidence, holder: Passage | Cell) -> Evidence:
    """An evidence with the page and box of its characters, and what is no name without its line
    ends: a notation, formula or number goes on without a space, words go on with one."""
    span = said.place.span
    if holder.stretches and span:
        where = holder.at(*span)
        said = replace(said, place=replace(said.place, page=where.page, box=where.box))
    if said.instead:
        said = replace(said, instead=tuple(placed(other, holder) for other in said.instead))
    if said.role is Role.NAME or "\n" not in said.text or not holder.breaks:
        return said
    start = span[0] if span else max(holder.text.find(said.text), 0)
    soft = {at - start for at in holder.breaks}
    joint = "" if said.role in _TIGHT else " "
    text = "".join(joint if at in soft else c for at, c in enumerate(said.text))
    return replace(said, text=text)
