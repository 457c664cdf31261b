"""The archives that are open now: a member is reached without unpacking what stands beside it.

A dossier is walked depth first, and so only the archive of the present member and those around
it are kept open. An archive that lies in another, or is compressed as a whole, is laid into an
unnamed temporary file; memory holds one piece at a time.
"""

from __future__ import annotations

import bz2
import gzip
import lzma
import tempfile
import zlib
from collections.abc import Iterator
from contextlib import ExitStack
from pathlib import Path
from typing import IO, Self, cast

from dossiercheck.archives import CHUNK, Container, TarFolder, ZipFolder
from dossiercheck.limits import DEFAULT, Limits, Refused
from dossiercheck.readers.content import recognise

_XZ_MEMORY = 128 << 20  # twice what the strongest usual setting of xz needs to decompress
_ENDINGS = {
    ".zip": "zip",
    ".tar": "tar",
    ".tar.gz": "gz",
    ".tgz": "gz",
    ".tar.bz2": "bz2",
    ".tbz2": "bz2",
    ".tar.xz": "xz",
    ".txz": "xz",
}
_MAGIC = {"zip": b"PK", "gz": b"\x1f\x8b", "bz2": b"BZh", "xz": b"\xfd7zXZ\0"}


def archive_kind(name: str) -> str:
    """How an archive of that file name is opened, "" for what is no archive of sources."""
    lower = name.lower()
    return next((kind for ending, kind in _ENDINGS.items() if lower.endswith(ending)), "")


class Shelf:
    """Opens archives and their members; a context manager that closes them.

    A member is known by the file on disk and the names that lead to it, outermost first.
    """

    def __init__(self, limits: Limits = DEFAULT) -> None:
        self.limits = limits
        self._open: list[tuple[tuple[Path, tuple[str, ...]], Container, ExitStack]] = []

    def __reduce__(self) -> tuple[type[Shelf], tuple[Limits]]:
        """Another process opens its own."""
        return Shelf, (self.limits,)

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *trouble: object) -> None:
        self.close()

    def close(self) -> None:
        """Close all that is open; it opens again when asked for."""
        self._keep(0)

    def chunks(self, path: Path, inside: tuple[str, ...]) -> Iterator[bytes]:
        """The bytes of a file, or of the member that `inside` leads to, piece by piece.

        Raises `Refused` and OSError.
        """
        if inside:
            yield from self.container(path, inside[:-1]).chunks(inside[-1])
            return
        with path.open("rb") as stream:
            while piece := stream.read(CHUNK):
                yield piece

    def container(self, path: Path, inside: tuple[str, ...]) -> Container:
        """The archive that `inside` leads to, `()` for the file itself.

        Raises `Refused` and OSError.
        """
        for depth in range(len(inside) + 1):
            key = (path, inside[:depth])
            if depth < len(self._open) and self._open[depth][0] == key:
                continue
            self._keep(depth)
            with ExitStack() as stack:
                container = self._opened(path, inside[:depth], stack)
                self._open.append((key, container, stack.pop_all()))
        self._keep(len(inside) + 1)
        return self._open[-1][1]

    def _keep(self, count: int) -> None:
        while len(self._open) > count:
            self._open.pop()[2].close()

    def _opened(self, path: Path, inside: tuple[str, ...], stack: ExitStack) -> Container:
        kind = archive_kind(inside[-1] if inside else path.name)
        stream: IO[bytes]
        if inside:
            member = self._open[-1][1].chunks(inside[-1])
            stream = self._spooled(member, self.limits.unpacked_bytes, stack)
        else:
            stream = stack.enter_context(path.open("rb"))
        head = stream.read(512)
        if not head:
            raise Refused("empty", "The archive has no content.")
        if not head.startswith(_MAGIC.get(kind, b"")) or (kind == "tar" and recognise(head)):
            found = recognise(head) or "of an unknown kind"
            raise Refused("content-mismatch", f"The content is {found}, unlike the name.")
        stream.seek(0)
        if kind == "zip":
            return ZipFolder(stream, self.limits)
        if kind != "tar":
            limits = self.limits
            most = max(limits.unpacked_floor, limits.ratio * stream.seek(0, 2))
            stream.seek(0)
            inflated = _inflated(stream, kind)
            stream = self._spooled(inflated, min(most, limits.unpacked_bytes), stack)
        return TarFolder(stream, self.limits)

    def _spooled(self, pieces: Iterator[bytes], most: int, stack: ExitStack) -> IO[bytes]:
        stream = cast("IO[bytes]", stack.enter_context(tempfile.TemporaryFile()))  # noqa: SIM115
        taken = 0
        for piece in pieces:
            taken += len(piece)
            if taken > most:
                raise Refused("size-budget", "The archive inflates past the size budget.")
            stream.write(piece)
        stream.seek(0)
        return stream


def _inflated(stream: IO[bytes], kind: str) -> Iterator[bytes]:
    try:
        if kind == "xz":
            yield from _unxz(stream)
            return
        with gzip.GzipFile(fileobj=stream) if kind == "gz" else bz2.BZ2File(stream) as opened:
            while piece := opened.read(CHUNK):
                yield piece
    except (OSError, EOFError, zlib.error, lzma.LZMAError) as error:
        raise Refused("damaged-archive", f"The archive does not unpack: {error}.") from error


def _unxz(stream: IO[bytes]) -> Iterator[bytes]:
    """As the library's file object does, but with a bound on the memory a header may ask for."""
    unpacker = lzma.LZMADecompressor(memlimit=_XZ_MEMORY)
    waiting = b""
    while True:
        if unpacker.eof:
            waiting = unpacker.unused_data.lstrip(b"\0") or stream.read(CHUNK).lstrip(b"\0")
            if not waiting:
                return
            unpacker = lzma.LZMADecompressor(memlimit=_XZ_MEMORY)
        elif unpacker.needs_input:
            waiting = stream.read(CHUNK)
            if not waiting:
                raise EOFError("it ends within its stream")
        else:
            waiting = b""
        yield unpacker.decompress(waiting, CHUNK)
