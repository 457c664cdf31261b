"""Names of which the parser makes several molecules although they may name one.

Older names of esters end in two words ("…ic acid acetate", "…ium bromide dimethylcarbamate"), and
a synonym may stand in brackets at the end. The parser takes what it cannot join for a second
component, as of a salt. Both readings are possible, so that neither is taken.
"""

from __future__ import annotations

import re

_ESTER = re.compile(
    r"\b(?P<before>acid|anhydride|bromide|chloride|fluoride|iodide)\s+(?P<word>\S*ate)\b",
    re.IGNORECASE,
)
_SYNONYM = re.compile(r"\s\((?P<word>[A-Za-z]{4,}(?:[ -][A-Za-z]{2,})*)\)$")


def doubt(text: str, smiles: str) -> str:
    """Why the components of `smiles` may not be what the name says, "" where nothing speaks
    against them. A lone carbon atom is never what a longer word means."""
    if smiles == "[C]" and text.casefold() != "carbon":
        return "the name parser takes the word for the element carbon"
    if "." not in smiles:
        return ""
    found = _ESTER.search(text)
    # An acid with a nitrogen atom can be the base of a salt; of one without, only an ester is left.
    if found and not (found["before"].casefold() == "acid" and "N" in smiles.upper()):
        return f"“{found['word']}” may make an ester of what stands before it, or be a component"
    found = _SYNONYM.search(text)
    return f"“{found['word']}” may be a synonym or a component of its own" if found else ""
