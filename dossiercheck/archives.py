"""ZIP and tar archives as folders of the dossier: what they list, vetted, and their members' bytes.

Nothing is unpacked to where an archive's paths point: a member is bytes under a name. What an
archive lists and must not be opened (links, devices, encrypted or twice-named members, paths that
lead out) is still listed, with the reason. Formats: PKWARE APPNOTE 6.3, POSIX.1-2001 (ustar, pax).
"""

from __future__ import annotations

import stat
import tarfile
import zipfile
import zlib
from collections import Counter
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from typing import IO, Protocol, TypeVar

from dossiercheck.limits import DEFAULT, RATIO_FLOOR, Limits, Refused, leaves_the_archive

CHUNK = 1 << 16

# No honest header or central directory within the budget of members is longer: zipfile and
# tarfile read these whole, as long as the archive says they are.
_LONGEST_READ = 16 << 20
_METHODS = (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED, zipfile.ZIP_BZIP2)
_LOCAL_HEADER = 30
_Listed = TypeVar("_Listed")
_BLOCK = 512
_DAMAGE = (
    zipfile.BadZipFile,
    tarfile.TarError,
    zlib.error,
    EOFError,
    NotImplementedError,
    OSError,
    ValueError,
    OverflowError,
    RuntimeError,
)


@dataclass(frozen=True, slots=True)
class Member:
    """A file that an archive lists; `reason` and `detail` where it must not be opened."""

    name: str
    reason: str = ""
    detail: str = ""


class Container(Protocol):
    """An open archive. `faults` are (reason, detail) of the archive as a whole."""

    members: tuple[Member, ...]
    faults: tuple[tuple[str, str], ...]

    def chunks(self, name: str) -> Iterator[bytes]:
        """A member's bytes piece by piece; raises `Refused`."""


class _Guarded:
    """The archive's own file, read in bounded pieces and a bounded number of times."""

    def __init__(self, stream: IO[bytes]) -> None:
        self._stream = stream
        self._size = stream.seek(0, 2)
        self._reads = 0
        stream.seek(0)

    def read(self, count: int = -1) -> bytes:
        wanted = count if count >= 0 else self._size - self._stream.tell()
        if count < -1 or wanted > _LONGEST_READ:
            raise Refused("damaged-archive", "A header of the archive is out of all proportion.")
        return self._stream.read(wanted)

    def seek(self, offset: int, whence: int = 0) -> int:
        return self._stream.seek(offset, whence)

    def tell(self) -> int:
        return self._stream.tell()

    def seekable(self) -> bool:
        return True

    def close(self) -> None:
        """The one who opened the stream closes it."""


class _ForwardOnly(_Guarded):
    """As above for the listing of a tar: sizes below zero send tarfile round in circles."""

    def __init__(self, stream: IO[bytes]) -> None:
        super().__init__(stream)
        self.listed = False
        self._furthest = -1

    def read(self, count: int = -1) -> bytes:
        if not self.listed and count == _BLOCK:
            at = self._stream.tell()
            if at <= self._furthest:
                raise Refused("damaged-archive", "A size in the archive leads back into itself.")
            self._furthest = at
        return super().read(count)


class ZipFolder:
    """A zip archive as a `Container`."""

    def __init__(self, stream: IO[bytes], limits: Limits = DEFAULT) -> None:
        """Raises `Refused` where the directory does not open or is past the budget."""
        self._limits = limits
        try:
            self._zip = zipfile.ZipFile(_Guarded(stream))
        except _DAMAGE as error:
            raise Refused("damaged-archive", f"The archive does not open: {error}.") from error
        listed = self._zip.infolist()
        _count(len(listed), limits)
        if any(info.filename == "[Content_Types].xml" for info in listed):
            raise Refused("content-mismatch", "The archive is an office package, named otherwise.")
        files = [info for info in listed if not info.filename.endswith("/") or info.file_size]
        crowded = _overlapping(listed, self._zip.start_dir)
        self._by_name = {_clean(info.filename): info for info in files}
        self.members = _members(
            files,
            lambda info: _clean(info.filename),
            lambda info: _zip_trouble(info, info.header_offset in crowded),
        )
        first = min((info.header_offset for info in listed), default=0)
        hidden = f"The archive has {first} bytes before its first member that are no member's."
        self.faults: tuple[tuple[str, str], ...] = (("hidden-data", hidden),) if first else ()

    def chunks(self, name: str) -> Iterator[bytes]:
        """A member's bytes, counted as they inflate: a directory may lie about sizes."""
        info = self._by_name[name]
        taken = 0
        try:
            with self._zip.open(info) as member:
                while piece := member.read(CHUNK):
                    taken += len(piece)
                    if taken > max(RATIO_FLOOR, self._limits.ratio * info.compress_size):
                        raise Refused("inflation-ratio", "It inflates far beyond its stored size.")
                    yield piece
        except _DAMAGE as error:
            raise Refused("damaged-archive", f"The member does not unpack: {error}.") from error


class TarFolder:
    """A tar archive, itself not compressed, as a `Container`."""

    def __init__(self, stream: IO[bytes], limits: Limits = DEFAULT) -> None:
        """Raises `Refused` where it is damaged at its first header or past the budget."""
        guarded = _ForwardOnly(stream)
        listed: list[tarfile.TarInfo] = []
        try:
            self._tar = tarfile.TarFile(fileobj=guarded)  # type: ignore[arg-type]
            for info in self._tar:
                listed.append(info)
                _count(len(listed), limits)
        except _DAMAGE as error:
            raise Refused("damaged-archive", f"The archive does not open: {error}.") from error
        guarded.listed = True
        files = [info for info in listed if not info.isdir()]
        self._by_name: Mapping[str, tarfile.TarInfo] = {_clean(i.name): i for i in files}
        self.members = _members(files, lambda info: _clean(info.name), _tar_trouble)
        self.faults = tuple(_after_the_last(stream, self._tar.offset))

    def chunks(self, name: str) -> Iterator[bytes]:
        """A member's bytes as they stand in the archive."""
        info = self._by_name[name]
        left = info.size
        try:
            member = self._tar.extractfile(info)
            assert member is not None
            while left:
                piece = member.read(min(CHUNK, left))
                if not piece:
                    raise Refused("damaged-archive", "The archive ends within the member.")
                left -= len(piece)
                yield piece
        except _DAMAGE as error:
            raise Refused("damaged-archive", f"The member does not unpack: {error}.") from error


def _count(members: int, limits: Limits) -> None:
    if members > limits.entries:
        raise Refused("too-many-members", f"It lists more than {limits.entries} members.")


def _clean(name: str) -> str:
    """The path with forward slashes, without empty and "." steps; others are left for vetting."""
    return "/".join(part for part in name.replace("\\", "/").split("/") if part not in ("", "."))


def _members(
    files: list[_Listed],
    name_of: Callable[[_Listed], str],
    trouble: Callable[[_Listed], tuple[str, str]],
) -> tuple[Member, ...]:
    """One entry a name, in the order of the names; a name that is listed twice is not opened."""
    times = Counter(name_of(info) for info in files)
    found: dict[str, Member] = {}
    for info in files:
        name = name_of(info)
        reason, detail = trouble(info) if name else ("unsafe-path", "It has no name.")
        if times[name] > 1:
            reason = "duplicate-member"
            detail = f"It is listed {times[name]} times, and programs differ on which they open."
        found[name] = Member(name, reason, detail)
    return tuple(found[name] for name in sorted(found))


def _zip_trouble(info: zipfile.ZipInfo, crowded: bool) -> tuple[str, str]:
    kind = stat.S_IFMT(info.external_attr >> 16)
    if leaves_the_archive(info.orig_filename):
        return "unsafe-path", "Its path leads out of the archive."
    if info.flag_bits & 0x1:
        return "encrypted", "It is encrypted."
    if kind == stat.S_IFLNK:
        return "link", "A link inside an archive is not followed."
    if kind not in (0, stat.S_IFREG) or info.filename.endswith("/"):
        return "not-a-file", "Neither a file nor a folder."
    if crowded:
        return "overlapping-members", "Its bytes are those of another member as well."
    if info.compress_type not in _METHODS:
        return "unsupported-compression", f"Compression method {info.compress_type} is not read."
    return "", ""


def _overlapping(listed: list[zipfile.ZipInfo], directory: int) -> set[int]:
    """Offsets of members that share bytes with the next one or with the directory."""
    ordered = sorted(listed, key=lambda info: info.header_offset)
    ends = [*(info.header_offset for info in ordered[1:]), directory]
    found: set[int] = set()
    for info, end in zip(ordered, ends, strict=False):
        if info.header_offset + _LOCAL_HEADER + info.compress_size > end:
            found |= {info.header_offset, end}
    return found


def _tar_trouble(info: tarfile.TarInfo) -> tuple[str, str]:
    if leaves_the_archive(info.name):
        return "unsafe-path", "Its path leads out of the archive."
    if info.issym() or info.islnk():
        return "link", "A link inside an archive is not followed."
    if info.issparse():
        return "sparse-member", "It is stored with gaps, which are not filled."
    if not info.isreg():
        return "not-a-file", "Neither a file nor a folder."
    return "", ""


def _after_the_last(stream: IO[bytes], offset: int) -> Iterator[tuple[str, str]]:
    """What is wrong at the end: tarfile ends its list without a word where a header is damaged."""
    stream.seek(offset)
    mark = stream.read(_BLOCK)
    if any(mark):
        yield "damaged-archive", f"What stands at byte {offset + 1} is no member; nothing after is."
    elif len(mark) < _BLOCK:
        yield "damaged-archive", "The archive ends without its end mark: members may be missing."
    else:
        while piece := stream.read(CHUNK):
            if any(piece):
                yield "hidden-data", "The archive goes on after its end mark."
                return
