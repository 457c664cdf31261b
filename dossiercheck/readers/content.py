"""What a file is by its first bytes, and the guard that stands before every reader."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import wraps

from dossiercheck.limits import DEFAULT, Refused
from dossiercheck.model import Item, Place, Source, Unread

Read = Callable[[Source, bytes], Iterator[Item]]

_MAGIC = (
    (b"%PDF-", "a PDF document"),
    (b"PK\x03\x04", "a zip archive"),
    (b"PK\x05\x06", "a zip archive"),
    (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", "an OLE compound file"),
    (b"\x89PNG\r\n", "a PNG picture"),
    (b"\xff\xd8\xff", "a JPEG picture"),
    (b"GIF8", "a GIF picture"),
    (b"II*\0", "a TIFF picture"),
    (b"MM\0*", "a TIFF picture"),
    (b"\x1f\x8b", "a gzip file"),
    (b"7z\xbc\xaf", "a 7z archive"),
    (b"Rar!", "a RAR archive"),
    (b"{\\rtf", "a rich text file"),
)


def recognise(head: bytes) -> str:
    """What `head`, the first bytes of a file, says it is; "" when nothing tells (text, say)."""
    for magic, what in _MAGIC:
        if head.startswith(magic):
            return what
    return ""


def whole(source: Source, reason: str, detail: str) -> Unread:
    """The source as a whole is unread."""
    return Unread(Place(source.path), reason, detail)


def guarded(*expected: str) -> Callable[[Read], Read]:
    """Decorate a reader: empty, oversized and mislabelled files, and whatever is `Refused` on
    the way, come out as unread. `expected` are the answers of `recognise` the reader can take.
    """

    def wrap(inner: Read) -> Read:
        @wraps(inner)
        def read(source: Source, data: bytes) -> Iterator[Item]:
            if not data:
                yield whole(source, "empty", "The file has no content.")
                return
            if len(data) > DEFAULT.source_bytes:
                yield whole(source, "size-budget", f"The file has {len(data)} bytes.")
                return
            found = recognise(data)
            if found not in expected:
                yield whole(source, "content-mismatch", _mismatch(source, found))
                return
            try:
                yield from inner(source, data)
            except Refused as refused:
                yield whole(source, refused.reason, refused.detail)

        return read

    return wrap


def _mismatch(source: Source, found: str) -> str:
    suffix = source.path.rpartition(".")[2]
    return f"The content is {found or 'of an unknown kind'}, which does not match .{suffix}."
