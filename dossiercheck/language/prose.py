"""Passages to evidence: blocks of labelled fields, and names in what is left."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace

from dossiercheck.language.changes import touched
from dossiercheck.language.claimed import claim_evidence
from dossiercheck.language.claims import only_label
from dossiercheck.language.fields import (
    Block,
    Labelled,
    breaks_off,
    is_value,
    labelled,
    starts_next,
    value_evidence,
)
from dossiercheck.language.labels import beside, in_heading, is_label
from dossiercheck.language.roles import Aside, is_nothing, looks_systematic, plain
from dossiercheck.language.running import Candidate
from dossiercheck.language.wrapped import hard_lines, loose_name, placed, stretched
from dossiercheck.model import Evidence, Passage, Place, Role, Unread


@dataclass(slots=True)
class Line:
    """One line of one passage, its offset in the passage's text."""

    passage: Passage
    start: int
    end: int

    @property
    def text(self) -> str:
        """The line itself."""
        return self.passage.text[self.start : self.end]

    def follows(self, other: Line) -> bool:
        """True when this line comes directly after the other one in the source."""
        if self.passage is other.passage:
            return self.start == other.end + 1
        here, there = self.passage.place, other.passage.place
        if here.source != there.source or self.passage.headings != other.passage.headings:
            return False
        if here.line is not None and there.line is not None:
            return here.line == there.line + 1
        return False


@dataclass(slots=True)
class Prose:
    """What is remembered from passage to passage. Blocks are numbered by source."""

    columns: Mapping[str, str]
    block: Block | None = None
    waiting: tuple[Labelled, Line] | None = None
    previous: Line | None = None
    title: Line | None = None
    counts: dict[str, int] = field(default_factory=dict)

    def close(self) -> Iterator[Evidence | Unread]:
        """End the present block."""
        if self.waiting:
            one, line = self.waiting
            if isinstance(one.meaning, Role):
                detail = f"“{one.heading}” has no value."
                yield Unread(line.passage.place, "empty-field", detail, line.text)
            self.waiting = None
        if self.block:
            yield from self.block.evidence()
            self.block = None


def passage_evidence(passages: list[Passage], state: Prose) -> Iterator[Evidence | Unread]:
    """Evidence of passages that follow one another without a table or record between."""
    lines = [
        Line(passage, start, end)
        for passage in passages
        for start, end in hard_lines(passage.text, passage.breaks)
        if passage.text[start:end].strip()
    ]
    for index, line in enumerate(lines):
        following = lines[index + 1] if index + 1 < len(lines) else None
        if following and not following.follows(line):
            following = None
        yield from _line(line, following, state)
        state.previous = line
    yield from state.close()
    state.previous = state.title = None


def _line(line: Line, following: Line | None, state: Prose) -> Iterator[Evidence | Unread]:
    found = labelled(line.text, state.columns)
    if state.block and state.block.headings != line.passage.headings:
        yield from state.close()
    if state.waiting and not found:
        one, _ = state.waiting
        if is_value(one.meaning, line.text):
            state.waiting = None
            whole = replace(one, start=_indent(line.text), end=len(line.text.rstrip()))
            yield from _take(line, following, [whole], state)
            return
    if found:
        yield from _take(line, following, found, state)
        return
    if not _other_field(line, state):
        yield from state.close()
    title, state.title = state.title, line if is_label(line.text) else None
    yield from _names(line, following, state.previous)
    under = in_heading(line.passage.headings)
    if title and line.follows(title):
        under = title.text.strip()
    yield from claim_evidence(line.passage, line.start, line.end, under, _spoken(line, state))


def _other_field(line: Line, state: Prose) -> bool:
    """True for a field of unknown meaning among those of a block ("Salt form: maleate")."""
    if state.block is None or state.previous is None or not line.follows(state.previous):
        return False
    return _UNKNOWN_FIELD.fullmatch(line.text) is not None


_UNKNOWN_FIELD = re.compile(r"\s*[A-Z][^.:;,]{1,40}:\s+\S[^.:]{0,60}\.?\s*")


def _spoken(line: Line, state: Prose) -> str:
    """The one substance of which the line before speaks, "" for none or several."""
    previous = state.previous
    if previous is None or previous.passage.headings != line.passage.headings:
        return ""
    return only_label(previous.text)


def _take(
    line: Line, following: Line | None, found: list[Labelled], state: Prose
) -> Iterator[Evidence | Unread]:
    """Put the fields of a line into the present block, or a new one."""
    place = line.passage.place
    gap = state.previous is not None and not line.follows(state.previous)
    for one in found:
        if one.meaning is Aside.NAME_OR_LABEL:
            systematic = looks_systematic(line.text[one.start : one.end])
            one = replace(one, meaning=Role.NAME if systematic else Aside.LABEL)
        begins = gap and one.meaning is Aside.LABEL and state.block and state.block.said
        if state.block and (begins or starts_next(one.meaning, one.heading, state.block.met, gap)):
            yield from state.close()
        if state.block is None:
            number = state.counts.get(place.source, 0) + 1
            state.counts[place.source] = number
            state.block = Block(place.source, number, line.passage.headings)
            if state.title:
                state.block.label = state.title.text.strip()
                state.title = None
        block = state.block
        value = line.text[one.start : one.end]
        block.met.append((one.meaning, plain(one.heading)))
        if not value.strip():
            state.waiting = (one, line)
            block.met.pop()
            continue
        if is_nothing(value):
            continue
        if one.meaning is Aside.LABEL:
            block.called(one.heading, value.strip().rstrip(".;"))
            continue
        if one.meaning is Aside.IGNORED:
            continue
        start, end = line.start + one.start, line.start + one.end
        if (
            one.end == found[-1].end
            and following
            and one.meaning is Role.NAME
            and (breaks_off(value) or _indented_rest(line, following, state))
        ):
            yield _broken(place, (start, end), value)
            continue
        for said in value_evidence(line.passage.text, start, end, one.meaning, place, one.heading):
            if isinstance(said, Evidence):
                said = placed(said, line.passage)
                block.said.append(touched(said, line.passage.pending, line.passage.text))
            else:
                yield said


def _indented_rest(line: Line, following: Line, state: Prose) -> bool:
    """True when the next line is set in under a field, as the rest of a long value is."""
    deeper = _indent(following.text) > _indent(line.text)
    return deeper and not labelled(following.text, state.columns)


def _indent(text: str) -> int:
    return len(text) - len(text.lstrip())


def _names(
    line: Line, following: Line | None, previous: Line | None
) -> Iterator[Evidence | Unread]:
    text = line.text
    place = line.passage.place
    for found in stretched(text):
        candidate = found.candidate
        span = (line.start + candidate.start, line.start + candidate.end)
        name = text[candidate.start : candidate.end]
        if _runs_on(line, following, candidate) or _began_before(line, previous, candidate):
            yield _broken(place, span, name)
            continue
        label = beside(text, candidate.start, candidate.end)
        yield loose_name(line.passage, line.start, line.end, found, label)


def _broken(place: Place, span: tuple[int, int], text: str) -> Unread:
    detail = "The name seems to go on over a line end; how it joins is not certain."
    return Unread(replace(place, span=span), "broken-name", detail, text)


_TAIL = re.compile(
    r"(?:[a-z]*ic acid\b|acid|hydrochloride|hydrobromide|hydrate|\(\d:\d\)|[a-z]*ate\b|[\d)\]},-])"
)
# A word cut in two: what follows is not a word of a sentence but the tail of a name.
_CUT_WORD = re.compile(r"\d|[\])}]|(?:ol|one|ane|ine|ide|yl|oxy)[.,;]?$")


def _runs_on(line: Line, following: Line | None, candidate: Candidate) -> bool:
    """True when a name reaches the end of its line and the next line may go on with it.

    After a comma it may as well be the next item of a list, so only what looks like the rest of
    a name counts there.
    """
    rest = line.text[candidate.end :].strip()
    if following is None or (rest and not re.fullmatch(r"[-‐‑–,(\[{]+", rest)):
        return False
    if rest.strip(",") or breaks_off(line.text[candidate.start : candidate.end]):
        return True
    start = following.text.lstrip()
    if rest:
        return bool(re.match(r"\d", start))
    first = re.match(r"[^\s]*", start)
    return bool(_TAIL.match(start) or (first and _CUT_WORD.search(first[0])))


def _began_before(line: Line, previous: Line | None, candidate: Candidate) -> bool:
    """True when a name begins its line and the line before may hold its beginning."""
    if previous is None or line.text[: candidate.start].strip() or not line.follows(previous):
        return False
    before = previous.text.rstrip()
    return bool(re.search(r"(?:[-‐‑–([{]|\byl|[a-z]yl|\bsodium|\bpotassium)$", before))
