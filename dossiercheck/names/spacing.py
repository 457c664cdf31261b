"""Ester names from which a space was lost: `ethyl(2S)-2-hydroxypropanoate`.

The parser guesses that an ester is meant, and mostly rightly; but with the space the name is
that of an ester and without it that of a substituted acid's anion (IUPAC 2013, P-65.6.3.2), so
it is a fault of the name.
"""

from __future__ import annotations

import re

from dossiercheck.names.named import Fault
from dossiercheck.names.parser import NameParser, Parse
from dossiercheck.names.typography import Cleaned

_ALKYL = (
    r"(?:(?:iso|neo|tert-?|sec-?|n-|cyclo|di|tri)?"
    r"(?:meth|eth|prop|but|pent|hex|hept|oct|non|dec|undec|dodec)yl"
    r"|prop(?:an)?-?[12]-yl|butan-[12]-yl|prop-2-en-1-yl|prop-2-yn-1-yl|2-methylpropyl|benzyl"
    r"|phenyl|allyl|vinyl|trityl|menthyl|(?:di|tri)phenylmethyl|2,2,2-tri(?:chloro|fluoro)ethyl)"
)
# An alkyl at the name's beginning, then what starts another word and not a substituent's end:
# a locant without its hyphen, or a bracket of descriptors, perhaps inside another bracket.
_LOST = re.compile(
    rf"^{_ALKYL}(?=[(\[{{]{{0,2}}\((?:\d+[a-z]?'*)?(?:RS|SR|[RSEZ])\*?[,)]|\d+(?:,\d+)*[a-z]?'*-"
    rf"|[(\[{{](?![^()\[\]]*yl\)[a-z]*ate))",
    re.IGNORECASE,
)
_ESTER = re.compile(r"(?:[a-z]ate|[a-z]ite)(?: [a-z]+)*$", re.IGNORECASE)


def lost(text: str, parse: Parse, parser: NameParser) -> tuple[int, ...]:
    """Where in the cleaned name a space is missing; empty where none is, or where the name may
    as well be that of an anion.

    The parser is asked once more, with the space, only when the name looks like one.
    """
    match = _LOST.match(text)
    if not match or not _ESTER.search(text) or _words_before_ester(text) > 1:
        return ()
    place = match.end()
    spaced = parser.parse([f"{text[:place]} {text[place:]}"])[0]
    if spaced.smiles is None:
        return ()
    if parse.smiles is not None and _atoms(parse.smiles) != _atoms(spaced.smiles):
        return ()
    return (place,)


def faults(cleaned: Cleaned, spaces: tuple[int, ...]) -> list[Fault]:
    """One fault for each lost space."""
    return [
        Fault(
            "lost-space",
            None,
            None,
            f"no space between “{cleaned.text[:place]}” and “{cleaned.text[place : place + 12]}…”",
        )
        for place in spaces
    ]


def _words_before_ester(text: str) -> int:
    """Words outside brackets up to the first that ends as an ester's acid does."""
    depth, plain = 0, []
    for character in text:
        depth += (character in "([{") - (character in ")]}")
        if depth == 0:
            plain.append(character)
    words = "".join(plain).split(" ")
    for number, word in enumerate(words, 1):
        if re.search(r"(?:ate|ite)$", word, re.IGNORECASE):
            return number
    return len(words)


def _atoms(answer: str) -> list[str]:
    """The heavy atoms and charges of an answer, to tell an ester from an anion."""
    smiles = answer.partition(" ")[0]
    return sorted(re.findall(r"Br|Cl|[BCNOPSFI]|[+-]|\b[cnops]\b", smiles))
