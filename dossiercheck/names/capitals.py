"""Names printed in capitals throughout, in which a letter no longer says what it is.

"O-" is the oxygen atom in one name and *ortho* in the next; the italics and the small letter that
would tell them apart (IUPAC 2013, P-16.5.1 and P-31.1.1.1; section numbers from memory) are lost.
"""

from __future__ import annotations

import re

_ORTHO = re.compile(r"(?<![A-Za-z0-9'′])(?<!\d-)O(?=-[(A-Z])")


def with_ortho(text: str) -> str:
    """The name with each "O-" read as *ortho*, "" where the name has none or has small letters
    that would have told. The length stays the same."""
    if any(letter.islower() for letter in text) or not _ORTHO.search(text):
        return ""
    return _ORTHO.sub("o", text)
