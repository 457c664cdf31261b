"""Where an element stands in an XML document."""

from __future__ import annotations

from lxml import etree


def path_of(element: etree._Element, within: etree._Element | None = None, base: str = "") -> str:
    """Where an element stands, as an XPath of local names with 1-based positions where an
    element has siblings of its name: "/document/component[2]/section".

    With `within`, an element above it, the path goes on from that element's own path `base`; a
    caller with many elements so avoids counting the same siblings again.
    """
    parts: list[str] = []
    at: etree._Element | None = element
    while at is not None and at is not within:
        above = at.getparent()
        name = etree.QName(at).localname
        alike = [] if above is None else [*above.iterchildren(at.tag)]
        parts.append(f"{name}[{alike.index(at) + 1}]" if len(alike) > 1 else name)
        at = above
    return "/".join([base, *reversed(parts)])
