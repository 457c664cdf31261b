"""Readers: from a file's bytes to records, tables, passages and what could not be read.

A reader is a function `read(source, data)` in a module that also has `SUFFIXES`, the lower-case
file name endings it answers for. It knows a format, not what the content means. Readers are
found through the entry-point group `dossiercheck.readers`; each entry names such a function.
"""

from __future__ import annotations

from functools import cache
from importlib import import_module
from importlib.metadata import entry_points
from typing import cast

from dossiercheck.readers.content import Read as Reader

__all__ = ["Reader", "reader_for"]

GROUP = "dossiercheck.readers"
BUILT_IN = (
    "cif",
    "delimited",
    "html",
    "jsonfile",
    "molfile",
    "otherword",
    "pdf",
    "svg",
    "text",
    "word",
    "workbook",
    "xmlfile",
)


def reader_for(name: str, head: bytes = b"") -> Reader | None:
    """The reader for a file of that name, by its suffix; None when no reader answers for it.

    `head`, the first bytes, is offered for formats that share a suffix; no built-in one does. A
    file without a suffix is left to nobody: a guess at its format could be silently wrong.
    """
    base = name.replace("\\", "/").rpartition("/")[2].lower()
    _, dot, suffix = base.rpartition(".")
    return _by_suffix().get("." + suffix) if dot else None


@cache
def _by_suffix() -> dict[str, Reader]:
    """Suffix -> reader. Entries from elsewhere come last and may replace a built-in reader."""
    readers: dict[str, Reader] = {}
    modules = [f"dossiercheck.readers.{name}" for name in BUILT_IN]
    found = [(module, "read") for module in modules]
    entries = sorted(entry_points(group=GROUP), key=lambda entry: (entry.name, entry.value))
    found += [(entry.module, entry.attr) for entry in entries if entry.module not in modules]
    for module_name, attribute in found:
        module = import_module(module_name)
        for suffix in sorted(module.SUFFIXES):
            readers[suffix] = cast("Reader", getattr(module, attribute))
    return readers
