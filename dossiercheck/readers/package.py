"""Office packages (ECMA-376 part 2): parts in a zip archive, found through relationships."""

from __future__ import annotations

import posixpath
from dataclasses import dataclass

from lxml import etree

from dossiercheck.limits import DEFAULT, Archive, Limits, Refused, open_zip, parse_xml
from dossiercheck.model import Source, Unread
from dossiercheck.readers.content import recognise, whole

OLE = "an OLE compound file"
ZIP = "a zip archive"


@dataclass(frozen=True, slots=True)
class Relation:
    """One relationship: `kind` is the last word of its type; an external one has no part here."""

    id: str
    kind: str
    target: str
    external: bool


def local(element: etree._Element) -> str:
    """An element's name without its namespace ("" for comments): both editions of the standard
    use the same names in different namespaces."""
    tag = element.tag
    return tag.rpartition("}")[2] if isinstance(tag, str) else ""


def attribute(element: etree._Element, name: str, default: str = "") -> str:
    """An attribute by its local name."""
    for key, value in element.attrib.items():
        if str(key).rpartition("}")[2] == name:
            return str(value)
    return default


def child(element: etree._Element, name: str) -> etree._Element | None:
    """The first child of that local name."""
    return next((node for node in element if local(node) == name), None)


def legacy(source: Source, data: bytes, kind: str) -> Unread | None:
    """Why an OLE compound file is not read: it is an encrypted package, or the old binary format.

    None when `data` is no OLE file.
    """
    if recognise(data) != OLE:
        return None
    if "EncryptedPackage".encode("utf-16-le") in data:
        return whole(source, "encrypted", f"The {kind} is encrypted with a password.")
    detail = f"The {kind} is in the old binary format, which is not read."
    return whole(source, "unsupported-format", detail)


def open_package(data: bytes, limits: Limits = DEFAULT) -> Archive:
    """The package as an archive. Raises `Refused`, also where it is no office package."""
    archive = open_zip(data, limits)
    if "[Content_Types].xml" not in archive:
        raise Refused("content-mismatch", "The zip archive is not an office document.")
    return archive


def main_part(archive: Archive, expected: str) -> str:
    """Name of the part that holds the document; `expected` is its usual name's stem, such as
    "workbook". Raises `Refused` where the package holds another kind of document."""
    mains = [one for one in relations(archive, "") if one.kind == "officeDocument"]
    if len(mains) > 1:
        raise Refused("duplicate-part", "The package names more than one part as its document.")
    for relation in mains:
        if not relation.external:
            if posixpath.splitext(relation.target)[1] != ".xml":
                raise Refused("unsupported-format", f"The part {relation.target} is not XML.")
            root = local(parse_xml(archive.read(relation.target)))
            if root != expected:
                raise Refused("content-mismatch", f"The package holds a {root}, not a {expected}.")
            return relation.target
    raise Refused("missing-part", "The package does not say which part is its document.")


def relations(archive: Archive, part: str) -> tuple[Relation, ...]:
    """Relationships of a part ("" for the package), in the order written.

    Raises `Refused`, also where one id is given twice: programs differ on which one they follow.
    """
    folder, name = posixpath.split(part)
    path = posixpath.join(folder, "_rels", name + ".rels")
    if path not in archive:
        return ()
    found: list[Relation] = []
    for node in parse_xml(archive.read(path)):
        if local(node) != "Relationship":
            continue
        external = attribute(node, "TargetMode") == "External"
        target = attribute(node, "Target")
        if not external:
            target = posixpath.normpath(posixpath.join("/", folder, target)).lstrip("/")
        kind = attribute(node, "Type").rpartition("/")[2]
        if any(known.id == attribute(node, "Id") for known in found):
            detail = f"{path} gives the relationship {attribute(node, 'Id')} twice."
            raise Refused("duplicate-part", detail)
        found.append(Relation(attribute(node, "Id"), kind, target, external))
    return tuple(found)
