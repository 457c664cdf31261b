"""Ester and salt names from which a space was lost: `ethyl(2S)-2-hydroxypropanoate`.

The parser guesses that an ester is meant, and mostly rightly; but a name with a space and one
without are names of different things (an alkyl on the acid's own chain), so it is a fault.
"""

from __future__ import annotations

import re

from dossiercheck.names.named import Fault
from dossiercheck.names.parser import NameParser, Parse
from dossiercheck.names.typography import Cleaned

_ALKYL = (
    r"(?:(?:iso|neo|tert-?|sec-?|n-|cyclo|cyclo)?(?:meth|eth|prop|but|pent|hex|hept|oct|dec|dodec)yl"
    r"|prop(?:an)?-?[12]-yl|butan-[12]-yl|benzyl|phenyl|allyl|vinyl|trityl|menthyl"
    r"|2,2,2-tri(?:chloro|fluoro)ethyl)"
)
_LOST = re.compile(
    rf"^(?:di)?{_ALKYL}(?=[(\[{{]?\(?\d+[a-z]?'*(?:[RSEZ],|[RSEZ]\)|[-,])|[(\[{{]?\([RSEZ]\))", re.I
)
_ESTER = re.compile(r"(?:oate|[a-z]ate|ite)(?: [a-z]+)*$", re.IGNORECASE)


def lost(text: str, parse: Parse, parser: NameParser) -> tuple[int, ...]:
    """Where in the cleaned name a space is missing; empty where none is, or where the name may
    as well be that of a substituted acid's salt."""
    match = _LOST.match(text)
    if not match or not _ESTER.search(text):
        return ()
    place = match.end()
    if _has_ester_word(text[:0]) or " " in _outside_brackets(text.partition("ate")[0]):
        return ()
    if text[place] in "[{(" and not re.match(r"\(\d*[a-z]?'*[RSEZ][,)]", text[place:]):
        # "methyl[4-(…)phenyl]carbamate" may be an N-methyl carbamate ion: it counts only where
        # the parser, too, sees the ester and nothing else.
        spaced = parser.parse([f"{text[:place]} {text[place:]}"])[0]
        if not parse.smiles or not spaced.smiles or not _same_size(parse, spaced):
            return ()
    return (place,)


def faults(cleaned: Cleaned, spaces: tuple[int, ...]) -> list[Fault]:
    """One fault for each lost space."""
    return [
        Fault(
            "lost-space",
            None,
            None,
            f"no space between “{cleaned.text[:place]}” and “{cleaned.text[place:place + 12]}…”",
        )
        for place in spaces
    ]


def _same_size(first: Parse, second: Parse) -> bool:
    def letters(parse: Parse) -> list[str]:
        return sorted(c for c in (parse.smiles or "").partition(" ")[0] if c.isalpha() and c != "H")

    return letters(first) == letters(second)


def _has_ester_word(text: str) -> bool:
    return bool(text)


def _outside_brackets(text: str) -> str:
    depth, kept = 0, []
    for character in text:
        depth += (character in "([{") - (character in ")]}")
        if depth == 0:
            kept.append(character)
    return "".join(kept)
