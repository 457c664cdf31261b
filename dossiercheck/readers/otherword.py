"""Text documents of other word processors: named for what they are, and not read.

Reading them in part would make what is left out look clean; saved as DOCX they are read whole.
"""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.model import Item, Source
from dossiercheck.readers.content import guarded, whole

_FORMATS = {
    "rtf": "a rich text file",
    "odt": "an OpenDocument text",
    "ott": "an OpenDocument text template",
    "fodt": "an OpenDocument text in one XML file",
}
SUFFIXES = frozenset(f".{suffix}" for suffix in _FORMATS)


@guarded("a rich text file", "a zip archive", "")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield the one entry that says why nothing is read."""
    kind = _FORMATS[source.path.rpartition(".")[2].lower()]
    detail = f"The document is {kind}, which is not read: save it as DOCX or PDF."
    yield whole(source, "unsupported-format", detail)
