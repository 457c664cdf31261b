"""What a place calls a substance: "Impurity B", "DX-101", "Intermediate 3", an invented name.

A label attributes firmly, so a wrong one is worse than none: "the enantiomer of DX-101" is not
DX-101, and a heading "Impurities" hides the drug substance named above it.
"""

from __future__ import annotations

import re

from dossiercheck.language.roles import meaning_of
from dossiercheck.language.words import NO_CODES, SALTS, SENTENCE_WORDS

CLASS = (
    r"(?:[Ss]pecified |[Pp]rocess |[Pp]otential |[Rr]elated )?"
    r"(?:[Ii]mpurity|[Ii]ntermediate|[Cc]ompound|[Dd]egrada(?:tion product|nt)|[Mm]etabolite"
    r"|[Ss]tarting [Mm]aterial|[Rr]eagent|[Bb]y-?product|[Rr]elated [Ss]ubstance|[Ii]somer"
    r"|[Dd]iastereomer|[Ee]pimer|[Pp]recursor|[Bb]uilding [Bb]lock|[Rr]eference [Ss]tandard)"
)
MARK = r"(?:[A-Z]{1,2}\d{0,3}|\d{1,3}[A-Za-z]?|[IVX]{1,5}|RRT ?\d\.\d+)"
CLASSED = rf"{CLASS}[ \u00a0-]{MARK}(?![\w])"
CODE = rf"(?!(?:{NO_CODES})\b)[A-Z]{{2,6}}-?\d{{2,7}}[A-Za-z]?(?![\w-])"
_INVENTED = rf"[A-Z][a-z]{{5,24}}(?: {SALTS}){{0,2}}"

LABEL = re.compile(rf"(?:{CLASSED}|(?<![\w-]){CODE}(?: {SALTS})*)")
NAMED = re.compile(_INVENTED)
# What part a substance plays; which one it is, the dossier says elsewhere.
PART = re.compile(
    r"\b(?:drug substance|active (?:pharmaceutical ingredient|substance|ingredient))\b",
    re.IGNORECASE,
)
_CALLED = re.compile(
    r"[\s,]*[(\[]?\s*(?:which is |that is )?"
    r"(?:here(?:in)?after,?(?: (?:referred to as|called|named|designated))?"
    r"|(?:referred to|known|designated|coded|abbreviated)(?: (?:below|herein|hereafter))? as"
    rf"|called) (?:the )?[“\"'‘«]?({LABEL.pattern}|{PART.pattern}|{_INVENTED})",
)
_RELATION = re.compile(
    r"\b(?:enantiomers?|antipodes?|diastereo(?:iso)?mers?|epimers?|isomers?|racemates?|salts?|esters?"
    r"|analogues?|analogs?|derivatives?|metabolites?|precursors?|impurit(?:y|ies)|forms?|prodrug)"
    r"\s+(?:of|to|from)\s+(?:the\s+)?$",
    re.IGNORECASE,
)
_RELATIVE = re.compile(
    r"\b(?:enantiomer|antipode|mirror image|diastereo(?:iso)?mer|epimer|isomer|stereoisomer"
    r"|racemate|analogue|analog|impurity|impurities|precursor|metabolite|intermediate|derivative"
    r"|by-?product"
    r"|starting material|reagent|resolving agent|counter-?ion)s?\b[^.;]{0,60}$",
    re.IGNORECASE,
)
_JOINT = re.compile(r"(?:,\s+|:\s+|\s+[–—=-]\s+|\s+is\s+|\s*[(\[]\s*)$")
_LEADS_ELSEWHERE = re.compile(
    r"(?:^|[.;:]\s+)(?:from|with|using|by|after|for|in|on|of|unlike|like)\s+$", re.I
)
_MANY = re.compile(
    r"\b(?:impurities|related substances|starting materials|intermediates|reagents|solvents"
    r"|degradation products|metabolites|reference standards|reference materials|by-?products)\b",
    re.IGNORECASE,
)


def in_heading(headings: tuple[str, ...]) -> str:
    """The substance that the headings above a place name, "" where they name none for certain.

    The innermost naming heading counts; a heading about many substances ends the search.
    """
    for heading in reversed(headings):
        found = in_title(heading)
        if found:
            return found
        if _MANY.search(heading):
            return ""
    return ""


def in_title(title: str) -> str:
    """The substance one heading or caption names: its label, or the whole title where it speaks
    of a relation ("Enantiomer of DX-101")."""
    bare = re.sub(r"^(?:\d+(?:\.(?:\d+|[SPAR]))*\.?|Table \d+[.:]?)\s+", "", title).strip()
    found = list(LABEL.finditer(bare))
    bracketed = re.search(r"\(([^()]+)\)$", bare)
    if not found and bracketed and NAMED.fullmatch(bracketed[1]):
        return bracketed[1]
    if len(found) == 2 and re.fullmatch(r"\s*[(\[]", bare[found[0].end() : found[1].start()]):
        found.pop()  # "Impurity B (DX-102)": the code in brackets is another name of it
    if len({match[0] for match in found}) != 1:
        return ""
    if _RELATION.search(bare[: found[0].start()]):
        return bare
    return found[0][0]


def is_label(text: str) -> bool:
    """True for a text that as a whole is a label of the kinds that need no heading to say so."""
    return LABEL.fullmatch(text.strip()) is not None


def beside(text: str, start: int, end: int) -> str:
    """The label set directly beside a name at `start` to `end` of a sentence, "" where none is.

    After the name in brackets ("…amine (Impurity B)"), or before it in apposition ("Impurity B,
    …amine", "DX-101 (…amine)").
    """
    after = re.match(r"[\s,]*[(\[]\s*([^()\[\]]{2,90}?)\s*[)\]]", text[end:])
    bracketed = _as_label(after[1]) if after else ""
    called = _CALLED.match(text, end)
    if bracketed or called:
        return bracketed or (called[1] if called else "")
    before = text[max(0, start - 160) : start]
    joint = _JOINT.search(before)
    if not joint:
        return ""
    words = before[: joint.start()]
    for pattern in (LABEL, PART, NAMED):
        for match in pattern.finditer(words):
            if match.end() != len(words) or re.search(r"[\w-]$", words[: match.start()]):
                continue
            lead = words[: match.start()]
            if _RELATION.search(lead):
                return ""
            if joint[0].startswith(",") and _LEADS_ELSEWHERE.search(lead):
                return ""
            if pattern is PART:
                # "DX-101 drug substance, …amine" says which.
                said = list(LABEL.finditer(lead.rstrip()))
                known = said and said[-1].end() == len(lead.rstrip())
                return said[-1][0] if known else match[0]
            return _invented(match[0]) if pattern is NAMED else match[0]
    return ""


def hinted(text: str, start: int, end: int) -> tuple[str, ...]:
    """Words set beside a name at `start` to `end` as a label is, the longest first: "TA-L is …",
    "the Amine (…)", "… (TA-L)". Whether they are a label, the rest of the dossier tells."""
    after = re.match(r"\s*[(\[]\s*([^()\[\]]{2,40}?)\s*[)\]]", text[end:])
    found = [after[1]] if after else []
    before = text[max(0, start - 80) : start]
    joint = _JOINT.search(before)
    words = re.split(r"[.;]\s", before[: joint.start()])[-1].split() if joint else []
    nearest = range(len(words) - min(4, len(words)), len(words))
    if not any(_RELATION.search(f"{' '.join(words[:n])} ") for n in nearest):
        found += [" ".join(words[n:]) for n in nearest]
    return tuple(one for one in found if len(one) > 1 and re.search(r"[A-Z\d]", one))


def words_of(title: str) -> tuple[str, ...]:
    """The runs of words of a heading or caption that may be a label, the longest first; none
    where it speaks of many substances, or of a relative of one."""
    if _MANY.search(title) or _RELATIVE.search(title):
        return ()
    words = re.findall(r"[^\s,;:()\[\]]+", title)
    runs = (words[n : n + size] for size in (3, 2, 1) for n in range(len(words) - size + 1))
    return tuple(" ".join(run) for run in runs)


def named(text: str) -> bool:
    """True for a text that has the form of an invented name and is no word of sentences."""
    return bool(NAMED.fullmatch(text) and _invented(text))


def is_relative(before: str) -> bool:
    """True when a sentence, up to a name, has come to speak of a relative of its subject or of
    another material."""
    return _RELATIVE.search(re.split(r"[.;]\s", before)[-1]) is not None


def is_relation(before: str) -> bool:
    """True when the words before a label speak of a relative of what it labels."""
    return _RELATION.search(before) is not None


def _as_label(text: str) -> str:
    found = LABEL.fullmatch(text)
    if found:
        return found[0]
    return _invented(text) if NAMED.fullmatch(text) else ""


def _invented(word: str) -> str:
    """A capitalised word as a substance's name, unless it is one that begins sentences."""
    first = word.split()[0].casefold()
    if first in SENTENCE_WORDS or first.endswith(
        ("ly", "ing", "tion", "ward", "wards", "ment", "ness")
    ):
        return ""
    return "" if meaning_of(word) is not None else word
