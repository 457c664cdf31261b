"""Electronic submission sequences: what index.xml and the regional XML say of every file.

ICH M2 EWG, Electronic Common Technical Document Specification 3.2.2 (2008) and its DTD 3.2: a
sequence is a folder with an index.xml; each `leaf` names a file by a path relative to the XML it
stands in, with an MD5 checksum, an operation, and for operations other than *new* the leaf of an
earlier sequence that it modifies. Nothing is opened but the files that were found; a path in the
XML is only ever compared with their names.
"""

from __future__ import annotations

import hashlib
import posixpath
import re
from bisect import bisect_left
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Protocol, cast
from urllib.parse import unquote

from lxml import etree

from dossiercheck.limits import DEFAULT, Refused, decode, parse_xml
from dossiercheck.model import Place, Source, Unread

INDEX, INDEX_CHECKSUM = "index.xml", "index-md5.txt"

_SECTION = re.compile(r"m([1-5](?:-(?:\d+|[spar](?=-|$)))*)(?:-|$)")
_OUTSIDE = re.compile(r"[A-Za-z][A-Za-z0-9+.\-]*:|//?|\\\\")
# What the util folder holds beside documents: definitions and style sheets (appendix 4).
_DEFINITIONS = (".dtd", ".mod", ".ent", ".xsd", ".xsl", ".xslt", ".css", ".gif", ".svg")


class File(Protocol):
    """A file of the dossier, as far as this module needs it."""

    @property
    def source(self) -> Source:
        """Its name and hash."""

    def chunks(self) -> Iterator[bytes]:
        """Its content piece by piece."""

    def read(self) -> bytes:
        """Its content."""


@dataclass(frozen=True, slots=True)
class Leaf:
    """One leaf. `href` and `modified` are as written; `file` is the name in the dossier that
    `href` means, "" where it means none; `target` is the XML and the ID that `modified` means.
    `sequence` is the folder of its sequence, `section` the CTD section it is filed under."""

    id: str
    title: str
    section: str
    operation: str
    href: str
    file: str
    checksum: str
    checksum_type: str
    modified: str
    target: tuple[str, str]
    place: Place
    sequence: str


@dataclass(frozen=True, slots=True)
class Sequence:
    """A sequence: its folder in the dossier, its leaves in document order, the XML files they
    stand in. `index_checksum` is what index-md5.txt states, "" where there is none."""

    folder: str
    leaves: tuple[Leaf, ...]
    backbones: frozenset[str]
    index_checksum: str

    @property
    def number(self) -> str:
        """The folder's own name, by rule four digits."""
        return posixpath.basename(self.folder)

    @property
    def application(self) -> str:
        """The folder that holds the sequences of one application."""
        return posixpath.dirname(self.folder)


@dataclass(frozen=True, slots=True)
class Submission:
    """All sequences of a dossier, by their folders. `files` are the names of all files found,
    opened or not; `structure` those read here, which hold no text of the dossier; `md5` the
    checksums of the files that leaves name and of the indexes."""

    by_folder: Mapping[str, Sequence]
    files: frozenset[str]
    structure: frozenset[str]
    md5: Mapping[str, str]
    unread: tuple[Unread, ...]

    @property
    def sequences(self) -> tuple[Sequence, ...]:
        """In the order of the dossier."""
        return tuple(self.by_folder.values())

    @property
    def leaves(self) -> tuple[Leaf, ...]:
        """The leaves of all sequences."""
        return tuple(leaf for one in self.sequences for leaf in one.leaves)

    def holder(self, path: str) -> Sequence | None:
        """The sequence that a path leads into, None where it was not given."""
        if path.startswith("../"):
            return None
        inside = itself_and_above(posixpath.dirname(path))
        return next((self.by_folder[f] for f in (*inside, "") if f in self.by_folder), None)


def submission(files: Iterable[File], unopened: Iterable[str] = ()) -> Submission:
    """Read the sequences among the files; `unopened` are names of what could not be opened."""
    by_name = {file.source.path: file for file in files}
    names = sorted(by_name)
    unread: list[Unread] = []
    structure: set[str] = set()
    found = (
        _sequence(name, by_name, names, unread, structure)
        for name in by_name
        if posixpath.basename(name) == INDEX
    )
    sequences = [one for one in found if one]
    wanted = {leaf.file for one in sequences for leaf in one.leaves}
    wanted |= {f"{one.folder}/{INDEX}".lstrip("/") for one in sequences}
    md5 = {name: digest for name in sorted(wanted) if (digest := _md5(by_name.get(name)))}
    present = frozenset([*by_name, *unopened])
    by_folder = {one.folder: one for one in sequences}
    return Submission(by_folder, present, frozenset(structure), md5, tuple(unread))


def section_of(tag: str) -> str:
    """The CTD section of a heading element: m3-2-s-1-2-structure is 3.2.S.1.2; "" for others."""
    match = _SECTION.match(tag)
    return match[1].replace("-", ".").upper() if match else ""


def resolve(base: str, written: str) -> str:
    """The name in the dossier that a path means, relative to the folder of the file `base`.

    "" for no path, an address and an absolute path; one that climbs out of the dossier begins
    with "../", as no file found does.
    """
    path = written.partition("#")[0].strip()
    if not path or _OUTSIDE.match(path) or "\0" in path:
        return ""
    return posixpath.normpath(posixpath.join(posixpath.dirname(base), path))


def itself_and_above(name: str) -> Iterator[str]:
    """A file's name and the folders it lies in: a member of an archive goes with the archive."""
    while name:
        yield name
        name = posixpath.dirname(name)


def _below(names: list[str], folder: str) -> list[str]:
    """The names, which are sorted, that begin with a folder's."""
    return names[bisect_left(names, folder) : bisect_left(names, f"{folder}\U0010ffff")]


def _sequence(
    index: str,
    files: Mapping[str, File],
    names: list[str],
    unread: list[Unread],
    structure: set[str],
) -> Sequence | None:
    folder = posixpath.dirname(index)
    beside = f"{folder}/" if folder else ""
    likely = f"{beside}{INDEX_CHECKSUM}" in files or any(
        _below(names, f"{beside}m{number}/") for number in range(1, 6)
    )
    try:
        root = _root(files[index])
    except Refused as refused:
        if likely:
            detail = f"{refused.detail} The sequence is not held against it."
            unread.append(Unread(Place(index), refused.reason, detail))
            structure.add(index)
        return None
    if etree.QName(root).localname != "ectd":
        return None
    structure.add(index)
    backbones = {index}
    leaves = list(_leaves(root, index, folder, files))
    for name in dict.fromkeys(leaf.file for leaf in leaves if leaf.file.endswith(".xml")):
        regional = name.startswith(f"{beside}m1/")
        if name not in files or not (regional or posixpath.basename(name).startswith("stf-")):
            continue
        try:
            inner = _root(files[name])
        except Refused as refused:
            unread.append(Unread(Place(name), refused.reason, refused.detail))
            structure.add(name)
            continue
        if etree.QName(inner).localname == "study" and not regional:
            structure.add(name)  # study tagging: says of leaves what kind of report they are
        elif regional and _has_leaves(inner):
            structure.add(name)
            backbones.add(name)
            leaves += _leaves(inner, name, folder, files)
    stated = ""
    if f"{beside}{INDEX_CHECKSUM}" in files:
        structure.add(f"{beside}{INDEX_CHECKSUM}")
        stated = _stated(files[f"{beside}{INDEX_CHECKSUM}"], unread)
    util = _below(names, f"{beside}util/")
    structure |= {name for name in util if name.lower().endswith(_DEFINITIONS)}
    return Sequence(folder, tuple(leaves), frozenset(backbones), stated)


def _root(file: File) -> etree._Element:
    if file.source.size > DEFAULT.member_bytes:
        raise Refused("size-budget", f"The XML has {file.source.size} bytes.")
    try:
        return parse_xml(file.read(), doctype=True)
    except OSError as error:
        raise Refused("cannot-open", error.strerror or str(error)) from error


def _has_leaves(root: etree._Element) -> bool:
    return any(_name(key) == "href" for node in root.iter("{*}leaf") for key, _ in node.items())


def _name(key: object) -> str:
    return str(key).rpartition("}")[2]


def _leaves(
    root: etree._Element, xml: str, sequence: str, files: Mapping[str, File]
) -> Iterator[Leaf]:
    for node in root.iter("{*}leaf"):
        said = {_name(key): str(value).strip() for key, value in node.items()}
        title = node.find("{*}title")
        above = (etree.QName(parent).localname for parent in node.iterancestors())
        href, modified = said.get("href", ""), said.get("modified-file", "")
        yield Leaf(
            id=said.get("ID", ""),
            title="" if title is None else " ".join("".join(map(str, title.itertext())).split()),
            section=next(filter(None, map(section_of, above)), ""),
            operation=said.get("operation", ""),
            href=href,
            file=_meant(xml, href, files),
            checksum=said.get("checksum", ""),
            checksum_type=said.get("checksum-type", ""),
            modified=modified,
            target=(_meant(xml, modified, files), modified.partition("#")[2]),
            place=Place(xml, line=cast("int | None", node.sourceline)),
            sequence=sequence,
        )


def _meant(xml: str, written: str, files: Mapping[str, File]) -> str:
    """As written where there is such a file, else with %20 and the like as the characters."""
    plain = resolve(xml, written)
    return plain if plain in files or "%" not in written else resolve(xml, unquote(written))


def _stated(file: File, unread: list[Unread]) -> str:
    try:
        words = decode(file.read() if file.source.size < 10_000 else b"")[0].split()
    except (Refused, OSError):
        words = []
    found = next((word for word in words if re.fullmatch(r"[0-9A-Fa-f]{32}", word)), "")
    if not found:
        detail = "The file states no MD5 checksum, so the index cannot be held against it."
        unread.append(Unread(Place(file.source.path), "no-checksum", detail))
    return found


def _md5(file: File | None) -> str:
    """Of the content, "" where it does not open: then it is listed as unread elsewhere."""
    if file is None:
        return ""
    digest = hashlib.md5(usedforsecurity=False)
    try:
        for piece in file.chunks():
            digest.update(piece)
    except (Refused, OSError):
        return ""
    return digest.hexdigest()
