"""`findings.json`: the document itself, one line to each source, finding, substance and rule.

A line an entry keeps a file of 40,000 substances readable by tools that work by lines, and a
difference between two runs short.
"""

from __future__ import annotations

import json
from collections.abc import Iterator
from typing import Any

from dossiercheck.report.document import Json

FILE = "findings.json"


def render(document: Json) -> bytes:
    """The document as UTF-8 with a line feed at its end; the same bytes for the same document."""
    # Piece by piece: a large document's text and its bytes need not be in memory together.
    return b"".join(_pieces(document))


def _pieces(document: Json) -> Iterator[bytes]:
    before = b"{\n"
    for key, value in document.items():
        yield before + _bytes(key) + b": "
        if isinstance(value, list) and value:
            yield b"[\n" + _bytes(value[0])
            for member in value[1:]:
                yield b",\n" + _bytes(member)
            yield b"\n]"
        else:
            yield _bytes(value)
        before = b",\n"
    yield b"\n}\n"


def _bytes(value: Any) -> bytes:
    # Half a surrogate pair has no UTF-8; this handler writes it as JSON's own escape, \udc80.
    return _text(value).encode("utf-8", errors="backslashreplace")


_text = json.JSONEncoder(ensure_ascii=False, allow_nan=False, check_circular=False).encode
