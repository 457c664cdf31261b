"""`findings.json`: the document itself, one line to each source, finding, substance and rule.

A line an entry keeps a file of 40,000 substances readable by tools that work by lines, and a
difference between two runs short.
"""

from __future__ import annotations

import json
from typing import Any

from dossiercheck.report.document import Json

FILE = "findings.json"


def render(document: Json) -> bytes:
    """The document as UTF-8 with a line feed at its end; the same bytes for the same document."""
    parts = [f"{_text(key)}: {_member(value)}" for key, value in document.items()]
    text = "{\n" + ",\n".join(parts) + "\n}\n"
    # Half a surrogate pair has no UTF-8; this handler writes it as JSON's own escape, \udc80.
    return text.encode("utf-8", errors="backslashreplace")


def _member(value: Any) -> str:
    if isinstance(value, list) and value:
        return "[\n" + ",\n".join(map(_text, value)) + "\n]"
    return _text(value)


_text = json.JSONEncoder(ensure_ascii=False, allow_nan=False, check_circular=False).encode
