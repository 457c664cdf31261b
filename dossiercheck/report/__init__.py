"""What was found, written for people and for programs.

Each format is a module with `FILE`, the name of its file, and `render(document) -> bytes`.
A further format is one module and one line in `FORMATS`.
"""

from __future__ import annotations

import os
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from importlib import import_module
from pathlib import Path

from dossiercheck.model import Review
from dossiercheck.report.document import Json
from dossiercheck.report.document import document as document_of

FORMATS: Mapping[str, str] = {
    "html": "dossiercheck.report.html",
    "json": "dossiercheck.report.jsonfile",
}


@dataclass(frozen=True, slots=True)
class Format:
    """A format's file name and the function that makes the file's bytes from the document."""

    file: str
    render: Callable[[Json], bytes]


def format_of(name: str) -> Format:
    """The format of that name; its module is imported only now. Raises ValueError for another."""
    if name not in FORMATS:
        raise ValueError(f"unknown report format '{name}'; known: {', '.join(sorted(FORMATS))}")
    module = import_module(FORMATS[name])
    return Format(module.FILE, module.render)


def write(review: Review, out: Path, formats: Sequence[str]) -> tuple[Path, ...]:
    """Write the review in each format into the folder `out`, and return the files' paths.

    All are made before the first is written, so that a failure leaves nothing behind; each then
    appears whole or not at all.
    """
    return write_document(document_of(review), out, formats)


def write_document(made: Json, out: Path, formats: Sequence[str]) -> tuple[Path, ...]:
    """As `write`, from a document already made."""
    chosen = [format_of(name) for name in dict.fromkeys(formats)]
    files = [(out / one.file, one.render(made)) for one in chosen]
    out.mkdir(parents=True, exist_ok=True)
    for path, data in files:
        _write(path, data)
    return tuple(path for path, _ in files)


def _write(path: Path, data: bytes) -> None:
    """A temporary file beside the target, flushed to the disk, then renamed onto it."""
    temporary = path.with_name(f".{path.name}.{os.getpid()}.part")
    try:
        with temporary.open("wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        temporary.replace(path)
    except BaseException:
        temporary.unlink(missing_ok=True)
        raise
