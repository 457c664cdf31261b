"""Systematic names to structures, with what is wrong or unread in their descriptors.

A name that the parser reads costs one question. More are asked only where the parser refused,
or where the name carries both a printed descriptor and a word that implies a configuration.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from dossiercheck.names import (
    apart,
    assumed,
    capitals,
    implied,
    joining,
    leftout,
    misplaced,
    spacing,
)
from dossiercheck.names.descriptors import PrintedDescriptor, printed
from dossiercheck.names.named import Fault, NamedStructure, NameReading, Refusal, StereoGroup
from dossiercheck.names.notation import NotationError, read_extended, read_notation
from dossiercheck.names.parser import NameParser, Parse
from dossiercheck.names.refused import (
    Rest,
    is_stereo_refusal,
    least_left_out,
    never_placed,
)
from dossiercheck.names.rewriting import rewritten
from dossiercheck.names.typography import Cleaned, clean, foreign

__all__ = [
    "Fault",
    "NameReading",
    "NamedStructure",
    "PrintedDescriptor",
    "Refusal",
    "StereoGroup",
    "read_names",
]

_NOT_PARSED = re.compile(
    r"is unparsable due to the following being uninterpretable: (?P<word>.*?)"
    r" The following was not parseable: (?P<rest>.*)$"
)
_RACEMIC = frozenset(("rac", "racemic", "+/-", "+-", "-/+", "+,-", "RS", "DL", "dl", "D,L", "d,l"))


def read_names(texts: Sequence[str], parser: NameParser) -> list[NameReading]:
    """A reading for each printed name, in order; a line feed in one is a line end of the layout.

    Raises parser.ParserMissing only.
    """
    wrapped = {i for i, text in enumerate(texts) if joining.BREAK in text.strip()}
    if not wrapped:
        return _read_plain(texts, parser)
    plain = iter(_read_plain([t for i, t in enumerate(texts) if i not in wrapped], parser))

    def read(ways: Sequence[str]) -> list[NameReading]:
        return _read_plain(ways, parser)

    return [
        joining.read_joined(text, read) if i in wrapped else next(plain)
        for i, text in enumerate(texts)
    ]


def _read_plain(texts: Sequence[str], parser: NameParser) -> list[NameReading]:
    readings = [_prepared(text, parser.longest) for text in texts]
    open_ = [i for i, reading in enumerate(readings) if reading.refusal is None]
    drops = [never_placed(readings[i].descriptors) for i in open_]
    sent = [
        rewritten(readings[i].cleaned.text, readings[i].descriptors, drop=drop)
        if drop
        else readings[i].cleaned.text
        for i, drop in zip(open_, drops, strict=True)
    ]
    for i, drop, parse in zip(open_, drops, parser.parse(sent), strict=True):
        readings[i] = _read(readings[i], Rest(parse, drop), parser)
    return readings


def _prepared(text: str, longest: int) -> NameReading:
    """Cleaned and searched for descriptors, or refused before the parser is asked."""
    if len(text) > longest:
        detail = f"the name has {len(text)} characters; more than {longest} are not read"
        return NameReading(text, Cleaned("", (), text), refusal=Refusal("too-long", detail))
    cleaned = clean(text)
    if not cleaned.text:
        return NameReading(text, cleaned, refusal=Refusal("empty", "there is no text"))
    stranger = foreign(cleaned)
    if stranger:
        character, place = stranger
        return NameReading(text, cleaned, refusal=_stranger(character, place))
    return NameReading(text, cleaned, descriptors=printed(cleaned))


def _stranger(character: str, place: int) -> Refusal:
    span = (place, place + 1)
    if character in "\r\n\v\f\x85\u2028\u2029":
        detail = "a line break inside the name: whether a space belongs there is not known"
        return Refusal("line-break", detail, span)
    code = f"U+{ord(character):04X}"
    if not character.isprintable():
        return Refusal("control-character", f"the control character {code} in the name", span)
    return Refusal("foreign-character", f"{character!r} ({code}) stands in no name", span)


def _read(reading: NameReading, rest: Rest, parser: NameParser) -> NameReading:
    """The reading with its structure and faults, or with the refusal."""
    text, descriptors = reading.cleaned.text, reading.descriptors
    spaces = spacing.lost(text, rest.parse, parser)
    if spaces and rest.parse.smiles is None:
        name = rewritten(text, descriptors, drop=rest.dropped, spaces=spaces)
        rest = Rest(parser.parse([name])[0], rest.dropped)
        reading = replace(reading, respaced=spaces)
    nowhere = frozenset(i for i, d in enumerate(descriptors) if d.locant == "0")
    if nowhere and rest.parse.smiles is None:
        # The parser does not even take "0R" for a descriptor; no numbering begins at nought.
        name = rewritten(text, descriptors, drop=rest.dropped | nowhere, spaces=spaces)
        rest = Rest(parser.parse([name])[0], rest.dropped | nowhere)
    first = rest
    if rest.parse.smiles is None and not _NOT_PARSED.search(" ".join(rest.parse.messages)):
        rest = least_left_out(text, descriptors, rest, parser, reading.respaced)
    rest = misplaced.left_out(reading, rest, parser)
    messages = tuple(dict.fromkeys((*first.parse.messages, *rest.parse.messages)))
    structure = _structure(rest.parse)
    if structure is None:
        refusal = _refusal(reading.cleaned, rest.parse)
        return replace(reading, messages=messages, refusal=refusal)
    skeleton = None
    if rest.dropped:
        everything = range(len(descriptors))
        bare = rewritten(text, descriptors, drop=everything, spaces=reading.respaced)
        skeleton = _structure(parser.parse([bare])[0])
        if skeleton is not None and not _one_constitution(structure, skeleton):
            # Refused one way, the parser falls back on another way to split the name.
            said = "with and without its descriptors the name parser reads two different compounds"
            return replace(reading, messages=messages, refusal=Refusal("ambiguous", said))
    doubt = apart.doubt(text, structure.smiles)
    if doubt:
        return replace(reading, messages=messages, refusal=Refusal("ambiguous", doubt))
    other = capitals.with_ortho(text)
    if other:
        name = rewritten(other, descriptors, drop=rest.dropped, spaces=reading.respaced)
        ortho = _structure(parser.parse([name])[0])
        if ortho is not None and not _one_constitution(structure, ortho):
            said = "in capitals, “O-” may be the oxygen atom or ortho, which are two compounds here"
            return replace(reading, messages=messages, refusal=Refusal("ambiguous", said))
    reading = replace(
        reading,
        messages=messages,
        structure=structure,
        skeleton=skeleton,
        dropped=rest.dropped,
        stereo_kind=_stereo_kind(structure, descriptors),
    )
    gave_up = any("Failed to assign CIP" in message for message in first.parse.messages)
    twice = _twice(descriptors)
    known = {fault.descriptor for fault in twice}
    found = [
        *twice,
        *(
            fault
            for fault in leftout.faults(reading, rest.dropped if gave_up else (), parser)
            if fault.descriptor not in known
        ),
        *_lower_case(reading),
        *_ignored(descriptors, messages),
        *spacing.faults(reading.cleaned, spaces),
        *implied.faults(reading, parser),
        *assumed.faults(reading),
    ]
    return replace(reading, faults=tuple(found)) if found else reading


def _one_constitution(one: NamedStructure, two: NamedStructure) -> bool:
    """Whether two answers for one name are of one constitution, written in one order."""
    try:
        return read_notation(one.smiles).constitution == read_notation(two.smiles).constitution
    except NotationError:
        return False


def _structure(parse: Parse) -> NamedStructure | None:
    if parse.smiles is None:
        return None
    try:
        return read_extended(parse.smiles)
    except NotationError:
        return None


def _refusal(cleaned: Cleaned, parse: Parse) -> Refusal:
    """Why there is no structure, with the place where the parser stopped if it tells."""
    if parse.stopped:
        return Refusal(parse.stopped, parse.messages[1])
    if parse.smiles is not None:
        return Refusal("not-buildable", "the name parser's answer could not be read")
    said = " ".join(parse.messages)
    match = _NOT_PARSED.search(said)
    if match:
        part = match["rest"] or match["word"]
        span = _find(cleaned, part)
        shown = cleaned.original[slice(*span)] if span else part
        return Refusal("not-interpretable", f"not interpretable from “{shown}” on", span)
    reason = "stereo-not-buildable" if is_stereo_refusal(parse) else "not-buildable"
    return Refusal(reason, f"the name parser says: {said}" if said else "no reason given")


def _find(cleaned: Cleaned, part: str) -> tuple[int, int] | None:
    """The place of a part that the parser quotes; it quotes without spaces, and without the
    descriptors that it was not sent, so its beginning has to do."""
    kept = [i for i, c in enumerate(cleaned.text) if c != " "]
    squeezed = "".join(cleaned.text[i] for i in kept).casefold()
    wanted = part.replace(" ", "").casefold()
    for length in (len(wanted), 16, 8):
        start = squeezed.rfind(wanted[:length]) if wanted else -1
        if start >= 0:
            end = start + len(wanted) if length == len(wanted) else len(squeezed)
            return cleaned.span(kept[start], kept[end - 1] + 1)
    return None


def _stereo_kind(structure: NamedStructure, descriptors: Sequence[PrintedDescriptor]) -> str:
    kinds = {group.kind for group in structure.groups}
    signs = {d.text for d in descriptors}
    if signs & _RACEMIC and signs & {"+", "-", "(+)", "(-)"}:
        return "silent"  # one part racemic, another not: a mixture of epimers
    if kinds & {"rac", "and"} or signs & _RACEMIC:
        return "racemic"
    if "or" in kinds or any(d.text == "rel" for d in descriptors):
        return "relative"
    return "absolute" if any(c in structure.smiles for c in "@/\\") else "silent"


def _twice(descriptors: Sequence[PrintedDescriptor]) -> list[Fault]:
    """Two descriptors for one locant in one bracket."""
    found = []
    for index, descriptor in enumerate(descriptors):
        for other in range(index):
            earlier = descriptors[other]
            if (
                descriptor.locant
                and earlier.bracket == descriptor.bracket >= 0
                and (earlier.locant, earlier.family) == (descriptor.locant, descriptor.family)
            ):
                same = earlier.text == descriptor.text
                slug = "duplicate-descriptor" if same else "contradictory-descriptors"
                detail = (
                    f"locant {descriptor.locant} has {earlier.text} and {descriptor.text}"
                    " in the same bracket"
                )
                found.append(Fault(slug, index, other, detail))
                break
    return found


def _lower_case(reading: NameReading) -> list[Fault]:
    """Small letters that the parser read as capitals, the unit being one that takes those."""
    return [
        Fault(
            "lower-case-descriptor",
            index,
            None,
            f"{d.locant}{d.text} was read as {d.locant}{d.text.upper()}",
        )
        for index, d in enumerate(reading.descriptors)
        if d.text in ("r", "s", "e", "z") and index not in reading.dropped
    ]


def _ignored(descriptors: Sequence[PrintedDescriptor], messages: Sequence[str]) -> list[Fault]:
    """What the parser says it passed over (signs of rotation, mostly)."""
    found = []
    for message in messages:
        if message.startswith("STEREOCHEMISTRY_IGNORED"):
            token = message.rpartition(":")[2].strip().removesuffix("-").strip("()")
            if token in _RACEMIC:
                continue  # the parser reads the sign for a racemate all the same
            index = next((i for i, d in enumerate(descriptors) if d.text == token), None)
            found.append(Fault("stereo-ignored", index, None, message.partition(":")[2].strip()))
    return found
