"""Names that run over line ends: every way to join the lines is read, and none is picked.

A layout ends a line at a space, behind a hyphen of the name, behind a hyphen of its own, or
anywhere in a word that is too long for it, and the page does not say which. "meth-" and "ylamino"
are one word where "2-chloro-" and "3-methyl" are not; joined wrongly, a name is mostly none, and
sometimes that of another compound.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise, product

from dossiercheck.names.named import NamedStructure, NameReading, Refusal
from dossiercheck.names.typography import Cleaned
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Unreadable

Read = Callable[[Sequence[str]], list[NameReading]]

BREAK = "\n"
_HYPHENS = "-‐‑\u00ad"
_MOST = 128  # ways of one name that are read


@dataclass(frozen=True, slots=True)
class Joined:
    """The lines put together one way; `offsets` are the places of its characters in the text."""

    text: str
    offsets: tuple[int, ...]


def joinings(text: str) -> list[Joined]:
    """The ways to join the lines of a text, the likelier ones first; empty where there are too
    many to try.

    At a hyphen: with it and without it. Elsewhere: with a space and with nothing. A space is not
    tried where no name has one (beside a comma, inside the edge of a bracket, before a hyphen),
    and where there are many line ends a hyphen is only dropped between two letters.
    """
    lines = text.split(BREAK)
    for sparing in (False, True):
        options = [_options(a, b, sparing) for a, b in _neighbours(lines)]
        count = 1
        for one in options:
            count *= len(one)
        if count <= _MOST:
            return [_joined(lines, choice) for choice in product(*options)]
    return []


def _neighbours(lines: list[str]) -> Iterator[tuple[str, str]]:
    for one, two in pairwise(lines):
        yield one.rstrip(), two.lstrip()


def _options(before: str, after: str, sparing: bool) -> tuple[str, ...]:
    """What may be done at a line end: "-" keeps what is there, "" drops a hyphen or joins, " "
    puts a space."""
    last, first = before[-1:], after[:1]
    if last and last in _HYPHENS:
        if sparing and not (before[-2:-1].isalpha() and first.isalpha()):
            return ("keep",)
        return ("drop", "keep") if last == "\u00ad" else ("keep", "drop")
    if last in ",([{" or first in ",)]}-‐‑":
        return ("join",)
    return ("space", "join")


def _joined(lines: list[str], choice: Sequence[str]) -> Joined:
    text: list[str] = []
    offsets: list[int] = []
    at = 0
    for number, line in enumerate(lines):
        kept = line.rstrip() if number < len(lines) - 1 else line
        start = len(line) - len(line.lstrip()) if number else 0
        how = choice[number] if number < len(choice) else "join"
        if how == "drop":
            kept = kept[:-1]
        elif how == "keep" and kept.endswith("\u00ad"):
            kept = kept[:-1] + "-"
        text.append(kept[start:])
        offsets += range(at + start, at + len(kept))
        if how == "space":
            text.append(" ")
            offsets.append(at + len(line))
        at += len(line) + 1
    return Joined("".join(text), tuple(offsets))


def read_joined(text: str, read: Read) -> NameReading:
    """The reading of a name over line ends, where all ways to join it that have a structure have
    the same one; else a refusal that shows two of them."""
    ways = joinings(text)
    if not ways:
        detail = f"the name runs over {text.count(BREAK)} line ends: too many ways to join it"
        return _refused(text, "line-break", detail)
    readings = read([way.text for way in ways])
    found = [
        (way, reading)
        for way, reading in zip(ways, readings, strict=True)
        if reading.structure is not None
    ]
    if not found:
        # As a whole the likeliest way is as good as any; its refusal says where it stopped.
        return _in_text(readings[0], ways[0], text)
    flat = {_constitution(r.structure) for _, r in found if r.structure}
    whole = [(way, r) for way, r in found if not r.dropped] or found
    full = {_identity(r.structure) for _, r in whole if r.structure}
    if len(flat) > 1 or len(full) > 1:
        shown = _two_different(found)
        detail = (
            f"the name runs over a line end, and joined as “{shown[0]}” and as “{shown[1]}” it "
            "has two different structures"
        )
        return _refused(text, "several-joinings", detail)
    way, reading = min(whole, key=lambda pair: len(pair[1].faults))
    return _in_text(reading, way, text)


def choose(texts: Sequence[str], readings: Sequence[NameReading]) -> tuple[int, Refusal | None]:
    """Which of several stretches of text is the name, when a line end leaves it open how far it
    goes: the first that has a structure. Where two have different ones, a refusal beside it."""
    found = [i for i, reading in enumerate(readings) if reading.structure is not None]
    for reading in readings:
        if reading.refusal and reading.refusal.reason == "several-joinings":
            return 0, reading.refusal
    if not found:
        return 0, None
    seen = {_identity(reading.structure) for reading in readings if reading.structure}
    if len(seen) > 1:
        first = readings[found[0]].structure
        other = next(i for i in found if _identity(readings[i].structure) != _identity(first))
        one, two = (" ".join(texts[i].split()) for i in (found[0], other))
        detail = (
            f"a line ends where the name may end or go on: “{one}” and “{two}” are two different "
            "compounds"
        )
        return found[0], Refusal("several-joinings", detail)
    return found[0], None


def _refused(text: str, reason: str, detail: str) -> NameReading:
    return NameReading(text, Cleaned("", (), text), refusal=Refusal(reason, detail))


def _two_different(found: Sequence[tuple[Joined, NameReading]]) -> tuple[str, str]:
    first = _identity(found[0][1].structure)
    for way, reading in found:
        if _identity(reading.structure) != first:
            return found[0][0].text, way.text
    return found[0][0].text, found[0][0].text


def _constitution(structure: NamedStructure | None) -> str:
    """Equal for answers of one constitution."""
    if structure is None:
        return ""
    try:
        return from_smiles(structure.smiles).flat
    except Unreadable:
        return structure.smiles


def _identity(structure: NamedStructure | None) -> str:
    """Equal for answers of one stereoisomer, stated in one way."""
    if structure is None:
        return ""
    kinds = sorted(f"{group.kind}{len(group.atoms)}" for group in structure.groups)
    try:
        return from_smiles(structure.smiles).smiles + " " + " ".join(kinds)
    except Unreadable:
        return structure.smiles


def _in_text(reading: NameReading, way: Joined, text: str) -> NameReading:
    """The reading of a joined name with its places counted in the text with its line ends."""
    end = len(text)

    def moved(span: tuple[int, int]) -> tuple[int, int]:
        start, stop = span
        if start >= stop:
            place = way.offsets[start] if start < len(way.offsets) else end
            return place, place
        return way.offsets[start], way.offsets[stop - 1] + 1

    cleaned = reading.cleaned
    offsets = tuple(way.offsets[place] for place in cleaned.offsets)
    descriptors = tuple(replace(d, span=moved(d.span)) for d in reading.descriptors)
    refusal = reading.refusal
    if refusal and refusal.span:
        refusal = replace(refusal, span=moved(refusal.span))
    return replace(
        reading,
        text=text,
        cleaned=Cleaned(cleaned.text, offsets, text),
        descriptors=descriptors,
        refusal=refusal,
    )
