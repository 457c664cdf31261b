"""One substance of a structured export, gathered value by value into a `Record`.

The headings under which values are kept are those `language/roles.py` knows; a heading that it
does not know keeps the value beside the evidence without making it evidence.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field, replace

from dossiercheck.limits import unify_line_ends
from dossiercheck.model import Field, Item, Place, Record, Unread
from dossiercheck.readers.molfile import fault_of

NAME = "systematic name"
OTHER_NAME = "name of another type"
SMILES = "SMILES"
INCHI = "InChI"
INCHIKEY = "InChIKey"
FORMULA = "molecular formula"
MASS = "molecular weight"
REGISTRY = "CAS registry number"
STEREO = "stereochemistry"
ROTATION = "optical activity"
CENTRES = "number of stereocentres"
MOLFILE = "molfile"

# How far from its line the counts line is looked for: exports add or drop blank header lines.
_HEADER_LINES = 8


@dataclass(eq=False, slots=True)
class Entry:
    """What has been found of one substance; `place` has the record's number and path."""

    place: Place
    title: str = ""
    molblock: str = ""
    fields: list[Field] = field(default_factory=list)
    unread: list[Unread] = field(default_factory=list)

    def at(self, path: str) -> Place:
        """The place of a value of this substance."""
        return replace(self.place, path=path)

    def add(self, heading: str, value: str, path: str) -> None:
        """Keep a value under a heading; a blank one says nothing."""
        if value.strip():
            place = replace(self.place, field=heading, path=path)
            self.fields.append(Field(heading, value, place))

    def add_molfile(self, text: str, path: str) -> None:
        """Keep a connection table: the first is the record's drawing, others stand beside it."""
        if not text.strip():
            return
        block = _molblock(text)
        fault = fault_of(block)
        if fault:
            self.refuse(path, "damaged-record", fault)
        elif not self.molblock:
            self.molblock = block
        else:
            self.add(MOLFILE, block, path)

    def refuse(self, path: str, reason: str, detail: str, text: str = "") -> None:
        """List a value as unread."""
        self.unread.append(Unread(self.at(path), reason, detail, text[:2000]))

    def items(self) -> Iterator[Item]:
        """The record, if there is anything in it, and what of it is unread."""
        if self.molblock or self.fields:
            yield Record(self.title, self.molblock, tuple(self.fields), self.place)
        yield from self.unread


def _molblock(text: str) -> str:
    """The connection table with three header lines, which exports in XML and JSON add to or cut
    short when they trim or indent the text; the lines themselves stay as they are."""
    lines = unify_line_ends(text).split("\n")
    marks = ("V2000", "V3000")
    at = next(
        (n for n, line in enumerate(lines[:_HEADER_LINES]) if line.rstrip().endswith(marks)), 3
    )
    if at > 3 and not any(line.strip() for line in lines[: at - 3]):
        lines = lines[at - 3 :]
    lines = [""] * max(3 - at, 0) + lines
    end = next((n for n, line in enumerate(lines) if line.rstrip() == "M  END"), len(lines))
    return "\n".join(lines[: end + 1]) + "\n"
