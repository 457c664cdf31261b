"""PDF documents: paragraphs and tables in the order they are read, with pages and boxes.

Text is read as the document's fonts map it to characters; what has no sure mapping, is not
painted, or is a picture or drawing is listed as unread, page by page.
"""

from __future__ import annotations

from collections import deque
from collections.abc import Iterator
from dataclasses import dataclass, field

from dossiercheck.model import Item, Passage, Place, Source, Unread
from dossiercheck.readers.content import guarded
from dossiercheck.readers.pdfheadings import Headings
from dossiercheck.readers.pdfmargins import Running, edge_lines
from dossiercheck.readers.pdfpage import PdfPage
from dossiercheck.readers.pdfparagraphs import Paragraph
from dossiercheck.readers.pdfprocess import BadPage, Opened, PdfLimits, pages
from dossiercheck.readers.pdfsheet import Sheet, lay_out
from dossiercheck.readers.pdftables import Draft, rounded

SUFFIXES = frozenset({".pdf"})

_NEAR = 2  # pages on each side in which a running line is looked for


@guarded("a PDF document")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield passages, tables and what is unread, page by page."""
    yield from read_within(source, data, PdfLimits())


def read_within(source: Source, data: bytes, limits: PdfLimits) -> Iterator[Item]:
    """As `read`, with budgets of the caller's choice; raises `Refused`."""
    story = _Story(source.path)
    if b"%%EOF" not in data[-2048:]:
        detail = "The file does not end as a PDF does: its end may be missing."
        yield Unread(Place(source.path), "truncated", detail)
    waiting: deque[tuple[PdfPage | BadPage, Running]] = deque()
    behind: deque[Running] = deque(maxlen=_NEAR)
    for one in pages(data, limits):
        if isinstance(one, Opened):
            story.headings = Headings(source.path, one.bookmarks)
            for reason, detail in one.notes:
                yield Unread(Place(source.path), reason, detail)
            continue
        waiting.append((one, edge_lines(one) if isinstance(one, PdfPage) else []))
        if len(waiting) > _NEAR:
            yield from _next(waiting, behind, story)
    while waiting:
        yield from _next(waiting, behind, story)
    yield from story.flush()
    yield from story.margins()


def _next(
    waiting: deque[tuple[PdfPage | BadPage, Running]],
    behind: deque[Running],
    story: _Story,
) -> Iterator[Item]:
    page, lines = waiting.popleft()
    if isinstance(page, BadPage):
        yield from story.flush()
        yield Unread(Place(story.source, page=page.number), page.reason, page.detail)
    else:
        near = [*behind, *(others for _, others in waiting)]
        yield from story.page(lay_out(page, near))
    behind.append(lines)


@dataclass(slots=True)
class _Story:
    """What is carried from page to page: the headings, and what may go on on the next page."""

    source: str
    headings: Headings = field(default_factory=lambda: Headings("", ()))
    held: list[Paragraph | Draft | Unread] = field(default_factory=list)
    tables: int = 0
    counts: dict[int, int] = field(default_factory=dict)
    seen: dict[str, tuple[str, Place]] = field(default_factory=dict)
    repeated: dict[tuple[int, ...], list[Place]] = field(default_factory=dict)

    def page(self, sheet: Sheet) -> Iterator[Item]:
        """Take a page in, and yield the one before: its end is certain now."""
        for zone, piece in sheet.running:
            place = Place(self.source, page=sheet.number, box=rounded(piece.box))
            key = "".join(c for c in piece.text.casefold() if c.isalpha())
            if key:
                self.seen.setdefault(f"{zone} {key}", (piece.text, place))
        for box in sheet.pictures:
            spot = tuple(round(edge / 4) for edge in box)
            place = Place(self.source, page=sheet.number, box=rounded(box))
            self.repeated.setdefault(spot, []).append(place)
        things = list(sheet.things)
        self._joined(things)
        yield from self.flush()
        self.held = things

    def _joined(self, things: list[Paragraph | Draft | Unread]) -> None:
        """Let a paragraph or table at the end of the page before go on in this page's first."""
        first = next((t for t in things if isinstance(t, Paragraph)), None)
        if first:
            for last in reversed(self.held):
                if not isinstance(last, Paragraph) or abs(last.size - first.size) > 0.5:
                    continue
                if not self.headings.is_heading(first) and last.could_go_on(first):
                    last.extend(first)
                    things.remove(first)
                break
        drafts = [t for t in things if not isinstance(t, Unread)]
        ends = [t for t in self.held if not isinstance(t, Unread)]
        while ends and isinstance(ends[-1], Paragraph) and ends[-1].lines <= 3 and len(ends) > 1:
            if not isinstance(ends[-2], Draft) or self.headings.is_heading(ends[-1]):
                break
            ends.pop()  # a note under the table
        opening = next((t for t in drafts[:2] if isinstance(t, Draft)), None)
        if opening and ends and isinstance(ends[-1], Draft) and ends[-1].take(opening):
            # The table goes on: it is held back with the page on which it ends.
            draft = ends[-1]
            things[things.index(opening)] = draft
            self.held.remove(draft)

    def flush(self) -> Iterator[Item]:
        """Yield what was held back."""
        last = ""
        for thing in self.held:
            if isinstance(thing, Unread):
                yield Unread(
                    Place(
                        self.source,
                        section=self.headings.section,
                        page=thing.place.page,
                        box=thing.place.box,
                    ),
                    thing.reason,
                    thing.detail,
                    thing.text,
                )
            elif isinstance(thing, Draft):
                self.tables += 1
                thing.caption = last if last.lower().startswith("table") else ""
                thing.headings, thing.section = self.headings.above, self.headings.section
                yield thing.table(self.source, self.tables)
            else:
                yield self._passage(thing)
                last = " ".join(thing.text.split())
        self.held = []

    def _passage(self, paragraph: Paragraph) -> Passage:
        above = self.headings.take(paragraph)
        number = self.counts.get(paragraph.page, 0) + 1
        self.counts = {paragraph.page: number}
        place = Place(
            self.source,
            section=self.headings.section,
            paragraph=number,
            page=paragraph.page,
            box=rounded(paragraph.box),
        )
        return Passage(
            paragraph.text,
            place,
            above,
            (),
            tuple(paragraph.breaks),
            tuple(paragraph.stretches),
        )

    def margins(self) -> Iterator[Item]:
        """Each running line once, and each picture, once where several pages repeat it."""
        for key, (text, place) in self.seen.items():
            zone = key.split(" ", 1)[0]
            yield Passage(
                text,
                Place(self.source, section=f"page {zone}", page=place.page, box=place.box),
            )
        for places in self.repeated.values():
            first = places[0]
            if len(places) > 2:
                detail = f"A picture that {len(places)} pages show at this place; it is not read."
                yield Unread(first, "picture", detail)
            else:
                for place in places:
                    yield Unread(place, "picture", "A picture, which is not read.")
