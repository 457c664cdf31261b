"""What a Word style says of its text: heading level, list, and how runs are shown.

ECMA-376 part 1, 17.7; only what changes what a person reads is kept.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.limits import Archive, parse_xml
from dossiercheck.readers.grid import number_of
from dossiercheck.readers.package import attribute, child, local

_OFF = ("0", "false", "off")
# Properties that a second style turns back again (17.7.3, toggle properties).
_TOGGLES = ("vanish", "caps", "smallCaps")
_STEPS = 50  # styles may be based on one another in a ring

Run = Mapping[str, str]


@dataclass(frozen=True, slots=True)
class Styles:
    """By style id: `levels` of headings (1 outermost), `lists` as (number id, level) with "" for
    what is not said, and the `runs` properties."""

    levels: Mapping[str, int] = field(default_factory=dict)
    lists: Mapping[str, tuple[str, str]] = field(default_factory=dict)
    runs: Mapping[str, Run] = field(default_factory=dict)

    def shown(self, run: etree._Element, paragraph_style: str) -> Run:
        """The properties in force on a run: its own over those of its styles."""
        properties = child(run, "rPr")
        own = run_properties(properties)
        style = child(properties, "rStyle") if properties is not None else None
        by_run = self.runs.get(attribute(style, "val"), {}) if style is not None else {}
        by_paragraph = self.runs.get(paragraph_style, {})
        if not by_run and not by_paragraph:
            return own
        both = {**by_paragraph, **by_run}
        for name in _TOGGLES:
            if name in by_paragraph and name in by_run:
                both[name] = "1" if by_paragraph[name] != by_run[name] else "0"
        return {**both, **own}


def run_properties(node: etree._Element | None) -> dict[str, str]:
    """Of an `rPr`: `vanish`, `caps`, `smallCaps` ("1" or "0"), `vertAlign`, `position` (half
    points), `font`."""
    found: dict[str, str] = {}
    for one in node if node is not None else ():
        name = local(one)
        if name in _TOGGLES:
            found[name] = "0" if attribute(one, "val", "1") in _OFF else "1"
        elif name in ("vertAlign", "position"):
            found[name] = attribute(one, "val")
        elif name == "rFonts":
            font = attribute(one, "ascii") or attribute(one, "hAnsi")
            if font:
                found["font"] = font
    return found


def read_styles(archive: Archive, parts: Iterable[str]) -> Styles:
    """The styles of a document, each with what it takes from the one it is based on.

    Raises `Refused` where a part does not parse.
    """
    levels: dict[str, int] = {}
    lists: dict[str, tuple[str, str]] = {}
    runs: dict[str, dict[str, str]] = {}
    based: dict[str, str] = {}
    for part in parts:
        if part not in archive:
            continue
        for style in parse_xml(archive.read(part)):
            kind = attribute(style, "type")
            if local(style) != "style" or kind not in ("paragraph", "character"):
                continue
            identity = attribute(style, "styleId")
            runs[identity] = run_properties(child(style, "rPr"))
            parent = child(style, "basedOn")
            if parent is not None:
                based[identity] = attribute(parent, "val")
            if kind == "paragraph":
                level = _heading_level(style)
                if level is not None:
                    levels[identity] = level
                listed = list_of(child(style, "pPr"))
                if listed:
                    lists[identity] = listed
    resolved: dict[str, Run] = {}
    for identity in list(runs):
        line = _line(identity, based)
        level = next((levels[one] for one in line if one in levels), None)
        if level is not None:
            levels[identity] = level
        known = [lists[one] for one in line if one in lists]
        if known:
            number = next((one for one, _ in known if one), "")
            lists[identity] = (number, known[0][1])
        merged: dict[str, str] = {}
        for one in reversed(line):
            merged |= runs.get(one, {})
        resolved[identity] = merged
    return Styles(levels, lists, {name: run for name, run in resolved.items() if run})


def list_of(properties: etree._Element | None) -> tuple[str, str] | None:
    """(number id, level) of a `pPr`, None where it says nothing of a list."""
    node = child(properties, "numPr") if properties is not None else None
    if node is None:
        return None
    number, level = child(node, "numId"), child(node, "ilvl")
    return (
        attribute(number, "val") if number is not None else "",
        attribute(level, "val") if level is not None else "",
    )


def outline_level(value: str) -> int | None:
    """Outline levels count from 0; 9 is body text."""
    return int(value) + 1 if value in "012345678" and value else None


def _line(identity: str, based: Mapping[str, str]) -> list[str]:
    """A style and those it is based on, nearest first."""
    line = [identity]
    while line[-1] in based and based[line[-1]] not in line and len(line) < _STEPS:
        line.append(based[line[-1]])
    return line


def _heading_level(style: etree._Element) -> int | None:
    properties = child(style, "pPr")
    outline = child(properties, "outlineLvl") if properties is not None else None
    if outline is not None:
        return outline_level(attribute(outline, "val"))
    name_node = child(style, "name")
    name = attribute(name_node, "val").lower() if name_node is not None else ""
    if name.startswith("heading ") and number_of(name[8:], 0):
        return number_of(name[8:], 0)
    return 1 if name == "title" else None
