"""Text over line ends that the layout made: where names in it begin and end.

At such a line end a word may go on, with a hyphen or without. The search for names sees nothing
there where the name certainly goes on, and a space where it may have ended; the text itself is
not changed, so that spans count in it. How the lines join is for `names` to say.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace

from dossiercheck.language.changes import touched
from dossiercheck.language.labels import beside, hinted, in_heading, is_relative
from dossiercheck.language.running import (
    HYPHENS,
    PRIMES,
    Candidate,
    candidates,
    is_substituent,
    substituent,
)
from dossiercheck.model import Cell, Evidence, Passage, Role, Unread

_END = re.compile(rf"[A-Za-zα-ω\d)\]}}{re.escape(PRIMES)}]")
_BEGUN = re.compile(r"(?:^|(?<=\s))(\S*\([^()\s]*[RSEZ]\)\S{0,40})(?=\n)")
_MOST = 6  # line ends on one side of a name that are gone over
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
    ends = [at for at, character in enumerate(text) if character == "\n"]
    joints = frozenset(at for at in ends if _goes_on(text, at))
    joints |= _begun(text, joints)
    cut = list(_seen(text, joints | _hyphens(text)))
    for candidate in _seen(text, joints):
        near = [one for one in cut if _overlap(one, candidate)]
        near += _beyond(text, joints, candidate)
        others = dict.fromkeys((one.start, one.end) for one in near)
        others.pop((candidate.start, candidate.end), None)
        yield Stretched(candidate, tuple(others))


def _seen(text: str, gone: frozenset[int]) -> Iterator[Candidate]:
    """The candidates when some characters are passed over and other line ends are spaces."""
    offsets = [at for at in range(len(text)) if at not in gone]
    view = "".join(text[at] for at in offsets).replace("\n", " ")
    for one in candidates(view):
        yield Candidate(offsets[one.start], offsets[one.end - 1] + 1)


def _begun(text: str, joints: frozenset[int]) -> frozenset[int]:
    """The line ends behind what begins like a name and is one only with the next line, as
    "(4S)-6-c" before "hloro…"."""
    begun = [match for match in _BEGUN.finditer(text) if match.end() not in joints]
    if not begun:
        return frozenset()
    found = list(_seen(text, joints))
    ends = set()
    for match in begun:
        start = Candidate(match.start(1), match.end(1))
        if not any(_overlap(start, one) for one in found) and any(
            _grown(text, joints | {match.end()}, start)
        ):
            ends.add(match.end())
    return frozenset(ends)


def _beyond(text: str, joints: frozenset[int], candidate: Candidate) -> Iterator[Candidate]:
    """The candidate with the words beyond the line ends that it touches, and where such a word
    reaches to the next line end, with that beyond it too."""
    rights = _steps(text, joints, candidate, lambda one: one.end)
    lefts = _steps(text, joints, candidate, lambda one: one.start - 1)
    for left in lefts:
        for right in rights:
            yield from _grown(text, joints | left | right, candidate)


def _steps(
    text: str, joints: frozenset[int], candidate: Candidate, edge: Callable[[Candidate], int]
) -> list[frozenset[int]]:
    """The line ends to go over on one side: none, the next one, the next two and so on."""
    found: list[frozenset[int]] = [frozenset()]
    now = candidate
    while len(found) < _MOST:
        at = edge(now)
        if not 0 <= at < len(text) or text[at] != "\n" or at in joints | found[-1]:
            break
        over = found[-1] | {at}
        grown = next(_grown(text, joints | over, candidate), None)
        if grown is None:
            break
        found.append(over)
        now = grown
    return found


def _grown(text: str, joints: frozenset[int], candidate: Candidate) -> Iterator[Candidate]:
    return (other for other in _seen(text, joints) if _overlap(other, candidate))


def _hyphens(text: str) -> frozenset[int]:
    """The hyphens that a layout may have put into words, with their line ends: "hydro-" and
    "chloride" are a salt's word only without."""
    return frozenset(at for match in _CUT_WORD.finditer(text) for at in range(*match.span(1)))


def _overlap(one: Candidate, two: Candidate) -> bool:
    return one.start < two.end and one.end > two.start


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
    if after == "," and re.match(r",\d", text[at + 1 : at + 3]) and last.isdigit():
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
    headings = holder.headings if isinstance(holder, Passage) else ()
    under = in_heading(headings) or (headings[-1] if headings else "")
    extents = [(found.candidate.start, found.candidate.end), *found.others]
    names = [
        Evidence(
            "",
            Role.NAME,
            text[a:b],
            holder.at(start + a, start + b),
            label=label,
            under=under,
            apart=not label and is_relative(text[:a]),
            hints=hinted(text, a, b),
        )
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
