"""Systematic names with stereodescriptors in running text.

A candidate starts from a bracketed descriptor, `(2R,3S)`, `(E)`, `(2~{R})`, and grows over the
characters that names are made of, brackets balanced. Over a space it grows only where names have
one: esters, acids, salts, hydrates. Whether it *is* a name the name parser says; the shorter
alternatives are there for it to try.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from dossiercheck.language.inverted import begins
from dossiercheck.language.words import ANIONS, CATIONS, PROSE_WORDS
from dossiercheck.model import Place, Unread

HYPHENS = "-‐‑‒–—−﹣－"
PRIMES = "'′″‴`´’"
_MARKS = r"[*\u2217]?"
_LOCANT = (
    rf"(?:\d+(?:[a-z]|[A-H](?=[RS][,)])|~\{{[a-z]\}})?|[α-ω]|N\d*)(?:[{PRIMES}\"]|\^\d+|[⁰¹²³⁴-⁹])*"
)
_LETTER = r"(?:RS|SR|[RSEZrsMP]|R[ap]|S[ap]|ξ)"
_GREEK = r"(?:\.(?:alpha|beta|gamma|delta|omega)\.|alpha|beta|gamma)"
_LETTERS = rf"(?:~\{{{_LETTER}\}}{_MARKS}|\*{_LETTER}\*|_{_LETTER}_|{_LETTER}{_MARKS})"
_ONE = rf"(?:(?:{_LOCANT}|(?i:{_GREEK})'*)\s?)?{_LETTERS}"
_GROUP = re.compile(rf"[(\[]\s?{_ONE}(?:\s?,\s?{_ONE})*\s?[)\]]")
_OLD_STYLE = re.compile(r"\[\d*[a-z]?[RS]\*?-$")  # [R-(R*,S*)]-, as CAS index names were printed
_JOINTS = "\u200b\u2060\ufeff\u00ad"
_NAME_CHARACTER = re.compile(
    # A straight double quote is a double prime only behind a locant, and a quotation mark else.
    rf"(?<=[\dN])\"(?=[,)\]RSEZ{re.escape(HYPHENS)}])|\$(?=l\^)|(?<=-)>(?=\d)|→|[A-Za-zα-ωΑ-Ω0-9,.:*+±~^()\[\]{{}}{re.escape(HYPHENS)}{re.escape(PRIMES)}"
    rf"⁰¹²³⁴-⁹ⁿ₀-₉&λ{_JOINTS}]"
)
_SPACE = " \u00a0\u2009\u202f\u2002\u2003\t"
_PAIRS = {")": "(", "]": "[", "}": "{"}

_LOCANTS_BEFORE = re.compile(rf"(?:^|[{HYPHENS}\s(\[{{])[\d{PRIMES},]*\d[{PRIMES}]*,$")
_LOCANTS_AFTER = re.compile(rf"\d+[a-z]?[{PRIMES}]*(?:,\s?\d+[{PRIMES}]*)*[{HYPHENS}]")
# A comma after a word ends a name; inside one it stands between locants.
_LIST_COMMA = re.compile(
    r"(?<!alpha)(?<!beta)(?<!gamma)(?:(?<=[a-z]{2}),(?=[(\[])|(?<=[a-z]{3}),(?=[A-Za-z]))"
)

# A stretch without a space that is longer than this is handed on whole, for the name parser to
# refuse: no name is that long, and looking closer would take time.
_LONGEST = 10_000

# Words that take a space before or after them inside a name (IUPAC 2013, P-65.6 esters and salts,
# P-65.1 acids; salt and solvate words are common practice).
_AFTER = re.compile(
    rf"(?:{ANIONS}|{CATIONS}|acid|anhydride|ester|ether|ketone|sulfoxide|sulfone|N-oxide|radical"
    rf"|hydrate|dihydrate|trihydrate|hemihydrate|water|\(\d+(?:[./]\d+)?:\d+(?:[./]\d+)?(?::\d+)?\)"
    rf"|\d[\d,{PRIMES}]*[{HYPHENS}](?:mono|di|tri|tetra)?oxide"
    rf"|\d[{PRIMES}]*[{HYPHENS}]\((?:di|tri|tetra|penta)?hydrogen[ \u00a0][a-z]+ate\)"
    rf"|\d[{PRIMES}]*[{HYPHENS}][a-z]*phosphate"
    rf"|\(?\d+/\d+\)?|methyl|ethyl|propyl|isopropyl|butyl|benzyl)(?![A-Za-z])",
    re.IGNORECASE,
)
# A group that needs another word to be a compound: an ester's alkyl, or an acyl.
_GROUP_END = re.compile(r"yl(?:idene|idyne|ene)?[\])}]*$", re.IGNORECASE)
_RINGS = re.compile(r"(?:bi|bis|ter|quater)(?:phenyl|naphthyl|pyridyl|thienyl|[a-z]{3,}yl)$", re.I)
_PREFIX_END = re.compile(r"(?:amino|oxy|imino|thio|sulfanyl)[\])}]+$", re.IGNORECASE)
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
_ALKYL = re.compile(rf"(?:[^\s]*yl[\])}}]*|{CATIONS}|hydrogen|N-oxide)$", re.IGNORECASE)
_ACYL_END = re.compile(r"(?:ate|ite|ide|amate)(?:\W|$)|carboxylate|oate", re.IGNORECASE)
_ACID_END = re.compile(r"(?:ic|ous)$", re.IGNORECASE)
# Endings of chemical words; asked for only where a name has no locant beside its descriptor.
_STEM_END = re.compile(
    r"(?:ane|ene|yne|ol|one|ine|ide|[a-z]{3}ate|ite|yl|ium|ole|ose|oyl|oxy|urea|in|am|fen|furan"
    r"|idene|thiol|nitrile|aldehyde|phenol)$",
    re.IGNORECASE,
)
# A short name in capitals, which a code of letters and digits is not.
_CAPITALS = re.compile(r"\d-[A-Z]{0,5}(?:[AEY]N(?:[AO]L|E|ONE)|I[DN]E|ATE)(?![A-Za-z\d])")
_PROSE = re.compile(PROSE_WORDS, re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Candidate:
    """A stretch of text that may be a name; `alternatives` are shorter ones, longest first."""

    start: int
    end: int
    alternatives: tuple[tuple[int, int], ...] = ()


def candidates(text: str) -> list[Candidate]:
    """The candidates in a text, left to right, none overlapping another."""
    found: list[Candidate] = []
    for group in _GROUP.finditer(text):
        if found and group.start() < found[-1].end:
            continue
        floor = found[-1].end if found else 0
        inverted = begins(text, group.start(), group.end(), floor)
        if inverted is not None:
            found.append(Candidate(inverted, group.end() + 1))
            continue
        candidate = _grow(text, group.start(), group.end(), floor)
        if candidate:
            if found and _is_half(text, found[-1], candidate):
                # An ester whose halves both have descriptors and whose joint is not understood:
                # either half alone would be another compound.
                candidate = Candidate(found.pop().start, candidate.end)
            found.append(candidate)
    return found


def is_substituent(name: str) -> bool:
    """True for the name of a group, such as "(1R)-1-phenylethyl": no compound by itself.

    Two like rings joined, as in "1,1'-binaphthyl", end in the same way and are compounds.
    """
    return bool(_GROUP_END.search(name)) and not _RINGS.search(name)


def substituent(place: Place, text: str) -> Unread:
    """The name of a group is no evidence of a substance."""
    detail = "The text names a group and not a compound."
    return Unread(place, "substituent", detail, text)


def _is_half(text: str, first: Candidate, second: Candidate) -> bool:
    gap = text[first.end : second.start]
    name = text[first.start : first.end]
    return gap in tuple(_SPACE) and (is_substituent(name) or _PREFIX_END.search(name) is not None)


def _grow(text: str, start: int, end: int, floor: int) -> Candidate | None:
    token = _token(text, start, end, floor)
    if token is None:
        return None
    left, right = token
    if right - left > _LONGEST:
        return Candidate(left, right)
    acid = re.match(r"(?i)[ \u00a0]acid\b", text[right : right + 6]) is not None
    if not _is_chemical(text[left:right], text[start:end], acid):
        return None
    rights = _rightwards(text, left, right)
    lefts = _leftwards(text, left, rights, floor)
    spans = [(left_end, right_end) for left_end in lefts for right_end in rights]
    spans = sorted(set(spans), key=lambda span: (span[0] - span[1], span[0]))
    best, *others = spans
    return Candidate(*best, tuple(others))


def _token(text: str, start: int, end: int, floor: int) -> tuple[int, int] | None:
    """The stretch without spaces around a descriptor group, brackets balanced; a space is taken
    after a hyphen or after a comma between locants, where it can only be a slip."""
    left = start
    while left > floor and _NAME_CHARACTER.match(text, left - 1):
        left -= 1
    for comma in _LIST_COMMA.finditer(text, left, start):
        left = comma.end()
    right = end
    while right < len(text):
        if text[right] == "," and _LIST_COMMA.match(text, right):
            break
        if _NAME_CHARACTER.match(text, right) or _slipped_space(text, right):
            right += 1
        elif _bracketed_acid(text, left, right):
            right += len(" acid")
        elif (
            text[right] in _SPACE
            and (group := _GROUP.match(text, right + 1))
            and _open(text[left:right])
        ):
            right = group.end()
        else:
            break
    if right - left > _LONGEST:
        return left, right
    return _trimmed(text, left, right, start, end)


def _slipped_space(text: str, at: int) -> bool:
    if text[at] not in _SPACE or at + 1 >= len(text):
        return False
    before, after = text[at - 1], text[at + 1]
    if before in HYPHENS:
        return bool(re.match(r"[\w(\[{]", after)) and text[at - 2] not in _SPACE
    return (
        before == ","
        and after.isdigit()
        and _LOCANTS_BEFORE.search(text[max(0, at - 20) : at]) is not None
        and _LOCANTS_AFTER.match(text[at + 1 : at + 40]) is not None
    )


def _bracketed_acid(text: str, left: int, right: int) -> bool:
    """True at the space in "bis(phosphonic acid)"."""
    if not re.match(r"(?i)[ \u00a0]acid[)\]}]", text[right : right + 6]):
        return False
    bracket = max(text.rfind(one, left, right) for one in "([{")
    return bool(
        bracket > left
        and text[bracket - 1].isalpha()
        and re.fullmatch(r"(?i)[a-z]+ic", text[bracket + 1 : right])
    )


def _open(text: str) -> bool:
    """True when brackets opened in the text are not all closed."""
    return sum(c in "([{" for c in text) > sum(c in ")]}" for c in text)


def _trimmed(text: str, left: int, right: int, start: int, end: int) -> tuple[int, int] | None:
    """Cut sentence punctuation and brackets whose partner is outside, keeping the group."""
    stack: list[tuple[str, int]] = []
    for at in range(left, right):
        char = text[at]
        if char in "([{":
            stack.append((char, at))
        elif char in _PAIRS:
            if stack and stack[-1][0] == _PAIRS[char]:
                stack.pop()
            elif at >= end:
                right = at
                break
            else:
                left, stack = at + 1, []
    for _, at in reversed(stack):
        if at >= end:
            right = at
        elif at <= start:
            left = max(left, at + 1)
            break
    while right > end and text[right - 1] in ".,:;*&+" + PRIMES + HYPHENS + _JOINTS:
        right -= 1
    while left < start and text[left] in ".,:;*&" + PRIMES + HYPHENS + _JOINTS:
        left += 1
    if (
        left < start
        and text[left] == "("
        and text[right - 1] == ")"
        and _encloses(text[left:right])
    ):
        left, right = left + 1, right - 1
    return (left, right) if left <= start and right > end else None


def _encloses(text: str) -> bool:
    depth = 0
    for at, char in enumerate(text):
        depth += (char in "([{") - (char in ")]}")
        if depth == 0:
            return at == len(text) - 1
    return False


def _is_chemical(token: str, group: str, acid: bool) -> bool:
    """Prose is no name: "(S)-enantiomer", "(R)-form", "(S)-DX-101", "3(R)" and the like.

    `acid`: whether that word follows, which makes "(S)-lactic" chemical and "(S)-acidic" not.
    """
    at = token.find(group)
    before, after = token[:at], token[at + len(group) :]
    rest = before + after
    if not re.search(r"[a-zα-ω]{3}|[A-Z]{6}", rest) and not _CAPITALS.search(rest):
        return False
    has_locant = any(c.isdigit() or c in "αβγ" for c in group)
    if _OLD_STYLE.search(before):
        after = after.removeprefix("]")
        before = ""
    if not has_locant:
        # "3(R)" is prose, and so is "2-(S)-centre"; "…amido-2(R)-[…" is an old way to print.
        inside = re.search(rf"[A-Za-z)\]][{HYPHENS}]\d+$", before) is not None
        if after[:1] not in HYPHENS or (before and before[-1].isalnum() and not inside):
            return False
    elif not after or not re.match(rf"[{HYPHENS}A-Za-z0-9([{{]", after):
        return False
    words = [word for word in re.split(r"[^A-Za-z]+", rest) if len(word) > 2]
    if not words or all(_PROSE.fullmatch(word) for word in words):
        return False
    numbered = re.search(r"\d", rest) is not None
    if numbered:
        return True
    if _PROSE.fullmatch(words[-1]):
        return False
    return any(_STEM_END.search(w) for w in words) or (acid and words[-1].endswith("ic"))


def _rightwards(text: str, left: int, right: int) -> list[int]:
    """Ends of the name, longest first: the token's own and those over a space."""
    ends = [right]
    while right < len(text) and text[right] in _SPACE:
        at = right + 1
        word = _AFTER.match(text, at)
        core = text[left:right]
        if word and _goes_with(core, word[0]):
            right = word.end()
        elif following := _second_part(text, at, core):
            right = following
        else:
            break
        ends.append(right)
    return ends[::-1]


def _goes_with(core: str, word: str) -> bool:
    word, core = word.lower(), core.lower()
    if word == "acid":
        return bool(_ACID_END.search(core))
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
    group = re.compile(rf"(?:[{re.escape('(+−-)±')}]+[{HYPHENS}])?{_GROUP.pattern}").match(text, at)
    if group:
        token = _token(text, at, group.end(), at)
        if token is None or token[0] != at:
            return None
        word = text[slice(*token)]
        tail = re.match(r"(?i)[ \u00a0]acid\b", text[token[1] : token[1] + 6])
        if not _is_chemical(word, group[0], tail is not None):
            return None
        if _GROUP_END.search(core):
            if _GROUP_END.search(word) and text[token[1] : token[1] + 1] in tuple(_SPACE):
                return _second_part(text, token[1] + 1, word)
            return token[1] if _ACYL_END.search(word[-12:]) else None
        if _ACID_END.search(word) and tail:
            return token[1] + tail.end()
        return token[1] if _ACYL_END.search(word[-12:]) else None
    return _anion(text, at) if _GROUP_END.search(core) else None


def _anion(text: str, at: int) -> int | None:
    """End of the anion that stands at `at` and makes an ester of the group before it, also after
    "dihydrogen" or after the alkyl of a second ester group."""
    hydrogen = _HYDROGEN.match(text, at)
    if hydrogen:
        return _anion(text, hydrogen.end())
    token = _token(text, at, at + 1, at) if at < len(text) else None
    if token is None or token[0] != at:
        return None
    word = text[slice(*token)]
    if _ALKYL.fullmatch(word) and text[token[1] : token[1] + 1] in tuple(_SPACE):
        return _second_part(text, token[1] + 1, word)
    if word.isalpha():
        if word.lower() == "phosphono" and text[token[1] : token[1] + 1] in tuple(_SPACE):
            return _anion(text, token[1] + 1)
        return token[1] if _ANION_WORD.fullmatch(word) and not _NO_ANION.fullmatch(word) else None
    if _ANION_END.search(word) and re.search(r"\d|[(\[{]|^[NOS]-|-[DL]-", word):
        return token[1]
    return None


def _leftwards(text: str, left: int, rights: list[int], floor: int) -> list[int]:
    """Starts of the name, leftmost first: words before an ester or a salt."""
    starts = [left]
    name = text[left : rights[0]]
    if not (_ACYL_END.search(name) or re.search(r"(?i)(?:acid|oxide|ether|ketone)$", name)):
        return starts
    while left > floor and text[left - 1] in _SPACE:
        at = left - 1
        begin = at
        while begin > floor and _NAME_CHARACTER.match(text, begin - 1):
            begin -= 1
        word = text[begin:at]
        while word[:1] in ("(", "[", "{") and _open(word):
            begin += 1
            word = text[begin:at]
        if not word or not _ALKYL.fullmatch(word) or _open(word):
            break
        left = begin
        starts.append(left)
    return starts[::-1]
