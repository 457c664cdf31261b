"""XML files: which format a document is by its root element, and on to the module that knows it.

The suffix is shared by many formats, so the root's namespace and local name decide. `ROOTS` holds
the formats; a root that stands in no row of it is unread, never guessed at.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from types import MappingProxyType

from lxml import etree

from dossiercheck.limits import DEFAULT, Refused, parse_xml
from dossiercheck.model import Item, Source
from dossiercheck.readers.content import guarded

SUFFIXES = frozenset({".xml"})

FromRoot = Callable[[Source, etree._Element], Iterator[Item]]

# (namespace, local name) of the root -> the function that reads the document under it. A row
# with "" for the local name answers for every root of its namespace that has no row of its own.
ROOTS: Mapping[tuple[str, str], FromRoot] = MappingProxyType({})


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield what the format's own module finds; an unknown root is `Refused` ("no-reader")."""
    if len(data) > DEFAULT.member_bytes:
        raise Refused("size-budget", f"The XML has {len(data)} bytes.")
    root = parse_xml(data, doctype=True)
    name = etree.QName(root)
    space = name.namespace or ""
    reader = ROOTS.get((space, name.localname)) or ROOTS.get((space, ""))
    if reader is None:
        where = f" in the namespace {space}" if space else ""
        raise Refused("no-reader", f"No reader for XML with the root {name.localname}{where}.")
    yield from reader(source, root)


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
