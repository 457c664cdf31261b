"""Tables to evidence: which row or column holds the headings, and what its cells say."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, replace

from dossiercheck.language.changes import touched
from dossiercheck.language.claimed import claim_evidence
from dossiercheck.language.fields import Met, starts_next
from dossiercheck.language.labels import in_heading, in_title
from dossiercheck.language.lists import parts, synonyms
from dossiercheck.language.roles import (
    Aside,
    Meaning,
    could_be,
    is_nothing,
    is_other_label,
    is_own,
    looks_systematic,
    meaning_of,
    plain,
    says_itself,
)
from dossiercheck.language.wrapped import hard_lines, loose_names, placed
from dossiercheck.model import Cell, Evidence, Role, Table, Unread

_Meaning = Callable[[str], Meaning | None]

_ASIDE = {"reference", "method", "source", "unit", "units", "section", "note", "notes", "remark"}
_ASIDE |= {"remarks", "comment", "comments", "acceptancecriteria", "specification", "test"}
_GENERIC = {"", "value", "values", "result", "results", "details", "detail", "description", "data"}
_GENERIC |= {"information", "entry", "drugsubstance", "property", "parameter", "item", "content"}
_HEADING_ROWS = 10
_YIELDS_TO_VALUE = (None, Role.SMILES, Role.INCHI, Role.INCHIKEY)


@dataclass(frozen=True, slots=True)
class _Sheet:
    """A table with the meaning of each cell as a heading."""

    table: Table
    columns: Mapping[str, str]
    meanings: list[list[Meaning | None]]

    @property
    def name(self) -> str:
        """The group's stem: source and number of the table."""
        return f"{self.table.place.source}#table{self.table.place.table or 1}"


def table_evidence(table: Table, columns: Mapping[str, str]) -> Iterator[Evidence | Unread]:
    """Evidence of a table, whichever way it is laid out.

    A table that is a whole file or sheet and says nothing is unread; one inside a document that
    has no known heading only gives the names found in its cells.
    """
    cache: dict[str, Meaning | None] = {}

    def meaning(text: str) -> Meaning | None:
        if text not in cache:
            cache[text] = meaning_of(text, columns)
        return cache[text]

    meanings = [[meaning(cell.text) for cell in row] for row in table.rows[: 4 * _HEADING_ROWS]]
    sheet = _Sheet(table, columns, meanings)
    heading_row = _heading_row(sheet)
    field_column = _field_column(sheet)
    if field_column is not None and _is_fields(sheet, field_column, heading_row):
        found = _from_fields(sheet, field_column, meaning)
    elif heading_row is not None:
        found = _from_columns(sheet, heading_row, meaning)
    else:
        found = _from_cells(sheet)
    said = 0
    title = table.caption or (table.headings[-1] if table.headings else "")
    for one in found:
        said += 1
        if title and isinstance(one, Evidence) and not one.label:
            one = replace(one, under=one.under or title)
        yield one
    place = table.place
    if (
        not said
        and place.paragraph is None
        and place.line is None
        and (place.sheet or place.table is None)
    ):
        detail = "No heading of the table says what its columns hold."
        if heading_row is not None:
            detail = "The table has known headings, but nothing stands under them."
        yield Unread(place, "no-known-heading", detail, " | ".join(c.text for c in table.rows[0]))


# --- which way it is laid out --------------------------------------------------------------


def _telling(meanings: list[Meaning | None]) -> set[Meaning]:
    """Headings that say more than a label does."""
    return {m for m in meanings if m is not None and m not in (Aside.LABEL, Aside.IGNORED)}


def _heading_row(sheet: _Sheet) -> int | None:
    """The first row that has a telling heading and no value."""
    for index, row in enumerate(sheet.table.rows[:_HEADING_ROWS]):
        if not _telling(sheet.meanings[index]):
            continue
        others = [c.text for c, m in zip(row, sheet.meanings[index], strict=True) if m is None]
        if not any(says_itself(text) or looks_systematic(text) for text in others):
            return index
    return None


def _field_column(sheet: _Sheet) -> int | None:
    """The column, not the last, with the most different telling headings down its cells."""
    width = len(sheet.table.rows[0])
    scores = [
        (len(_telling([row[column] for row in sheet.meanings])), -column)
        for column in range(min(width - 1, 3))
    ]
    best = max(scores, default=(0, 0))
    return -best[1] if best[0] else None


def _is_fields(sheet: _Sheet, column: int, heading_row: int | None) -> bool:
    """True for a table of fields and values, False for one with headings above its columns."""
    down = len(_telling([row[column] for row in sheet.meanings]))
    if heading_row is None:
        return True
    across = len(_telling(sheet.meanings[heading_row]))
    if down != across:
        return down > across
    if down > 1 or len(sheet.meanings[heading_row]) != 2:
        return False
    # One known heading in the corner of a two-column table: the value beside it or below it?
    meaning = next(iter(_telling(sheet.meanings[heading_row])))
    beside_it = sheet.table.rows[heading_row][1].text
    below = [row[column].text for row in sheet.table.rows[heading_row + 1 :]]
    if sheet.meanings[heading_row][1] is Aside.LABEL:
        return False
    return could_be(meaning, beside_it) or not any(could_be(meaning, text) for text in below)


# --- headings above columns ----------------------------------------------------------------


def _from_columns(
    sheet: _Sheet, heading_row: int, meaning: _Meaning
) -> Iterator[Evidence | Unread]:
    rows = sheet.table.rows
    heads = rows[heading_row]
    roles = [meaning(cell.text) for cell in heads]
    standing = _standing_label(sheet.table)
    for row in rows[heading_row + 1 :]:
        again = [meaning(cell.text) for cell in row]
        if len(_telling(again)) > 1 or (again == roles and any(again)):
            heads, roles = row, again
            continue
        if not any(cell.text for cell in row):
            continue
        label = _row_label(row, roles) or standing
        also = _row_codes(row, roles, heads)
        group = f"{sheet.name}row{_own_row(row)}"
        seen: set[int] = set()
        for index, cell in enumerate(row):
            if is_nothing(cell.text) or id(cell) in seen:
                continue
            seen.add(id(cell))
            named = _named(sheet, cell, heads[index].text)
            for said in _cell(sheet, named, heads[index].text, roles[index], group, label):
                if also and isinstance(said, Evidence) and said.group:
                    said = replace(said, also=also)
                yield said


def _own_row(row: tuple[Cell, ...]) -> int:
    """The row's number; merged cells that reach in from above carry another."""
    return max((cell.place.row or 0 for cell in row), default=0)


def _row_label(row: tuple[Cell, ...], roles: list[Meaning | None]) -> str:
    labels = [
        cell.text
        for cell, role in zip(row, roles, strict=True)
        if role is Aside.LABEL and not is_nothing(cell.text)
    ]
    if labels:
        return labels[0]
    for cell, role in zip(row, roles, strict=True):
        if role is Aside.NAME_OR_LABEL and cell.text and not looks_systematic(cell.text):
            return cell.text
    return ""


def _row_codes(
    row: tuple[Cell, ...], roles: list[Meaning | None], heads: tuple[Cell, ...]
) -> tuple[str, ...]:
    """The labels of a row behind the first, where their headings say that they are the same
    substance's."""
    labels = [
        (cell.text, head.text)
        for cell, role, head in zip(row, roles, heads, strict=True)
        if role is Aside.LABEL and not is_nothing(cell.text)
    ]
    return tuple(text for text, head in labels[1:] if is_other_label(head))


def _named(sheet: _Sheet, cell: Cell, heading: str) -> Cell:
    """Outside spreadsheets, a column is called by its heading where it has one."""
    if sheet.table.place.sheet or not heading or "\n" in heading or len(heading) > 80:
        return cell
    return replace(cell, place=replace(cell.place, column=heading))


# --- fields beside values ------------------------------------------------------------------


def _from_fields(sheet: _Sheet, column: int, meaning: _Meaning) -> Iterator[Evidence | Unread]:
    rows = sheet.table.rows
    width = len(rows[0])
    body = list(rows)
    labels = [""] * width
    aside: set[int] = set()
    first = [cell.text for cell in rows[0]]
    if meaning(first[column]) in (None, Aside.LABEL) and len(rows) > 1:
        texts = first[column + 1 :]
        if meaning(first[column]) is None and any(texts) and not any(map(looks_systematic, texts)):
            body = body[1:]
            labels = ["" if plain(text) in _GENERIC else text for text in first]
            aside = {index for index, text in enumerate(first) if plain(text) in _ASIDE}
    standing = _standing_label(sheet.table)
    for value_column in range(column + 1, width):
        if value_column in aside:
            continue
        yield from _one_column(
            sheet, body, column, value_column, labels[value_column] or standing, meaning
        )


def _one_column(
    sheet: _Sheet,
    body: list[tuple[Cell, ...]],
    column: int,
    value_column: int,
    label: str,
    meaning: _Meaning,
) -> Iterator[Evidence | Unread]:
    """One substance's values down a column; a second label or a value given again begins the
    next substance."""
    met: list[Met] = []
    part = 1
    own = ""
    also: tuple[str, ...] = ()
    waiting: list[Evidence] = []
    left = ""
    for row in body:
        head, cell = row[column], row[value_column]
        if cell is head or any(cell is row[k] for k in range(column + 1, value_column)):
            continue
        role = meaning(head.text)
        beyond = row[column - 1].text if column else ""
        changed = bool(column and beyond and left and beyond != left)
        left = beyond or left
        again = role is not None and starts_next(role, head.text, met)
        if changed or again:
            yield from (replace(said, label=own or label, also=also) for said in waiting)
            waiting, met, own, also, part = [], [], "", (), part + 1
        if column and beyond:
            own = own or beyond
        if is_nothing(cell.text):
            continue
        if role is not None:
            met.append((role, plain(head.text)))
        if role is Aside.LABEL or (role is Aside.NAME_OR_LABEL and not looks_systematic(cell.text)):
            if own and is_other_label(head.text):
                also += (cell.text,)
            own = own or cell.text
            continue
        group = f"{sheet.name}column{value_column + 1}" + (f"part{part}" if part > 1 else "")
        named = _named_field(sheet, cell, head.text)
        for said in _cell(sheet, named, head.text, role, group, ""):
            if isinstance(said, Evidence) and said.group:
                waiting.append(said)
            else:
                yield said
    yield from (replace(said, label=own or label, also=also) for said in waiting)


def _named_field(sheet: _Sheet, cell: Cell, heading: str) -> Cell:
    if sheet.table.place.sheet or "\n" in heading or len(heading) > 80:
        return cell
    return replace(cell, place=replace(cell.place, field=heading))


# --- cells ---------------------------------------------------------------------------------


def _cell(
    sheet: _Sheet, cell: Cell, heading: str, role: Meaning | None, group: str, label: str
) -> Iterator[Evidence | Unread]:
    """What one cell says, with the tracked changes that touch it."""
    for said in _said(sheet, cell, heading, role, group, label):
        if isinstance(said, Evidence):
            said = touched(placed(said, cell), cell.pending, cell.text)
        yield said


def _said(
    sheet: _Sheet, cell: Cell, heading: str, role: Meaning | None, group: str, label: str
) -> Iterator[Evidence | Unread]:
    """What one cell says, under a heading of a known meaning or of none."""
    text = cell.text
    itself = says_itself(text)
    if itself and role in _YIELDS_TO_VALUE and not is_own(heading, sheet.columns):
        role = itself
    if role is Aside.NAME_OR_LABEL:
        role = Role.NAME if looks_systematic(text) else Aside.LABEL
    if role is Aside.COUNT:
        # The number says nothing without its heading.
        yield Evidence("", Role.STEREO, f"{heading}: {text}", cell.place, group, label)
    elif role is Role.ROTATION and "(" in heading:
        # The conditions stand in the heading.
        yield Evidence("", role, f"{heading}: {text}", cell.place, group, label)
    elif role is Aside.SYNONYMS:
        for span in synonyms(text, 0, len(text)):
            place = replace(cell.place, span=span)
            yield Evidence("", Role.NAME, text[slice(*span)], place, group, label)
    elif role is Role.NAME:
        yield from _names(cell, group, label)
    elif isinstance(role, Role):
        yield Evidence("", role, text, cell.place, group, label)
    elif role is None:
        yield from _loose_names(cell)
        for start, end in hard_lines(text, cell.breaks):
            yield from claim_evidence(cell, start, end, label, group=group)


def _names(cell: Cell, group: str, label: str) -> Iterator[Evidence | Unread]:
    """The name of a cell, or each name of a list."""
    text = cell.text
    listed = parts(text, 0, len(text))
    for span in listed:
        name = text[slice(*span)]
        place = replace(cell.place, span=span) if len(listed) > 1 else cell.place
        if name.count("\n") > sum(span[0] <= at < span[1] for at in cell.breaks):
            detail = "The cell has several lines; whether they are one name is not certain."
            yield Unread(place, "several-lines", detail, name)
        else:
            yield Evidence("", Role.NAME, name if len(listed) > 1 else text, place, group, label)


def _from_cells(sheet: _Sheet) -> Iterator[Evidence | Unread]:
    """A table without known headings: names, InChIs and InChIKeys where cells hold them."""
    seen: set[int] = set()
    for row in sheet.table.rows:
        group = f"{sheet.name}row{_own_row(row)}"
        for cell in row:
            if id(cell) in seen or is_nothing(cell.text):
                continue
            seen.add(id(cell))
            itself = says_itself(cell.text)
            yield from _cell(sheet, cell, "", itself, group if itself else "", "")


def _loose_names(cell: Cell) -> Iterator[Evidence | Unread]:
    """Names in the running text of a cell; they stand alone."""
    for start, end in hard_lines(cell.text, cell.breaks):
        yield from loose_names(cell, start, end)


def _standing_label(table: Table) -> str:
    """What the caption or the headings above a table say it is about."""
    return in_title(table.caption) or in_heading(table.headings)
