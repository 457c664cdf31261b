"""Index names printed the wrong way round: "2-BUTANOL, 3-METHYL-, (2S)-".

The parent comes first, what is set on it follows between commas, and the descriptors end the
name (the order of printed indexes of chemical names).
"""

from __future__ import annotations

import re

from dossiercheck.language.words import PROSE_WORDS

_HYPHEN = "[-‐‑–−]"
_COMMA = ", "
# What may stand between parent and descriptors: a prefix with its hyphen, an ester, a salt.
_SEGMENT = re.compile(
    rf"[^\s;:]*[A-Za-z)\]}}]{_HYPHEN}|[\w,'()\[\]-]*[a-z]yl ester|hydro(?:chloride|bromide)"
    r"|(?:mono|di|tri|hemi)?(?:hydrate|sodium|potassium)(?: salt)?|\(\d+:\d+\)|[A-Z]-oxide"
    r"|hydro(?:chloride|bromide) \(\d+:\d+\)",
    re.IGNORECASE,
)
_PARENT = re.compile(r"[^\s;:,][^\s;:]*(?:[ \u00a0]acid)?$", re.IGNORECASE)
_CHEMICAL = re.compile(
    r"(?:ane|ene|yne|ol|one|ine|ide|ate|ic acid|al|ole|idine|amine|nitrile|thiol|furan|pyran)$",
    re.IGNORECASE,
)
_PROSE = re.compile(PROSE_WORDS, re.IGNORECASE)
_SPELT = re.compile(r"[A-Za-z]{3}")
_MOST = 12  # segments; printed indexes have fewer


def begins(text: str, start: int, end: int, floor: int) -> int | None:
    """Where an inverted name begins whose descriptors stand at `start` to `end`, None where they
    end none. `end` is behind the bracket; a hyphen and then no letter must follow."""
    if not re.match(rf"{_HYPHEN}(?![A-Za-z0-9(\[{{])", text[end : end + 2]):
        return None
    at = start
    for _ in range(_MOST):
        if text[max(floor, at - 2) : at] != _COMMA:
            return None
        at -= 2
        comma = text.rfind(_COMMA, floor, at)
        segment = text[comma + 2 : at] if comma >= 0 else ""
        if comma >= 0 and _SEGMENT.fullmatch(segment):
            at = comma + 2
            continue
        parent = _PARENT.search(text, max(floor, at - 200), at)
        if parent is None:
            return None
        word = parent[0].lstrip("“\"'(")
        begin = at - len(word)
        plain = re.sub(r"^(?:the|an?)$", "", word)
        if not _CHEMICAL.search(plain) or not _SPELT.search(plain) or _PROSE.fullmatch(plain):
            return None
        return begin
    return None
