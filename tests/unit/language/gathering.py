"""Short ways to write what readers yield, and to look at what language makes of it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence

from dossiercheck.language import gather
from dossiercheck.model import Cell, Evidence, Item, Passage, Place, Table, Unread


def table(
    rows: Sequence[Sequence[str]],
    *,
    sheet: str | None = None,
    number: int | None = 1,
    section: str | None = "3.2.S.1",
    headings: tuple[str, ...] = (),
    caption: str = "",
) -> Table:
    place = Place("a", section=section, sheet=sheet, table=number)
    cells = tuple(
        tuple(
            Cell(text, Place("a", section, sheet, number, row=r, column=chr(64 + c)))
            for c, text in enumerate(row, 1)
        )
        for r, row in enumerate(rows, 1)
    )
    return Table(cells, place, headings, caption)


def lines(text: str, headings: tuple[str, ...] = ()) -> list[Item]:
    """A text's lines as the text reader yields them, blank ones left out."""
    return [
        Passage(line, Place("a", line=number), headings)
        for number, line in enumerate(text.split("\n"), 1)
        if line.strip()
    ]


def evidence(items: Iterable[Item], columns: Mapping[str, str] | None = None) -> list[Evidence]:
    found = list(gather(items, columns or {}))
    return [one for one in found if isinstance(one, Evidence)]


def said(items: Iterable[Item], columns: Mapping[str, str] | None = None) -> list[tuple[str, str]]:
    """(role, text) of each evidence."""
    return [(one.role.name, one.text) for one in evidence(items, columns)]


def labels(items: Iterable[Item]) -> list[str]:
    return [one.label for one in evidence(items)]


def not_read(items: Iterable[Item], columns: Mapping[str, str] | None = None) -> list[Unread]:
    return [one for one in gather(items, columns or {}) if isinstance(one, Unread)]
