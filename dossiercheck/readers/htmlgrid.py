"""The cells of an HTML table or definition list, and the grid in which they are laid out.

HTML Standard, 4.9.12 (forming a table): a cell takes the next free place of its row and reaches
over as many columns and rows as it says.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from lxml import etree

from dossiercheck.limits import DEFAULT
from dossiercheck.model import Cell, Place
from dossiercheck.readers.grid import column_letter
from dossiercheck.readers.htmlstyle import tag_of

_GROUPS = frozenset({"thead", "tbody", "tfoot"})
CELLS = 500_000
_MOST_COLUMNS, _MOST_ROWS = 1000, 65_534  # what a span may say, in the same section


@dataclass(slots=True)
class Layout:
    """`rows` of cell elements, as far as the budget of cells goes, else `past` is true; `captions`;
    `strays` are elements where none belong, and `loose` is text outside any cell: browsers show
    both before the table."""

    rows: list[list[etree._Element]] = field(default_factory=list)
    captions: list[etree._Element] = field(default_factory=list)
    strays: list[etree._Element] = field(default_factory=list)
    loose: list[str] = field(default_factory=list)
    past: bool = False


def table_layout(table: etree._Element) -> Layout:
    """Rows and cells of a `table` element, not those of tables in it."""
    found = Layout()
    _rows(table, found)
    return found


def list_layout(node: etree._Element) -> Layout:
    """A `dl` as a table of two columns: each term with each of its definitions."""
    found = Layout()
    terms: list[etree._Element] = []
    defined = False
    for child in _items(node, found):
        if tag_of(child) == "dt":
            if defined:
                terms, defined = [], False
            terms.append(child)
            continue
        defined = True
        if len(found.rows) + len(terms) > CELLS // 2:
            found.past = True
            return found
        found.rows += [[term, child] for term in terms] or [[child]]
    if not defined:
        found.rows += [[term] for term in terms]
    return found


def _rows(node: etree._Element, found: Layout) -> None:
    found.loose.append(node.text or "")
    previous = ""
    for child in node.iterchildren(tag=etree.Element):
        tag = tag_of(child)
        if tag in _GROUPS:
            _rows(child, found)
        elif tag == "tr":
            found.rows.append([])
            _cells(child, found)
        elif tag in ("td", "th"):
            # Cells without a row of their own make one together, up to the next row.
            if previous not in ("td", "th"):
                found.rows.append([])
            found.rows[-1].append(child)
        elif tag == "caption":
            found.captions.append(child)
        else:
            found.strays.append(child)
        previous = tag
        found.loose.append(child.tail or "")


def _cells(row: etree._Element, found: Layout) -> None:
    found.loose.append(row.text or "")
    for child in row.iterchildren(tag=etree.Element):
        if tag_of(child) in ("td", "th"):
            found.rows[-1].append(child)
        else:
            found.strays.append(child)
        found.loose.append(child.tail or "")


def _items(node: etree._Element, found: Layout) -> list[etree._Element]:
    """Terms and definitions, also those that stand in a `div`."""
    items: list[etree._Element] = []
    found.loose.append(node.text or "")
    for child in node.iterchildren(tag=etree.Element):
        tag = tag_of(child)
        if tag in ("dt", "dd"):
            items.append(child)
        elif tag == "div":
            items += _items(child, found)
        else:
            found.strays.append(child)
        found.loose.append(child.tail or "")
    return items


@dataclass(slots=True)
class Grid:
    """A table being laid out; `place` is the table's."""

    place: Place
    _cells: dict[tuple[int, int], Cell] = field(default_factory=dict)
    _row: int = -1
    _column: int = 0

    def next_row(self) -> None:
        """Begin a row."""
        self._row += 1
        self._column = 0

    def put(self, text: str, element: etree._Element) -> bool:
        """Lay a cell at the next free place; false past the budget of cells."""
        while (self._row, self._column) in self._cells:
            self._column += 1
        where = replace(self.place, row=self._row + 1, column=column_letter(self._column))
        cell = Cell(text, where)
        wide = _span(element, "colspan", _MOST_COLUMNS)
        high = _span(element, "rowspan", _MOST_ROWS)
        past = self._column + wide > DEFAULT.columns or self._row + high > DEFAULT.rows
        if past or len(self._cells) + wide * high > CELLS:
            return False
        for y in range(self._row, self._row + high):
            for x in range(self._column, self._column + wide):
                self._cells.setdefault((y, x), cell)
        self._column += wide
        return True

    def rows(self) -> tuple[tuple[Cell, ...], ...]:
        """The rows that were begun, all of one width. A cell reaches no further than the last."""
        height = self._row + 1
        width = max((x for y, x in self._cells if y < height), default=-1) + 1
        if width * height > CELLS:
            return ()
        return tuple(tuple(self._at(y, x) for x in range(width)) for y in range(height) if width)

    def _at(self, row: int, column: int) -> Cell:
        cell = self._cells.get((row, column))
        if cell is None:
            cell = Cell("", replace(self.place, row=row + 1, column=column_letter(column)))
        return cell


def _span(element: etree._Element, name: str, most: int) -> int:
    """A span of 0 reaches to the last row; nothing that is no number spans."""
    text = element.get(name)
    if text is None:
        return 1
    text = text.strip()
    if not (text.isascii() and text.isdigit()) or len(text) > 9:
        return 1
    if text.strip("0") == "" and name == "rowspan":
        table = next(element.iterancestors("{*}table", "table"), element)
        return max(1, min(sum(1 for _ in table.iter("{*}tr", "tr")), 2_000))
    return min(max(int(text), 1), most)
