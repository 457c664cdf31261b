"""The stereodescriptors that a name prints, found in its characters.

A descriptor is a letter (or word) with, mostly, a locant, and stands in a bracket of its own
kind (`(2R,3S)`) or before a hyphen (`trans-`, `D-`). The forms are those of IUPAC 2013, P-91.2
(R, S, r, s, E, Z, M, P, Ra, Sa, RS, SR, R*, S*, cis, trans, rac, rel, meso, endo, exo, syn,
anti, xi), P-101.2.6 and P-102.3 (alpha, beta, D, L), and signs of rotation, which IUPAC does
not count among them but names in dossiers print.

What only looks like one is left alone: indicated hydrogen `(1H)`, fusion locants `[1,2-e]`,
element locants `N,S-`, isotopes `(35S)`, `alpha-` before a substituent.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.names.typography import Cleaned


@dataclass(frozen=True, slots=True)
class PrintedDescriptor:
    """One descriptor as printed.

    `text` are the letters (plain characters), `locant` what stands before them ("" for none),
    `span` the letters' place in the verbatim text; `at` is the place of the letters and `item`
    that of locant and letters in the cleaned text. `bracket` numbers the brackets that hold
    descriptors, -1 for one that stands before a hyphen. `family` is one of centre, double
    bond, axis, relative, prefix, rotation.
    """

    text: str
    locant: str
    span: tuple[int, int]
    bracket: int
    family: str
    at: tuple[int, int]
    item: tuple[int, int]


_LOCANT = (
    r"(?:\d+(?:[a-z]|[ABCD](?=[RSZ']))?'*|(?:alpha|beta|gamma|delta|epsilon|omega)'*)(?:[a-z]'*)?|"
)
_LETTERS = (
    r"RS|SR|R/S|S/R|R\*|S\*|Ra|Sa|Rp|Sp|Rm|Sm|aR|aS|pR|pS|R|S|E/Z|Z/E|EZ|ZE|E|Z|M|P|"
    r"xi|Xi|r|s|e|z|alpha|beta|-?(?:cis|trans|exo|endo|syn|anti)"
)
_ITEM = re.compile(rf"(?P<locant>{_LOCANT})(?P<letters>{_LETTERS})(?=,|$)")
_BRACKET = re.compile(r"[(\[{]([^()\[\]{}]{1,400})[)\]}]")
_WORD = re.compile(
    r"(?<![A-Za-z])(?P<word>all-trans|all-cis|cis|trans|racemic|rac|rel|meso|endo|exo|syn|anti|"
    r"threo|erythro|ent|epi)(?=\)?-|\)?\(|,(?:cis|trans)-|\) | (?=[\d(]))",
    re.IGNORECASE,
)
_LETTER = re.compile(r"(?<![A-Za-z])(?P<word>DL|D,L|D/L|dl|d,l|D|L|d|l|R|E|Z)(?=\)?-|\(|\) )")
_SIGN = re.compile(r"\((?P<sign>\+/-|\+-|-/\+|\+|-|\+,-)\)(?=-|[A-Za-z]|$)|^(?P<bare>\+/-)(?=[ -])")
_LOCANTED_WORD = re.compile(
    r"(?<![A-Za-z0-9])(?P<locant>\d+[a-z]?'*)-?"
    r"(?P<word>alpha|beta|xi|exo|endo|syn|anti|cis|trans)(?=[-,])",
    re.IGNORECASE,
)
_ANOMER = re.compile(r"(?<![A-Za-z])(?P<word>alpha|beta)(?=-(?:DL|D|L)-)", re.IGNORECASE)
_RADIOISOTOPES = {"32": "P", "33": "P", "35": "S", "33S": "S", "34": "S", "36": "S"}
_FAMILY = {
    **dict.fromkeys(("R", "S", "r", "s", "RS", "SR", "R/S", "S/R", "R*", "S*"), "centre"),
    **dict.fromkeys(("alpha", "beta", "xi", "Xi"), "centre"),
    **dict.fromkeys(("E", "Z", "e", "z", "EZ", "ZE", "E/Z", "Z/E"), "double bond"),
    **dict.fromkeys(("M", "P", "Ra", "Sa", "Rp", "Sp", "Rm", "Sm", "aR", "aS", "pR", "pS"), "axis"),
    **dict.fromkeys(
        [
            "cis",
            "trans",
            "exo",
            "endo",
            "syn",
            "anti",
            "threo",
            "erythro",
            "meso",
            "all-trans",
            "all-cis",
        ],
        "relative",
    ),
    **dict.fromkeys(("+", "-"), "rotation"),
}


def printed(cleaned: Cleaned) -> tuple[PrintedDescriptor, ...]:
    """Every stereodescriptor the name prints, in reading order."""
    found: list[tuple[int, int, int, str, str, int]] = []
    taken: list[tuple[int, int]] = []
    number = 0
    for match in _BRACKET.finditer(cleaned.text):
        items = _items(cleaned, match)
        if items:
            taken.append(match.span())
            found += [(*item, number) for item in items]
            number += 1
    for start, at, end, word, locant in _outside(cleaned.text):
        if not any(start < b and a < end for a, b in taken):
            taken.append((start, end))
            found.append((start, at, end, word, locant, -1))
    found.sort(key=lambda entry: entry[1])
    return tuple(
        PrintedDescriptor(
            text=letters,
            locant=locant,
            span=cleaned.span(at, end),
            bracket=bracket,
            family=_FAMILY.get(letters, "prefix"),
            at=(at, end),
            item=(start, end),
        )
        for start, at, end, letters, locant, bracket in found
    )


def _items(cleaned: Cleaned, bracket: re.Match[str]) -> list[tuple[int, int, int, str, str]]:
    """The bracket's descriptors (item start, letters start, end, letters, locant), if that is
    all it holds and it stands where a descriptor can stand; otherwise none."""
    found = []
    place = bracket.start(1)
    for part in bracket[1].split(","):
        # Greedy from the left: "4aR" is locant 4a with R, "1Ra" cannot be but 1 with Ra.
        item = _ITEM.fullmatch(part)
        if not item:
            return []
        letters = item["letters"].removeprefix("-")
        end = place + len(part)
        locant = re.sub("[A-D]", lambda m: m[0].lower(), item["locant"])
        found.append((place, end - len(letters), end, letters, locant))
        place = end + 1
    return found if _can_stand(cleaned, bracket, found) else []


def _can_stand(
    cleaned: Cleaned, bracket: re.Match[str], items: list[tuple[int, int, int, str, str]]
) -> bool:
    text = cleaned.text
    before, after = text[: bracket.start()][-1:], text[bracket.end() :][:1]
    letters = [item[3] for item in items]
    locants = [item[4] for item in items]
    if text[bracket.start()] != "(" and not all(locants):
        return False  # [e] and [E] are fusion letters
    if len(items) == 1 and _RADIOISOTOPES.get(locants[0]) == letters[0]:
        return after == "-" and not cleaned.raised(items[0][0]) and text[bracket.start()] == "("
    if not any(locants) and set(letters) <= {"S", "P", "R", "M", "s"}:
        # Sulfur and phosphorus in brackets follow a letter and end a word; a descriptor
        # starts one.
        return after == "-" or after.isalnum() or after in "([{" or before in ("", " ", "-", ",")
    return True


def _outside(text: str) -> Iterator[tuple[int, int, int, str, str]]:
    """Descriptors outside brackets of their own (start, letters start, end, letters, locant)."""
    for match in _SIGN.finditer(text):
        sign = match["sign"] or match["bare"]
        at = match.start("sign") if match["sign"] else match.start()
        yield match.start(), at, at + len(sign), sign, ""
    for match in _LOCANTED_WORD.finditer(text):
        word = match["word"].lower()
        yield match.start(), match.start("word"), match.end(), word, match["locant"]
    for match in _ANOMER.finditer(text):
        yield match.start(), match.start(), match.end(), match["word"].lower(), ""
    for match in _WORD.finditer(text):
        word, start = match["word"].lower(), match.start()
        before = text[:start]
        if before and before[-1] not in "-([{ ,":
            continue
        if word in ("threo", "erythro") and re.search(r"(?:^|[^A-Za-z])(?:D|L|DL)-$", before):
            continue  # D-erythro- is the configuration of a sugar
        yield start, start, match.end(), word, ""
    for match in _LETTER.finditer(text):
        word, start = match["word"], match.start()
        if word in ("R", "E", "Z") and (start or text[match.end() : match.end() + 1] != "-"):
            continue
        if word in ("d", "l", "dl", "d,l") and start:
            continue  # a small d or l inside a name is a fusion letter
        yield start, start, match.end(), word, ""
