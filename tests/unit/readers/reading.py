"""How the reader tests read: bytes under a file name, through the reader that answers for it."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable

from dossiercheck.model import Item, Passage, Record, Source, Table, Unread
from dossiercheck.readers import reader_for


def read(name: str, data: bytes) -> list[Item]:
    reader = reader_for(name, data[:512])
    assert reader is not None, f"nobody reads {name}"
    digest = hashlib.sha256(data).hexdigest()
    return list(reader(Source(name, digest, len(data), name.rpartition(".")[2]), data))


def unread(items: Iterable[object]) -> list[Unread]:
    return [item for item in items if isinstance(item, Unread)]


def reasons(items: Iterable[object]) -> list[str]:
    return [item.reason for item in unread(items)]


def records(items: Iterable[Item]) -> list[Record]:
    return [item for item in items if isinstance(item, Record)]


def tables(items: Iterable[Item]) -> list[Table]:
    return [item for item in items if isinstance(item, Table)]


def passages(items: Iterable[Item]) -> list[Passage]:
    return [item for item in items if isinstance(item, Passage)]


def texts(table: Table) -> list[list[str]]:
    return [[cell.text for cell in row] for row in table.rows]
