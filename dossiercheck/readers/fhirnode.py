"""FHIR content as one kind of tree, whether it came as JSON or as XML.

The two forms carry the same elements (HL7 FHIR R5, sections 2.1.6.1 and 2.1.6.2): in XML the value
of a primitive is the attribute `value` and what repeats is repeated; in JSON a primitive is a
value and what repeats is an array. A node has its own path in the form that the source has.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from typing import Any

from lxml import etree

from dossiercheck.limits import Refused
from dossiercheck.readers.xmlpath import path_of

FHIR = "http://hl7.org/fhir"


@dataclass(frozen=True, slots=True)
class Node:
    """An element. `text` is the value of a primitive, "" where it has none; `type` the name of a
    resource where the element is one."""

    path: str
    text: str = ""
    kids: Mapping[str, tuple[Node, ...]] = field(default_factory=dict)
    type: str = ""

    def all(self, name: str) -> tuple[Node, ...]:
        """The elements of that name, in order."""
        return self.kids.get(name, ())

    def value(self, name: str) -> str:
        """The value of the first element of that name, "" where there is none."""
        return next((kid.text for kid in self.all(name)), "")

    def resources(self) -> Iterator[Node]:
        """The resource and those it contains or bundles, in order."""
        if self.type:
            yield self
        for name, kids in self.kids.items():
            for kid in kids:
                # In XML a resource is an element inside the element that holds it.
                if kid.type or name in ("contained", "resource", "entry"):
                    yield from kid.resources()


def from_json(value: Any, path: str) -> Node:
    """The tree of a JSON value; raises `Refused` for an array inside an array."""
    if isinstance(value, dict):
        kids = {
            name: _listed(inner, f"{path}.{name}")
            for name, inner in value.items()
            if name != "resourceType"
        }
        kind = value.get("resourceType", "")
        return Node(path, kids=kids, type=kind if isinstance(kind, str) else "")
    if isinstance(value, list):
        raise Refused("unexpected-value", f"There is an array inside an array at {path}.")
    if isinstance(value, bool):
        return Node(path, "true" if value else "false")
    return Node(path, value if isinstance(value, str) else "")


def _listed(value: Any, path: str) -> tuple[Node, ...]:
    if isinstance(value, list):
        return tuple(from_json(one, f"{path}[{n}]") for n, one in enumerate(value))
    return () if value is None else (from_json(value, path),)


def from_xml(element: etree._Element, path: str = "") -> Node:
    """The tree of an element of the FHIR namespace; narrative in other namespaces is left out."""
    path = path or path_of(element)
    kids: dict[str, list[Node]] = {}
    named: dict[str, list[etree._Element]] = {}
    for inner in element.iterchildren(f"{{{FHIR}}}*"):
        named.setdefault(etree.QName(inner).localname, []).append(inner)
    for name, alike in named.items():
        for number, inner in enumerate(alike, 1):
            where = f"{path}/{name}[{number}]" if len(alike) > 1 else f"{path}/{name}"
            kids.setdefault(name, []).append(from_xml(inner, where))
    name = etree.QName(element).localname
    return Node(
        path,
        element.get("value") or "",
        {name: tuple(nodes) for name, nodes in kids.items()},
        # Only the names of resources begin with a capital letter.
        name if name[0].isupper() else "",
    )
