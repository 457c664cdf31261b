"""Structure files: MOL and SDF, connection tables V2000 and V3000.

Layout after the published "CTfile formats" description: three header lines, the connection
table up to `M  END`, data items headed `>  <NAME>` and ended by a blank line, records ended by
`$$$$`. Whether a connection table makes chemical sense is judged later; here it is only checked
that it is all there.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.limits import DEFAULT, Refused, decode, unify_line_ends
from dossiercheck.model import Field, Item, Place, Record, Source, Unread
from dossiercheck.readers.content import guarded, whole

SUFFIXES = frozenset({".mol", ".sdf", ".sd", ".rxn", ".rdf"})

# Fixed columns: three coordinates of ten characters, a space, the symbol; and 3 × 3 digits.
_ATOM = re.compile(r"[ \d.+\-eE]{30} ?[A-Za-z*]")
_BOND = re.compile(r"[ \d]{2}\d[ \d]{2}\d[ \d]{2}\d(?:[ \d]|$)")
_FIELD_NAME = re.compile(r"<(.*)>")
_FIELD_NUMBER = re.compile(r"\bDT\d+\b")
# No count has more digits than a file has characters; `int` raises on thousands of them.
_COUNTS_3000 = re.compile(r"M  V30 COUNTS +([0-9]{1,9}) +([0-9]{1,9})(?![0-9])")


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield each record in its order; a record that is not all there is `Unread`."""
    text, _ = decode(data)
    if text.startswith(("$RXN", "$RDFILE")):
        raise Refused("unsupported-format", "Reaction and RD files are not read.")
    number = 0
    for chunk in _chunks(text):
        number += 1
        yield from _record(source, number, unify_line_ends(chunk))
    if not number:
        yield whole(source, "empty", "The file has no records.")
        return
    delimiters = text.startswith("$$$$") + text.count("\n$$$$") + text.count("\r$$$$")
    if not delimiters <= number <= delimiters + 1:
        yield whole(
            source,
            "record-count",
            f"{delimiters} record ends were counted but {number} records were found.",
        )


def _chunks(text: str) -> Iterator[str]:
    """The text of each record, without its `$$$$` line, which may end in any line end."""
    start = at = 0
    while (at := text.find("$$$$", at)) >= 0:
        if at and text[at - 1] not in "\r\n":
            at += 4
            continue
        yield text[start:at]
        end = at + 4
        while end < len(text) and text[end] not in "\r\n":
            end += 1
        start = at = end + (2 if text.startswith("\r\n", end) else 1)
    rest = text[start:]
    if rest.strip(" \t\r\n\x1a"):
        yield rest


def _record(source: Source, number: int, text: str) -> Iterator[Item]:
    place = Place(source.path, record=number)
    title = text[: max(text.find("\n"), 0)].strip()

    def damaged(detail: str) -> Unread:
        return Unread(place, "damaged-record", detail, title)

    if not text.strip():
        yield Unread(place, "empty-record", "The record is empty.")
        return
    if len(text) > DEFAULT.record_chars:
        yield Unread(place, "size-budget", f"The record has {len(text)} characters.", title)
        return
    end = text.find("\nM  END")
    heading = text.find("\n>", _nth_line_start(text, 3))
    if end < 0 or 0 <= heading < end:
        yield damaged("The connection table has no M  END line.")
        return
    molblock = text[: end + 7] + "\n"
    lines = molblock.split("\n")
    fault = _fault(lines)
    if fault:
        yield damaged(fault)
        return
    stray: list[Unread] = []
    fields = tuple(_fields(place, text[end + 7 :].lstrip(" \t"), stray))
    if lines[3][:6] == "  0  0" and "V3000" not in lines[3]:
        molblock = ""
        yield Unread(place, "no-structure", "The record has a connection table of no atoms.", title)
    yield Record(title, molblock, fields, place)
    yield from stray


def _nth_line_start(text: str, lines: int) -> int:
    at = -1
    for _ in range(lines):
        at = text.find("\n", at + 1)
        if at < 0:
            return len(text)
    return at


def _fields(place: Place, text: str, stray: list[Unread]) -> Iterator[Field]:
    """Data items; lines that stand under no heading are put into `stray`."""
    name: str | None = None
    value: list[str] = []
    loose: list[str] = []
    for line in text.split("\n"):
        if name is not None and line.strip():
            value.append(line)
        elif name is not None:
            yield Field(
                name, "\n".join(value), Place(place.source, record=place.record, field=name)
            )
            name = None
        elif line.startswith(">"):
            name, value = _field_name(line), []
            if not name:
                loose.append(line)
                name = None
        elif line.strip():
            loose.append(line)
    if name is not None:
        yield Field(name, "\n".join(value), Place(place.source, record=place.record, field=name))
    if loose:
        stray.append(
            Unread(
                place,
                "stray-lines",
                f"{len(loose)} lines of the record stand under no data heading.",
                "\n".join(loose)[:2000],
            )
        )


def _field_name(line: str) -> str:
    named = _FIELD_NAME.search(line)
    if named:
        return named[1].strip()
    numbered = _FIELD_NUMBER.search(line)
    return numbered[0] if numbered else ""


def fault_of(molblock: str) -> str:
    """What is missing from a connection table that is to end with `M  END`, "" when it is whole."""
    if "\nM  END" not in molblock:
        return "The connection table has no M  END line."
    return _fault(molblock.split("\n"))


def _fault(lines: list[str]) -> str:
    """What is missing from a connection table, "" when it is whole."""
    if len(lines) < 5:
        return "The counts line is missing."
    counts = lines[3]
    if "V3000" in counts:
        return _fault_3000(lines)
    try:
        atoms, bonds, lists = int(counts[0:3]), int(counts[3:6]), int(counts[6:9].strip() or 0)
    except ValueError:
        return "The fourth line is not a counts line."
    if atoms < 0 or bonds < 0:
        return "The fourth line is not a counts line."
    first_bond, after = 4 + atoms, 4 + atoms + bonds
    if len(lines) <= after:
        return f"The counts line promises {atoms} atoms and {bonds} bonds; lines are missing."
    if not all(map(_ATOM.match, lines[4:first_bond])):
        return f"Of the {atoms} atoms promised, a line of the atom block is not an atom."
    if not all(map(_BOND.match, lines[first_bond:after])):
        return f"Of the {bonds} bonds promised, a line of the bond block is not a bond."
    if _BOND.match(lines[after]) and not lists:
        return f"The bond block goes on after the {bonds} bonds promised."
    return ""


def _fault_3000(lines: list[str]) -> str:
    joined: list[str] = []
    pieces: list[str] = []
    for line in lines[4:]:
        body = line[6:].lstrip() if pieces else line
        if body.endswith("-") and (pieces or body.startswith("M  V30")):
            pieces.append(body[:-1])
            continue
        joined.append("".join([*pieces, body]).rstrip())
        pieces = []
    counts = next((m for line in joined if (m := _COUNTS_3000.match(line))), None)
    if not counts:
        return "The counts line of the V3000 table is missing."
    for kind, promised in (("ATOM", int(counts[1])), ("BOND", int(counts[2]))):
        begin, end = f"M  V30 BEGIN {kind}", f"M  V30 END {kind}"
        if begin not in joined:
            if promised:
                return f"The {kind.lower()} block of the V3000 table is missing."
            continue
        if end not in joined:
            return f"The {kind.lower()} block of the V3000 table is cut off."
        found = joined.index(end) - joined.index(begin) - 1
        if found != promised:
            return f"{promised} {kind.lower()}s are promised but {found} are there."
    return "" if "M  V30 END CTAB" in joined else "The V3000 table is cut off."
