"""SVG files."""

from __future__ import annotations

from collections.abc import Iterator

from lxml import etree

from dossiercheck.limits import Refused, parse_xml
from dossiercheck.model import Item, Source
from dossiercheck.readers.content import guarded
from dossiercheck.readers.html import LONGEST
from dossiercheck.readers.svgtext import read_root

SUFFIXES = frozenset({".svg"})


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield the words of the drawing as passages, and the drawing itself as unread."""
    if len(data) > LONGEST:
        raise Refused("size-budget", f"The drawing has {len(data)} bytes.")
    root = parse_xml(data, doctype=True)
    if etree.QName(root).localname != "svg":
        raise Refused("content-mismatch", "The XML is no SVG drawing.")
    yield from read_root(source, root)
