"""What is set into Word text and is no text: pictures, drawing objects, shapes, equations.

Each is listed with what the document says of it; the text inside text boxes is handed on.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.readers.package import Relation, attribute, local

OBJECTS = frozenset({"object", "drawing", "pict", "contentPart", "oMath"})

_PICTURES = {
    "pic": "A picture",
    "imagedata": "A picture",
    "chart": "A chart",
    "relIds": "A diagram",
    "lockedCanvas": "A locked drawing",
    "contentPart": "A drawing in ink",
    "control": "A control",
    "textpath": "Text drawn as a shape",
}
_SHAPES = {"wsp", "cxnSp", "shape", "line", "polyline", "rect", "roundrect", "oval", "arc", "curve"}
# Programs of an office suite, by the beginning of the class that an object names.
_OFFICE = ("excel.", "word.", "powerpoint.", "package", "acroexch.")
_RELATED = ("embed", "link", "id", "pict", "dm")
_OFFICE_NAMESPACE = "/relationships}"


@dataclass(frozen=True, slots=True)
class Examined:
    """`unread` as (reason, detail, text); `boxes` the outermost text boxes' contents; `parts`
    the names of the package parts shown."""

    unread: list[tuple[str, str, str]] = field(default_factory=list)
    boxes: list[etree._Element] = field(default_factory=list)
    parts: list[str] = field(default_factory=list)


def examine(node: etree._Element, name: str, relations: Mapping[str, Relation]) -> Examined:
    """What an element of one of the names in `OBJECTS` holds."""
    found = Examined()
    if name == "oMath":
        text = "".join(one.text or "" for one in node.iter() if local(one) == "t")
        found.unread.append(("equation", "An equation, which is not read.", text))
        return found
    inner = list(_reach(node))
    found.boxes.extend(one for one in inner if local(one) == "txbxContent")
    classes = [attribute(one, "ProgID") for one in inner if local(one) == "OLEObject"]
    told = _description(inner)
    targets = [relations[one] for one in _related(inner) if one in relations]
    found.parts.extend(target.target for target in targets)
    where = _of(targets)
    if name == "object" or classes:
        found.unread.append((*_embedded(classes, where), told))
    else:
        pictures = [one for one in inner if local(one) in _PICTURES]
        for one in pictures:
            own = [relations[key] for key in _related(_below(one)) if key in relations]
            detail = f"{_PICTURES[local(one)]}{_of(own)}, which is not read."
            text = attribute(one, "string") or _drawn_text(one) or told
            found.unread.append(("picture", detail, text))
        bare = [one for one in inner if local(one) in _SHAPES and not _holds(one)]
        if not pictures and not _is_rule(inner) and (bare or not found.boxes):
            found.unread.append(("picture", "Shapes drawn in place, which are not read.", told))
    found.unread.extend(
        ("external-part", f"The document points to {one.target}, which is not fetched.", "")
        for one in targets
        if one.external and one.kind != "hyperlink"
    )
    return found


def _reach(node: etree._Element) -> Iterator[etree._Element]:
    """The elements below, without the second form of what is given in two, and without the
    content of text boxes, which is text and has its own turn."""
    for one in node:
        name = local(one)
        if name == "Fallback" and any(local(other) == "Choice" for other in node):
            continue
        yield one
        if name not in ("txbxContent", "shapetype", "lockedCanvas"):
            yield from _reach(one)


def _below(node: etree._Element) -> Iterator[etree._Element]:
    yield node
    yield from _reach(node)


def _related(elements: Iterator[etree._Element] | list[etree._Element]) -> list[str]:
    """Relationship ids that the elements name, each once."""
    found: dict[str, None] = {}
    for one in elements:
        for key, value in one.attrib.items():
            space, _, name = str(key).rpartition("}")
            if f"{space}}}".endswith(_OFFICE_NAMESPACE) and name in _RELATED:
                found[str(value)] = None
    return list(found)


def _of(targets: list[Relation]) -> str:
    names = ", ".join(dict.fromkeys(one.target for one in targets if not one.external))
    return f" ({names})" if names else ""


def _embedded(classes: list[str], where: str) -> tuple[str, str]:
    shown = classes[0].lower() if classes else ""
    if shown.startswith("equation"):
        return "equation", f"An equation{where}, which is not read."
    if shown.startswith(_OFFICE):
        return "embedded-document", f"An embedded document{where}, which is not read."
    return "drawing-object", f"An embedded drawing object{where}, which is not read."


def _description(inner: list[etree._Element]) -> str:
    """The alternative text, as far as it was written for a reader."""
    told = [attribute(one, "descr") for one in inner if local(one) in ("docPr", "cNvPr")]
    told += [attribute(one, "alt") for one in inner if local(one) in _SHAPES]
    return next((text.strip() for text in told if text.strip()), "")


def _drawn_text(node: etree._Element) -> str:
    if local(node) != "lockedCanvas":
        return ""
    return " ".join(one.text or "" for one in node.iter() if local(one) == "t")


def _holds(shape: etree._Element) -> bool:
    """True for a shape that is the frame of text or of a picture."""
    return any(local(one) in ("txbxContent", *_PICTURES) for one in _reach(shape))


def _is_rule(inner: list[etree._Element]) -> bool:
    """True for the horizontal line that parts text."""
    return any(attribute(one, "hr") in ("t", "true", "1") for one in inner)
