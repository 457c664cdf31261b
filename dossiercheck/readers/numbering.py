"""The numbers that Word sets before paragraphs of a list: they stand in no run of text.

A heading's section number, or "Impurity A" before a name, may exist only here. ECMA-376 part 1,
17.9.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.limits import Archive, parse_xml
from dossiercheck.readers.grid import number_of
from dossiercheck.readers.package import attribute, child, local
from dossiercheck.readers.symbolfont import UNKNOWN
from dossiercheck.readers.wordstyles import Styles, list_of

_ROMAN = (
    *((1000, "m"), (900, "cm"), (500, "d"), (400, "cd"), (100, "c"), (90, "xc"), (50, "l")),
    *((40, "xl"), (10, "x"), (9, "ix"), (5, "v"), (4, "iv"), (1, "i")),
)


@dataclass(frozen=True, slots=True)
class _Level:
    start: int = 1
    format: str = "decimal"
    text: str = ""
    restart: int | None = None
    legal: bool = False


@dataclass(slots=True)
class Numbering:
    """The lists of a document and how far each has counted. Lists of one abstract definition
    count together; one that sets a start of its own starts there when it is first used."""

    styles: Styles
    levels: dict[str, dict[int, _Level]] = field(default_factory=dict)
    by_style: dict[tuple[str, str], int] = field(default_factory=dict)
    numbers: dict[str, tuple[str, dict[int, _Level], dict[int, int]]] = field(default_factory=dict)
    counts: dict[str, dict[int, int]] = field(default_factory=dict)
    begun: set[str] = field(default_factory=set)

    def labels(self, paragraphs: Iterable[etree._Element]) -> dict[etree._Element, str]:
        """What stands before each numbered paragraph, the paragraphs given in their order."""
        found = {}
        for paragraph in paragraphs:
            label = self._label(paragraph)
            if label:
                found[paragraph] = label
        return found

    def _label(self, paragraph: etree._Element) -> str:
        properties = child(paragraph, "pPr")
        if properties is None:
            return ""
        style_node = child(properties, "pStyle")
        style = attribute(style_node, "val") if style_node is not None else ""
        number, at = list_of(properties) or ("", "")
        by_style, style_at = self.styles.lists.get(style, ("", ""))
        number = number or by_style
        if number not in self.numbers:
            return ""
        abstract, own_levels, _ = self.numbers[number]
        level = at or style_at
        index = number_of(level, self.by_style.get((abstract, style), 0))
        return self._next(number, index, {**self.levels.get(abstract, {}), **own_levels})

    def _next(self, number: str, index: int, levels: Mapping[int, _Level]) -> str:
        if index not in levels:
            return ""
        abstract, _, starts = self.numbers[number]
        counts = self.counts.setdefault(abstract, {})
        if number not in self.begun:
            self.begun.add(number)
            for level in starts:
                counts.pop(level, None)
        start = starts.get(index, levels[index].start)
        counts[index] = counts[index] + 1 if index in counts else start
        for deeper in [known for known in counts if known > index]:
            restart = levels[deeper].restart if deeper in levels else None
            if restart is None or index < restart:
                del counts[deeper]
        shown = levels[index]
        if shown.format in ("bullet", "none"):
            return ""

        def place(match: re.Match[str]) -> str:
            other = int(match[1]) - 1
            level = levels.get(other, _Level())
            value = counts.get(other, starts.get(other, level.start))
            return _written(value, "decimal" if shown.legal else level.format)

        return re.sub(r"%([1-9])", place, shown.text).strip()


def read_numbering(archive: Archive, parts: Iterable[str], styles: Styles) -> Numbering:
    """The lists of a document. Raises `Refused` where a part does not parse."""
    made = Numbering(styles)
    linked: dict[str, str] = {}
    targets: dict[str, str] = {}
    for part in parts:
        if part not in archive:
            continue
        root = parse_xml(archive.read(part))
        for node in root:
            if local(node) == "abstractNum":
                identity = attribute(node, "abstractNumId")
                made.levels[identity] = {}
                for one in node:
                    if local(one) == "lvl":
                        _take_level(made, identity, one)
                    elif local(one) == "numStyleLink":
                        linked[identity] = attribute(one, "val")
                    elif local(one) == "styleLink":
                        targets[attribute(one, "val")] = identity
            elif local(node) == "num":
                _take_number(made, node)
    for identity, style in linked.items():
        if style in targets:
            made.levels[identity] = made.levels.get(targets[style], {})
    return made


def _take_level(made: Numbering, abstract: str, node: etree._Element) -> None:
    at = number_of(attribute(node, "ilvl"), -1)
    if at >= 0:
        made.levels[abstract][at] = _level(node)
        style = child(node, "pStyle")
        if style is not None:
            made.by_style[abstract, attribute(style, "val")] = at


def _take_number(made: Numbering, node: etree._Element) -> None:
    base = child(node, "abstractNumId")
    levels: dict[int, _Level] = {}
    starts: dict[int, int] = {}
    for one in node:
        at = number_of(attribute(one, "ilvl"), -1)
        if local(one) == "lvlOverride" and at >= 0:
            start, level = child(one, "startOverride"), child(one, "lvl")
            if level is not None:
                levels[at] = _level(level)
            if start is not None:
                starts[at] = _whole(attribute(start, "val"), 1)
    abstract = attribute(base, "val") if base is not None else ""
    made.numbers[attribute(node, "numId")] = (abstract, levels, starts)


def _level(node: etree._Element) -> _Level:
    def value(name: str, default: str) -> str:
        found = child(node, name)
        return attribute(found, "val", default) if found is not None else default

    restart = value("lvlRestart", "")
    legal = child(node, "isLgl") is not None and value("isLgl", "1") not in ("0", "false", "off")
    return _Level(
        _whole(value("start", "0"), 0),
        value("numFmt", "decimal"),
        value("lvlText", ""),
        number_of(restart, -1) if restart.isdigit() else None,
        legal,
    )


def _whole(text: str, default: int) -> int:
    return number_of(text, default) if len(text) < 7 else default


def _written(value: int, form: str) -> str:
    """A number in a list's format; `UNKNOWN` in a format that is not known."""
    match form:
        case "decimal":
            return str(value)
        case "decimalZero":
            return f"{value:02d}"
        case "upperLetter" | "lowerLetter" if 0 < value <= 780:
            letter = chr(ord("a") + (value - 1) % 26) * ((value - 1) // 26 + 1)
            return letter.upper() if form == "upperLetter" else letter
        case "upperRoman" | "lowerRoman" if 0 < value < 4000:
            roman = ""
            for size, sign in _ROMAN:
                roman += sign * (value // size)
                value %= size
            return roman.upper() if form == "upperRoman" else roman
        case "none" | "bullet":
            return ""
    return UNKNOWN
