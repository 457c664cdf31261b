"""The files of a dossier: what was given, walked in one fixed order, archives like folders."""

from __future__ import annotations

import hashlib
import io
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path

from dossiercheck.limits import Limits, Refused
from dossiercheck.model import Place, Source, Unread
from dossiercheck.settings import FILE_NAME
from dossiercheck.shelf import Shelf, archive_kind


@dataclass(frozen=True, slots=True)
class Found:
    """A source and where it lies: a file, and for a member of an archive the names that lead to
    it, outermost first. What an `archive` holds comes after it, as sources of their own."""

    source: Source
    path: Path
    inside: tuple[str, ...] = ()
    archive: bool = False
    shelf: Shelf = field(default_factory=Shelf, repr=False, compare=False)

    def chunks(self) -> Iterator[bytes]:
        """The content piece by piece; raises `Refused` and OSError."""
        return self.shelf.chunks(self.path, self.inside)

    def read(self) -> bytes:
        """The content whole, which is what `source` was made from or is `Refused`."""
        held = io.BytesIO()
        for piece in self.chunks():
            held.write(piece)
            if held.tell() > self.source.size:
                break
        data = held.getvalue()
        if hashlib.sha256(data).hexdigest() != self.source.sha256:
            raise Refused("changed", "the file was changed while the dossier was read")
        return data


@dataclass(slots=True)
class _Budget:
    """What one given file may still unpack to, over all the archives in it."""

    limits: Limits
    bytes_left: int
    members_left: int
    spent: bool = False

    @classmethod
    def of(cls, size: int, limits: Limits) -> _Budget:
        most = max(limits.unpacked_floor, limits.ratio * size)
        return cls(limits, min(most, limits.unpacked_bytes), limits.entries)

    def take(self, count: int) -> None:
        self.bytes_left -= count
        if self.bytes_left < 0:
            self.spent = True
            raise Refused("size-budget", "with it the archive inflates past the size budget")


def find(paths: Sequence[Path], shelf: Shelf | None = None) -> Iterator[Found | Unread]:
    """Every file under the paths, sorted by its name in the dossier; hidden ones are left out.

    A source is named relative to the folder given; where several were given, that folder's own
    name goes before it. A member of an archive is named as if the archive were a folder. Links
    that lead out of the folder, and what cannot be opened, are unread.
    """
    shelf = shelf or Shelf()
    several = len(paths) > 1
    for path in paths:
        if path.is_dir():
            for file in sorted(_files(path), key=lambda f: f.relative_to(path).as_posix()):
                name = file.relative_to(path).as_posix()
                if name != FILE_NAME:
                    yield from _open(file, f"{path.name}/{name}" if several else name, path, shelf)
        else:
            yield from _open(path, path.name, path.parent, shelf)


def _files(folder: Path) -> Iterator[Path]:
    for entry in folder.iterdir():
        if entry.name.startswith("."):
            continue
        if entry.is_dir() and not entry.is_symlink():
            yield from _files(entry)
        else:
            yield entry


def _open(file: Path, name: str, root: Path, shelf: Shelf) -> Iterator[Found | Unread]:
    place = Place(name)
    try:
        if file.is_symlink() and not file.resolve().is_relative_to(root.resolve()):
            yield Unread(place, "link", "a link that leads out of the dossier is not followed")
            return
        if not file.is_file():
            yield Unread(place, "not-a-file", "neither a file nor a folder")
            return
        with file.open("rb") as stream:
            digest = hashlib.file_digest(stream, "sha256").hexdigest()
        size = file.stat().st_size
    except OSError as error:
        yield Unread(place, "cannot-open", error.strerror or str(error))
        return
    source = Source(name, digest, size, file.suffix.lower().lstrip("."))
    found = Found(source, file, (), bool(archive_kind(name)), shelf)
    yield found
    if found.archive:
        yield from _members(found, _Budget.of(size, shelf.limits))


def _members(archive: Found, budget: _Budget) -> Iterator[Found | Unread]:
    """What an archive holds, and what the archives in it hold."""
    place = Place(archive.source.path)
    if len(archive.inside) >= budget.limits.depth:
        yield Unread(place, "nesting-depth", "an archive so deep inside others is not opened")
        return
    try:
        container = archive.shelf.container(archive.path, archive.inside)
    except Refused as refused:
        yield Unread(place, refused.reason, refused.detail)
        return
    except OSError as error:
        yield Unread(place, "cannot-open", error.strerror or str(error))
        return
    yield from (Unread(place, reason, detail) for reason, detail in container.faults)
    if not container.members:
        yield Unread(place, "empty", "The archive holds no file.")
    for number, member in enumerate(container.members):
        budget.members_left -= 1
        if budget.spent or budget.members_left < 0:
            left = len(container.members) - number
            detail = f"the budget is spent: {left} members of the archive were not looked at"
            yield Unread(place, "size-budget", detail)
            return
        if any(part.startswith(".") and part != ".." for part in member.name.split("/")):
            continue
        name = f"{archive.source.path}/{member.name}"
        if member.reason:
            yield Unread(Place(name), member.reason, member.detail)
        elif member.name == FILE_NAME:
            detail = "settings inside an archive are not obeyed; give them with --settings"
            yield Unread(Place(name), "settings", detail)
        else:
            yield from _member(archive, member.name, name, budget)


def _member(archive: Found, member: str, name: str, budget: _Budget) -> Iterator[Found | Unread]:
    inside = (*archive.inside, member)
    digest = hashlib.sha256()
    size = 0
    try:
        for piece in archive.shelf.chunks(archive.path, inside):
            size += len(piece)
            budget.take(len(piece))
            digest.update(piece)
    except Refused as refused:
        yield Unread(Place(name), refused.reason, refused.detail)
        return
    except OSError as error:
        yield Unread(Place(name), "cannot-open", error.strerror or str(error))
        return
    suffix = Path(member).suffix.lower().lstrip(".")
    source = Source(name, digest.hexdigest(), size, suffix)
    found = replace(archive, source=source, inside=inside, archive=bool(archive_kind(name)))
    yield found
    if found.archive:
        yield from _members(found, budget)
