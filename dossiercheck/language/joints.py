"""Where a name goes on over a space: esters, acids, salts, hydrates and their like.

Both halves of an ester may hold brackets and descriptors; a half alone is another compound, so
that what cannot be understood here is never handed on by halves.
"""

from __future__ import annotations

import re

from dossiercheck.language.stretch import (
    ACID_END,
    GROUP,
    HYPHENS,
    NAME_CHARACTER,
    PRIMES,
    SPACE,
    is_chemical,
    is_open,
    token_around,
)
from dossiercheck.language.words import ANIONS, CATIONS

# Words that take a space before or after them inside a name (IUPAC 2013, P-65.6 esters and salts,
# P-65.1 acids; salt and solvate words are common practice).
_AFTER = re.compile(
    rf"(?:{ANIONS}|{CATIONS}|acid|anhydride|ester|ether|ketone|sulfoxide|sulfone|N-oxide|radical"
    rf"|S-acid|O-acid|diamide|hydrate|dihydrate|trihydrate|hemihydrate|water|\(\d+(?:[./]\d+)?:\d+(?:[./]\d+)?(?::\d+)?\)"
    rf"|\d[\d,{PRIMES}]*[{HYPHENS}](?:mono|di|tri|tetra)?(?:oxide|oxime|hydrazone|semicarbazone)"
    rf"|\d[{PRIMES}]*[{HYPHENS}]\((?:di|tri|tetra|penta)?hydrogen[ \u00a0][a-z]+ate\)"
    rf"|\d[{PRIMES}]*[{HYPHENS}][a-z]*phosphate"
    rf"|\(?\d+/\d+\)?|methyl|ethyl|propyl|isopropyl|butyl|benzyl)(?![A-Za-z])",
    re.IGNORECASE,
)
# A group that needs another word to be a compound: an ester's alkyl, or an acyl.
GROUP_END = re.compile(r"(?:yl(?:idene|idyne|ene)?|phosphono)[\])}]*$", re.IGNORECASE)
_HYDROGEN = re.compile(rf"(?:di|tri|tetra|penta)?hydrogen[{' '}\u00a0]", re.IGNORECASE)
_ANION_WORD = re.compile(r"[a-z]{3,}(?:ate|ite|ide)", re.IGNORECASE)
# Words of prose that end as anions do.
_NO_ANION = re.compile(
    r"(?:precipit|intermedi|separ|candid|templ|substr|isol|aggreg|conjug|gener|indic|st|r|accumul"
    r"|elimin|particip|filtr|concentr|distill?|condens|duplic|altern|appropri|adequ|deriv|pl|d"
    r"|cre|rel)ate|(?:qu|wh|desp|defin|oppos|compos|crystall|favou?r|infin|metabol|s|perm)ite"
    r"|(?:s|w|ins|bes|outs|prov|dec|gu|res|div|coinc|h|as)ide",
    re.IGNORECASE,
)
_ANION_END = re.compile(r"(?:ate|ite|ide)[\])}]*$", re.IGNORECASE)
_OF_ACID = re.compile(
    rf"[(\[{{].*[)\]}}][{HYPHENS}]?(?:amide|anilide|hydrazide|ester)", re.IGNORECASE
)
_ALKYL = re.compile(rf"(?:phosphono|[^\s]*yl[\])}}]*|{CATIONS}|hydrogen|N-oxide)$", re.IGNORECASE)
_ACYL_END = re.compile(r"(?:ate|ite|ide|amate)(?:\W|$)|carboxylate|oate", re.IGNORECASE)


def rightwards(text: str, left: int, right: int) -> list[int]:
    """Ends of the name, longest first: the token's own and those over a space."""
    ends = [right]
    while right < len(text) and text[right] in SPACE:
        at = right + 1
        word = _AFTER.match(text, at)
        core = text[left:right]
        if word and _goes_with(core, word[0]):
            right = word.end()
        elif following := _second_part(text, at, core) or _amide(text, at, core):
            right = following
        else:
            break
        ends.append(right)
    return ends[::-1]


def _goes_with(core: str, word: str) -> bool:
    word, core = word.lower(), core.lower()
    if word in ("acid", "s-acid", "o-acid", "diamide"):
        return bool(ACID_END.search(core))
    if word.endswith("yl"):
        return bool(re.search(r"(?:acid|ate|oxide)$", core))
    if word == "hydrogen":
        return False
    if core.endswith(("yl", "ylene")):
        return bool(re.search(r"(?:ate|ide|ether|ketone|sulfoxide|sulfone|oxide)$", word))
    return True


def _second_part(text: str, at: int, core: str) -> int | None:
    """End of a second word with its own descriptors or locants: the acid part of an ester, the
    counter-ion of a salt, an acid in a name of two components."""
    group = re.compile(rf"(?:[{re.escape('(+−-)±')}]+[{HYPHENS}])?{GROUP.pattern}").match(text, at)
    if group:
        token = token_around(text, at, group.end(), at)
        if token is None or token[0] != at:
            return None
        word = text[slice(*token)]
        tail = re.match(r"(?i)[ \u00a0]acid\b", text[token[1] : token[1] + 6])
        if not is_chemical(word, group[0], tail is not None):
            return None
        if GROUP_END.search(core):
            if GROUP_END.search(word) and text[token[1] : token[1] + 1] in tuple(SPACE):
                return _second_part(text, token[1] + 1, word)
            return token[1] if _ACYL_END.search(word[-12:]) else None
        if ACID_END.search(word) and tail:
            return token[1] + tail.end()
        return token[1] if _ACYL_END.search(word[-12:]) else None
    return _anion(text, at) if GROUP_END.search(core) else None


def _anion(text: str, at: int) -> int | None:
    """End of the anion that stands at `at` and makes an ester of the group before it, also after
    "dihydrogen" or after the alkyl of a second ester group."""
    hydrogen = _HYDROGEN.match(text, at)
    if hydrogen:
        return _anion(text, hydrogen.end())
    token = token_around(text, at, at + 1, at) if at < len(text) else None
    if token is None or token[0] != at:
        return None
    word = text[slice(*token)]
    if _ALKYL.fullmatch(word) and text[token[1] : token[1] + 1] in tuple(SPACE):
        return _second_part(text, token[1] + 1, word)
    if word.isalpha():
        if word.lower() == "phosphono" and text[token[1] : token[1] + 1] in tuple(SPACE):
            return _anion(text, token[1] + 1)
        return token[1] if _ANION_WORD.fullmatch(word) and not _NO_ANION.fullmatch(word) else None
    if _ANION_END.search(word) and re.search(r"\d|[(\[{]|^[NOS]-|-[DL]-", word):
        return token[1]
    return None


def _amide(text: str, at: int, core: str) -> int | None:
    """End of the "[…]amide" that follows an acid's name."""
    if not core.lower().endswith("acid") or at >= len(text):
        return None
    token = token_around(text, at, at + 1, at)
    return token[1] if token and token[0] == at and of_acid(text[slice(*token)]) else None


def of_acid(name: str) -> bool:
    """True for the second half of "…carboxylic acid [(1R)-1-phenylethyl]amide"."""
    return _OF_ACID.fullmatch(name) is not None and is_open(name[: len(name) // 2])


def leftwards(text: str, left: int, rights: list[int], floor: int) -> list[int]:
    """Starts of the name, leftmost first: words before an ester or a salt."""
    starts = [left]
    name = text[left : rights[0]]
    if of_acid(name):
        acid = re.search(r"([^\s;:“”\"]+)[ \u00a0]acid[ \u00a0]$", text[floor:left], re.IGNORECASE)
        if acid:
            begin = floor + acid.start(1)
            while text[begin] in "([{" and is_open(acid[1][begin - floor - acid.start(1) :]):
                begin += 1
            return [begin]
        return starts
    if not (_ACYL_END.search(name) or re.search(r"(?i)(?:acid|oxide|ether|ketone)$", name)):
        return starts
    while left > floor and text[left - 1] in SPACE:
        at = left - 1
        begin = at
        while begin > floor and NAME_CHARACTER.match(text, begin - 1):
            begin -= 1
        word = text[begin:at]
        while word[:1] in ("(", "[", "{") and is_open(word):
            begin += 1
            word = text[begin:at]
        if not word or not _ALKYL.fullmatch(word) or is_open(word):
            break
        left = begin
        starts.append(left)
    return starts[::-1]
