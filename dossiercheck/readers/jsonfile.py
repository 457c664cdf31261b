"""JSON and JSON Lines: which format an object is by the names it has, and on to its module.

A file holds one object, an array of objects, or (JSON Lines) one object a line; each object is
looked at for itself. `SHAPES` holds the formats; an object that fits no row of it is unread.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from itertools import count
from typing import Any

from dossiercheck.limits import DEFAULT, Refused, decode
from dossiercheck.model import Item, Place, Source, Unread
from dossiercheck.readers import fhir, gsrs
from dossiercheck.readers.content import guarded, whole
from dossiercheck.readers.jsontext import parse_json

SUFFIXES = frozenset({".json", ".jsonl", ".ndjson"})

# The object, where it stands (its `path` is a JSONPath, RFC 9535), and the numbers of the records
# that this file has still to give.
FromObject = Callable[[dict[str, Any], Place, Iterator[int]], Iterator[Item]]


@dataclass(frozen=True, slots=True)
class Shape:
    """An object that has all of `names` is of the format that `read` reads."""

    names: frozenset[str]
    read: FromObject


# The first row that fits is taken.
SHAPES: tuple[Shape, ...] = (
    Shape(frozenset({"resourceType"}), fhir.read_object),
    Shape(frozenset({"substanceClass"}), gsrs.read_object),
    Shape(frozenset({"molfile", "names", "stereochemistry"}), gsrs.read_object),
)


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield what the formats' own modules find, in the order of the file."""
    if source.path.lower().endswith((".jsonl", ".ndjson")):
        yield from _lines(source, data)
        return
    if len(data) > DEFAULT.member_bytes:
        raise Refused("size-budget", f"The JSON has {len(data)} bytes.")
    value = parse_json(decode(data)[0])
    place = Place(source.path, path="$")
    numbers = count(1)
    if not isinstance(value, list):
        yield from _one(value, place, numbers)
        return
    if not value:
        yield whole(source, "empty", "The array has no entries.")
    for index, entry in enumerate(value):
        yield from _one(entry, replace(place, path=f"$[{index}]"), numbers)


def _lines(source: Source, data: bytes) -> Iterator[Item]:
    text, _ = decode(data)
    numbers = count(1)
    found = False
    # Only LF and CR LF end a line: U+2028 and the like may stand inside a JSON string.
    for number, line in enumerate(text.removesuffix("\x1a").split("\n"), 1):
        if not line.strip():
            continue
        found = True
        place = Place(source.path, line=number, path="$")
        if len(line) > DEFAULT.record_chars:
            yield Unread(place, "size-budget", f"The line has {len(line)} characters.")
            continue
        try:
            value = parse_json(line)
        except Refused as refused:
            yield Unread(place, refused.reason, refused.detail)
            continue
        yield from _one(value, place, numbers)
    if not found:
        yield whole(source, "empty", "The file has no lines with text.")


def _one(value: Any, place: Place, numbers: Iterator[int]) -> Iterator[Item]:
    if not isinstance(value, dict):
        yield Unread(place, "no-reader", "The entry is not a JSON object.")
        return
    for shape in SHAPES:
        if shape.names <= value.keys():
            yield from shape.read(value, place, numbers)
            return
    names = ", ".join(sorted(value)[:6])
    yield Unread(place, "no-reader", f"No reader for a JSON object with the names {names}."[:300])
