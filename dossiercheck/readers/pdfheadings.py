"""Headings of a PDF, and the CTD section that a place belongs to.

A heading is known by its number, by a bookmark with its words, or by larger type. The section is
that of the innermost heading with a CTD number (ICH M4), which the file's name may give too.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, field

from dossiercheck.readers.pdfparagraphs import Paragraph
from dossiercheck.readers.sections import Heading, numbered_heading

_CTD = re.compile(r"(?<![\w.])([1-5]\.\d(?:\.\d+)*(?:\.[SPAR](?:\.\d+)*)?)(?![\w.]*\w)")
_IN_NAME = re.compile(r"(?<![\w.])([1-5]\.\d(?:\.\d+)*\.[SPAR](?:\.\d+)*|[1-5]\.\d(?:\.\d+)+)")
_SIMPLE = re.compile(r"(\d{1,2})\.?\s+[A-Z]\S*(?:\s+\S+){0,9}")
_CAPTION = re.compile(r"(?:Table|Figure|Scheme)\s*\d", re.IGNORECASE)
_PARTS = (".S", ".P", ".A", ".R")
_LONGEST = 200
_LINES = 3


def _plain(text: str) -> str:
    return "".join(c for c in text.casefold() if c.isalnum())


def section_of_name(path: str) -> str:
    """The CTD section that a file's own name begins with or holds, "" for none."""
    name = path.rpartition("/")[2]
    match = _IN_NAME.search(name.rpartition(".")[0] or name)
    return match[1] if match else ""


@dataclass(slots=True)
class Headings:
    """The headings above the present place, outermost first."""

    path: str
    bookmarks: Sequence[tuple[int, str, int]]
    stack: list[Heading] = field(default_factory=list)
    _marked: dict[str, int] = field(default_factory=dict)
    _sizes: dict[int, int] = field(default_factory=dict)

    def __post_init__(self) -> None:
        """The file's own section stands above everything."""
        self._marked = {_plain(title): level for level, title, _ in reversed(self.bookmarks)}
        number = section_of_name(self.path)
        if number:
            self.stack.append(Heading("", number.count(".") + 1, number))

    @property
    def above(self) -> tuple[str, ...]:
        """The texts of the headings."""
        return tuple(heading.text for heading in self.stack if heading.text)

    @property
    def section(self) -> str | None:
        """The innermost CTD number, or the innermost number where there is none of these."""
        numbers = [heading.number for heading in self.stack if heading.number]
        ctd = [number for number in numbers if _is_ctd(number)]
        found = ctd or numbers
        return found[-1] if found else None

    def is_heading(self, paragraph: Paragraph) -> bool:
        """Whether a paragraph is a heading."""
        return self._heading(paragraph) is not None

    def take(self, paragraph: Paragraph) -> tuple[str, ...]:
        """The headings above a paragraph; if it is one itself, it counts from here on."""
        heading = self._heading(paragraph)
        if heading is None:
            self._weigh(paragraph)
            return self.above
        self.stack = [above for above in self.stack if above.level < heading.level]
        above = self.above
        self.stack.append(heading)
        return above

    def _weigh(self, paragraph: Paragraph) -> None:
        size = round(paragraph.size)
        self._sizes[size] = self._sizes.get(size, 0) + len(paragraph.text)

    def _heading(self, paragraph: Paragraph) -> Heading | None:
        if paragraph.lines > _LINES or len(paragraph.text) > _LONGEST:
            return None
        text = " ".join(paragraph.text.split())
        marked = self._marked.get(_plain(text)) if self._marked else None
        if _CAPTION.match(text):
            return None
        numbered = numbered_heading(text)
        base = max((h.level for h in self.stack if _is_ctd(h.number)), default=0)
        if (
            numbered
            and _is_ctd(numbered.number)
            and ("." + numbered.number[4:5] in _PARTS or not base)
        ):
            return numbered
        if numbered:
            return Heading(text, base + numbered.level, numbered.number)
        simple = _SIMPLE.fullmatch(text)
        if marked is not None:
            number = simple[1] if simple else ""
            return Heading(text, base + marked + 1, number)
        usual = max(self._sizes, key=lambda size: self._sizes[size], default=0)
        large = usual and paragraph.size > 1.12 * usual
        if large and len(text) < 120 and not text.endswith((".", ",", ";")) and text[:1].isalnum():
            return Heading(text, base + (1 if paragraph.size > 1.4 * usual else 2))
        return None


def _is_ctd(number: str) -> bool:
    return bool(re.match(r"[1-5]\.\d+\.[SPAR](?:\.|$)|[2-5]\.\d\.\d", number)) and bool(
        _CTD.fullmatch(number)
    )
