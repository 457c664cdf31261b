"""Budgets, and the guarded opening of text, zip archives and XML.

Nothing that a dossier contains may read other files, reach the network, or use memory or time
without bound. What does not pass is `Refused`, with a reason that a reader turns into *unread*.
"""

from __future__ import annotations

import io
import re
import zipfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass

from lxml import etree


class Refused(Exception):
    """Content that is not opened. `reason` is a short slug, `detail` a sentence."""

    def __init__(self, reason: str, detail: str) -> None:
        """Keep both parts; the message is the sentence."""
        super().__init__(detail)
        self.reason = reason
        self.detail = detail


@dataclass(frozen=True, slots=True)
class Limits:
    """Budgets of one source. Bytes are inflated bytes; `ratio` is inflated over stored.

    The last four are of an archive of sources, with all the archives in it: how deep one may lie
    in another, how many members, and what they may come to.
    """

    source_bytes: int = 1 << 30
    member_bytes: int = 256 << 20
    archive_bytes: int = 1 << 30
    ratio: int = 200
    members: int = 20_000
    record_chars: int = 20_000_000
    line_chars: int = 100_000
    rows: int = 200_000
    columns: int = 512
    cells: int = 4_000_000
    depth: int = 5
    entries: int = 100_000
    unpacked_bytes: int = 64 << 30
    unpacked_floor: int = 256 << 20


DEFAULT = Limits()

# Below this many inflated bytes a high ratio harms nobody: small parts full of repeats are normal.
RATIO_FLOOR = 1 << 20
_CHUNK = 1 << 16


# --- text ----------------------------------------------------------------------------------

_BOMS = (
    (b"\xef\xbb\xbf", "utf-8-sig"),
    (b"\xff\xfe\x00\x00", "utf-32"),
    (b"\x00\x00\xfe\xff", "utf-32"),
    (b"\xff\xfe", "utf-16"),
    (b"\xfe\xff", "utf-16"),
)
_CONTROL = bytes(n for n in range(32) if n not in b"\t\n\v\f\r\x1a\x1b")


def decode(data: bytes) -> tuple[str, str]:
    """Text of `data` and the encoding it was read in.

    A byte-order mark decides; without one UTF-8 is tried, UTF-16 where every other byte is NUL,
    and then Windows-1252. Raises `Refused`: "binary" for NUL bytes or many control characters,
    "encoding" where the bytes fit none of these.
    """
    for mark, encoding in _BOMS:
        if data.startswith(mark):
            return _strictly(data, encoding)
    if b"\0" in data:
        encoding = _utf16_without_mark(data)
        if not encoding:
            raise Refused("binary", "The content has NUL bytes and is not UTF-16 text.")
        return _strictly(data, encoding)
    head = data[:_CHUNK]
    if len(head) - len(head.translate(None, _CONTROL)) > len(head) // 100:
        raise Refused("binary", "The content has many control characters and is not text.")
    try:
        return data.decode("utf-8"), "utf-8"
    except UnicodeDecodeError:
        return _strictly(data, "cp1252")


def _strictly(data: bytes, encoding: str) -> tuple[str, str]:
    try:
        text = data.decode(encoding)
    except UnicodeDecodeError as error:
        raise Refused(
            "encoding", f"Byte {error.start + 1} is not valid in {encoding}: no text was read."
        ) from error
    if "\0" in text:
        raise Refused("binary", "The content has NUL characters.")
    return text, encoding.removesuffix("-sig")


def _utf16_without_mark(data: bytes) -> str:
    head = data[: _CHUNK & ~1]
    if len(data) % 2:
        return ""
    even, odd = head[0::2].count(0), head[1::2].count(0)
    half = len(head) // 2
    if odd > half * 0.6 and even == 0:
        return "utf-16-le"
    return "utf-16-be" if even > half * 0.6 and odd == 0 else ""


def unify_line_ends(text: str) -> str:
    """`text` with every line end (CR LF, CR, LF) as LF."""
    return text.replace("\r\n", "\n").replace("\r", "\n") if "\r" in text else text


# --- zip -----------------------------------------------------------------------------------


# ValueError: an offset that lies before the file. RuntimeError: a local header that says encrypted.
_DAMAGE = (
    zipfile.BadZipFile,
    zlib.error,
    EOFError,
    NotImplementedError,
    OSError,
    ValueError,
    RuntimeError,
)


class Archive:
    """A zip archive whose directory has passed the guards; members are read within budget."""

    def __init__(self, archive: zipfile.ZipFile, limits: Limits) -> None:
        """Use `open_zip` instead."""
        self._zip = archive
        self._limits = limits
        self._spent = 0
        self.names = tuple(info.filename for info in archive.infolist())

    def __contains__(self, name: str) -> bool:
        """True when there is a member of exactly that name."""
        return name in self.names

    def read(self, name: str) -> bytes:
        """Inflated bytes of a member; raises `Refused` past a budget or where it is damaged."""
        return b"".join(self.chunks(name))

    def chunks(self, name: str) -> Iterator[bytes]:
        """A member piece by piece, counted as it inflates: a directory may lie about sizes."""
        try:
            info = self._zip.getinfo(name)
        except KeyError:
            raise Refused("missing-part", f"The archive has no part {name}.") from None
        taken = 0
        try:
            with self._zip.open(info) as member:
                while piece := member.read(_CHUNK):
                    taken += len(piece)
                    self._spent += len(piece)
                    self._weigh(name, taken, info.compress_size)
                    yield piece
        except _DAMAGE as error:
            raise Refused("damaged-archive", f"Part {name} does not unpack: {error}.") from error

    def _weigh(self, name: str, taken: int, stored: int) -> None:
        if taken > self._limits.member_bytes or self._spent > self._limits.archive_bytes:
            raise Refused("size-budget", f"Part {name} inflates past the size budget.")
        if taken > RATIO_FLOOR and taken > self._limits.ratio * max(stored, 1):
            raise Refused("inflation-ratio", f"Part {name} inflates far beyond its stored size.")


def open_zip(data: bytes, limits: Limits = DEFAULT) -> Archive:
    """Open an archive held in memory.

    Raises `Refused`: "damaged-archive", "duplicate-part" (programs differ on which of two equal
    names they read; names that differ only in case count as equal), "encrypted", "unsafe-path",
    "too-many-parts", "size-budget", "inflation-ratio".
    """
    try:
        archive = zipfile.ZipFile(io.BytesIO(data))
    except (zipfile.BadZipFile, ValueError, OSError, EOFError, NotImplementedError) as error:
        raise Refused("damaged-archive", f"The archive does not open: {error}.") from error
    infos = archive.infolist()
    if len(infos) > limits.members:
        raise Refused("too-many-parts", f"The archive lists {len(infos)} parts.")
    seen: set[str] = set()
    total = 0
    for info in infos:
        name = info.filename
        if name.casefold() in seen:
            raise Refused("duplicate-part", f"The archive holds {name} more than once.")
        seen.add(name.casefold())
        if info.flag_bits & 0x1:
            raise Refused("encrypted", f"Part {name} of the archive is encrypted.")
        if leaves_the_archive(info.orig_filename):
            raise Refused("unsafe-path", f"Part {name} has a path that leaves the archive.")
        total += info.file_size
        if info.file_size > limits.member_bytes or total > limits.archive_bytes:
            raise Refused("size-budget", f"Part {name} inflates past the size budget.")
        if info.file_size > max(RATIO_FLOOR, limits.ratio * max(info.compress_size, 1)):
            raise Refused("inflation-ratio", f"Part {name} inflates far beyond its stored size.")
    return Archive(archive, limits)


def leaves_the_archive(name: str) -> bool:
    """True for a path in an archive that is absolute, climbs out, or hides an end in itself."""
    unified = name.replace("\\", "/")
    return (
        "\0" in name
        or unified.startswith("/")
        or re.match(r"[A-Za-z]:", unified) is not None
        or ".." in unified.split("/")
    )


# --- XML -----------------------------------------------------------------------------------

_DECLARED = re.compile(rb"""^\s*<\?xml[^>]*?encoding\s*=\s*["']([A-Za-z0-9._\-]+)["']""")
# A reference that is none of the five known ones; comments and CDATA sections are stepped over,
# one that is not closed to the end, so that the search goes over the bytes once.
_REFERENCE = re.compile(
    rb"<!--.*?(?:-->|\Z)|<!\[CDATA\[.*?(?:\]\]>|\Z)"
    rb"|&(?!#|(?:amp|lt|gt|quot|apos);)([^\s&;<>]{1,80});",
    re.DOTALL,
)
_ENCODINGS = {"utf-8", "utf8", "utf-16", "us-ascii", "ascii", "iso-8859-1", "windows-1252"}


def parse_xml(data: bytes, *, doctype: bool = False) -> etree._Element:
    """The root element of a document, read without entities, DTD or network.

    `doctype=False` refuses any DOCTYPE (office documents may not have one: ECMA-376 part 2);
    with True one without entity declarations passes. Raises `Refused`: "entities", "doctype",
    "encoding", "damaged-xml".
    """
    vet_xml(data, doctype=doctype)
    parser = etree.XMLParser(
        resolve_entities=False, no_network=True, load_dtd=False, huge_tree=False, remove_pis=True
    )
    try:
        return etree.fromstring(data, parser)
    except (etree.XMLSyntaxError, ValueError) as error:
        raise Refused("damaged-xml", f"The XML does not parse: {error}.") from error


def iterate_xml(data: bytes, tags: tuple[str, ...]) -> Iterator[etree._Element]:
    """Each element of one of the `tags` (local names) as it ends, for documents too long to hold.

    Same guards as `parse_xml` with `doctype=False`. An element is emptied after its turn.
    """
    vet_xml(data)
    wanted = tuple("{*}" + tag for tag in tags)
    events = etree.iterparse(
        io.BytesIO(data),
        events=("end",),
        tag=wanted,
        resolve_entities=False,
        no_network=True,
        load_dtd=False,
        huge_tree=False,
        remove_pis=True,
        remove_comments=True,
    )
    try:
        for _, element in events:
            yield element
            element.clear()
            while element.getprevious() is not None:
                parent = element.getparent()
                if parent is None:
                    break
                del parent[0]
    except (etree.XMLSyntaxError, ValueError) as error:
        raise Refused("damaged-xml", f"The XML does not parse: {error}.") from error


def vet_xml(data: bytes, *, doctype: bool = False) -> None:
    """Raise `Refused` before any parser sees declared entities.

    Parsers expand entities in attribute values whatever they are told, so the bytes are looked
    at first; that is only sure in encodings where the mark-up is recognisable, hence their list.
    """
    wide = data.startswith((b"\xff\xfe", b"\xfe\xff", b"<\0", b"\0<"))
    plain = data.replace(b"\0", b"") if wide else data
    declared = _DECLARED.match(plain.removeprefix(b"\xef\xbb\xbf").lstrip(b"\xff\xfe"))
    if declared and declared[1].decode().lower() not in _ENCODINGS:
        raise Refused("encoding", f"XML in encoding {declared[1].decode()} is not read.")
    if b"\0" in data and not wide:
        raise Refused("binary", "The XML has NUL bytes.")
    if b"<!ENTITY" in plain:
        raise Refused("entities", "The XML declares entities.")
    if b"<!DOCTYPE" not in plain:
        return
    if not doctype:
        raise Refused("doctype", "The XML has a document type declaration.")
    # What such a name stands for is written in a file that is not loaded, and a parser that was
    # told so drops the name, or in places all that follows it, without a word.
    named = next((one[1] for one in _REFERENCE.finditer(plain) if one[1]), None)
    if named:
        name = named.decode("utf-8", "replace")
        raise Refused("entities", f"The XML uses the entity {name}, which it does not declare.")
