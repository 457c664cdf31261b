"""XML files: which format a document is by its root element, and on to the module that knows it.

The suffix is shared by many formats, so the root's namespace and local name decide. `ROOTS` holds
the formats; of a root that stands in no row of it the words are read and the meaning is not.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from types import MappingProxyType

from lxml import etree

from dossiercheck.limits import DEFAULT, Refused, parse_xml
from dossiercheck.model import Item, Source
from dossiercheck.readers import fhir, html, spl, svgtext, xmltext
from dossiercheck.readers.content import guarded
from dossiercheck.readers.fhirnode import FHIR
from dossiercheck.readers.splbody import HL7

SUFFIXES = frozenset({".xml"})

FromRoot = Callable[[Source, etree._Element], Iterator[Item]]

# (namespace, local name) of the root -> the function that reads the document under it. A row
# with "" for the local name answers for every root of its namespace that has no row of its own.
ROOTS: Mapping[tuple[str, str], FromRoot] = MappingProxyType(
    {
        (FHIR, ""): fhir.read_root,
        (HL7, "document"): spl.read_root,
        (html.XHTML, "html"): html.read_root,
        (svgtext.SVG, "svg"): svgtext.read_root,
    }
)


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield what the format's own module finds; an unknown root is said to be ("no-reader")."""
    if len(data) > DEFAULT.member_bytes:
        raise Refused("size-budget", f"The XML has {len(data)} bytes.")
    root = parse_xml(data, doctype=True)
    name = etree.QName(root)
    space = name.namespace or ""
    reader = ROOTS.get((space, name.localname)) or ROOTS.get((space, "")) or xmltext.read_root
    yield from reader(source, root)
