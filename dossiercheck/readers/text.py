"""Plain text and Markdown.

A passage is one line, so that a line number and a span find it again. In Markdown the marks of
emphasis and the tags of raised and lowered text are taken out of the passage's text, and spans
count what is left; pipe tables become tables.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.limits import DEFAULT, Limits, decode, unify_line_ends
from dossiercheck.model import Cell, Item, Passage, Place, Source, Table, Unread
from dossiercheck.readers.content import guarded, whole
from dossiercheck.readers.grid import column_letter
from dossiercheck.readers.sections import Heading, Outline, number_of, numbered_heading

SUFFIXES = frozenset({".txt", ".md", ".markdown"})

_HASHES = re.compile(r" {0,3}(#{1,6})[ \t]+(.*?)[ \t]*#*[ \t]*")
_UNDERLINE = re.compile(r" {0,3}(={3,}|-{3,})[ \t]*")
_RULE = re.compile(r" {0,3}\|?[ \t]*:?-+:?[ \t]*(?:\|[ \t]*:?-+:?[ \t]*)*\|?[ \t]*")
_FENCE = re.compile(r" {0,3}(?:`{3,}|~{3,})")
_PIPE = re.compile(r"(?<!\\)\|")
_CODE = re.compile(r"(`+)(.+?)\1")
_STRONG = re.compile(r"\*\*(?=\S)(.+?)(?<=\S)\*\*")
# A lone asterisk pair is only taken for emphasis where line notations have none: around a
# descriptor or prefix next to a bracket, comma, digit or hyphen, and around prose.
_LETTER = re.compile(r"(?<=[(\[,\d'′-])\*([A-Za-z]{1,5})\*(?=[)\],'′-])|\*([A-Za-z]{1,5})\*(?=-)")
_PROSE = re.compile(r"(?<![\w*])\*(?=[^\s*])([^*\n]* [^*\n]*)(?<=[^\s*])\*(?![\w*])")
_TAG = re.compile(r"</?(?:sup|sub|i|b|em|strong|u)>", re.IGNORECASE)
_ESCAPE = re.compile(r"\\([*_|#~`])")


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield passages and tables in the order of the text."""
    text, _ = decode(data)
    yield from read_text(source, unify_line_ends(text), DEFAULT)


def read_text(source: Source, text: str, limits: Limits) -> Iterator[Item]:
    """As `read`, from text with LF line ends and with budgets of the caller's choice."""
    lines = text.removesuffix("\x1a").split("\n")
    if not any(line.strip() for line in lines):
        yield whole(source, "empty", "The file has no text.")
        return
    marked = not source.path.lower().endswith(".txt")
    outline = Outline()
    tables = at = 0
    fenced = False
    while at < len(lines):
        line, number = lines[at], at + 1
        at += 1
        if not line.strip():
            continue
        if len(line) > limits.line_chars:
            place = Place(source.path, section=outline.section, line=number)
            detail = f"The line has {len(line)} characters, more than {limits.line_chars}."
            yield Unread(place, "line-too-long", detail)
            continue
        if marked and _FENCE.match(line):
            fenced = not fenced
            continue
        if marked and not fenced and "|" in line and at < len(lines) and _is_rule(lines[at]):
            tables += 1
            end = at + 1
            while end < len(lines) and "|" in lines[end] and len(lines[end]) <= limits.line_chars:
                end += 1
            place = Place(source.path, section=outline.section, table=tables, line=number)
            yield from _table(place, [line, *lines[at + 1 : end]], number, outline.headings)
            at = end
            continue
        following = lines[at] if at < len(lines) else ""
        heading = None if fenced else _heading(line, following, marked)
        if heading and _UNDERLINE.fullmatch(following) and not _HASHES.fullmatch(line):
            at += 1
        above = outline.headings
        if heading:
            outline.enter(heading)
            above = outline.headings[:-1]
        place = Place(source.path, section=outline.section, line=number)
        shown = heading.text if heading else (unmarked(line) if marked and not fenced else line)
        yield Passage(shown, place, above)


def unmarked(line: str) -> str:
    """A Markdown line as a reader of the rendered page sees it; code spans stay as they are."""
    parts: list[str] = []
    end = 0
    for code in _CODE.finditer(line):
        parts += [_without_emphasis(line[end : code.start()]), code[2].strip()]
        end = code.end()
    return "".join([*parts, _without_emphasis(line[end:])])


def _without_emphasis(text: str) -> str:
    if "*" in text:
        text = _STRONG.sub(r"\1", text)
        text = _LETTER.sub(lambda match: match[1] or match[2], text)
        text = _PROSE.sub(r"\1", text)
    if "<" in text:
        text = _TAG.sub("", text)
    return _ESCAPE.sub(r"\1", text) if "\\" in text else text


def _is_rule(line: str) -> bool:
    return "-" in line and "|" in line and len(line) < 5000 and bool(_RULE.fullmatch(line))


def _heading(line: str, following: str, marked: bool) -> Heading | None:
    hashes = _HASHES.fullmatch(line) if marked else None
    if hashes:
        text = unmarked(hashes[2])
        return Heading(text, len(hashes[1]), number_of(text)) if text else None
    if len(line) > 200:
        return None
    underline = _UNDERLINE.fullmatch(following)
    if underline and not _UNDERLINE.fullmatch(line):
        text = unmarked(line.strip()) if marked else line.strip()
        return Heading(text, 1 if "=" in underline[1] else 2, number_of(text))
    return numbered_heading(line)


def _table(
    place: Place, lines: list[str], first_line: int, headings: tuple[str, ...]
) -> Iterator[Item]:
    rows = [_cells(line) for line in lines]
    width = len(rows[0])
    kept: list[tuple[Cell, ...]] = []
    for index, row in enumerate(rows):
        # The rule under the heading row takes one line of the source but is no row.
        line = first_line + index + (1 if index else 0)
        if len(row) > width and any(row[width:]):
            where = Place(place.source, place.section, table=place.table, row=index + 1, line=line)
            detail = f"The row has {len(row)} cells where the table has {width} columns."
            yield Unread(where, "ragged-row", detail, lines[index][:2000])
            continue
        row = (row + [""] * width)[:width]
        kept.append(
            tuple(
                Cell(
                    cell,
                    Place(
                        place.source,
                        place.section,
                        table=place.table,
                        row=index + 1,
                        column=column_letter(column),
                        line=line,
                    ),
                )
                for column, cell in enumerate(row)
            )
        )
    yield Table(tuple(kept), place, headings)


def _cells(line: str) -> list[str]:
    parts = _PIPE.split(line.strip().removeprefix("|"))
    if len(parts) > 1 and not parts[-1].strip():
        parts.pop()
    return [unmarked(part.strip().replace("\\|", "|")) for part in parts]
