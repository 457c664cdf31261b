"""The files of a dossier: what was given, walked in one fixed order."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from dossiercheck.model import Place, Source, Unread
from dossiercheck.settings import FILE_NAME


@dataclass(frozen=True, slots=True)
class Found:
    """A source and where it lies."""

    source: Source
    path: Path


def find(paths: Sequence[Path]) -> Iterator[Found | Unread]:
    """Every file under the paths, sorted by its name in the dossier; hidden ones are left out.

    A source is named relative to the folder given; where several were given, that folder's own
    name goes before it. Links that lead out of the folder, and what cannot be opened, are unread.
    """
    several = len(paths) > 1
    for path in paths:
        if path.is_dir():
            for file in sorted(_files(path), key=lambda f: f.relative_to(path).as_posix()):
                name = file.relative_to(path).as_posix()
                if name != FILE_NAME:
                    yield _open(file, f"{path.name}/{name}" if several else name, path)
        else:
            yield _open(path, path.name, path.parent)


def _files(folder: Path) -> Iterator[Path]:
    for entry in folder.iterdir():
        if entry.name.startswith("."):
            continue
        if entry.is_dir() and not entry.is_symlink():
            yield from _files(entry)
        else:
            yield entry


def _open(file: Path, name: str, root: Path) -> Found | Unread:
    place = Place(name)
    try:
        if file.is_symlink() and not file.resolve().is_relative_to(root.resolve()):
            return Unread(place, "link", "a link that leads out of the dossier is not followed")
        if not file.is_file():
            return Unread(place, "not-a-file", "neither a file nor a folder")
        with file.open("rb") as stream:
            digest = hashlib.file_digest(stream, "sha256").hexdigest()
        size = file.stat().st_size
    except OSError as error:
        return Unread(place, "cannot-open", error.strerror or str(error))
    return Found(Source(name, digest, size, file.suffix.lower().lstrip(".")), file)
