"""The stretch without spaces around a bracketed descriptor, and whether it is chemical at all."""

from __future__ import annotations

import re

from dossiercheck.language.words import PROSE_WORDS

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
GROUP = re.compile(rf"[(\[]\s?{_ONE}(?:\s?,\s?{_ONE})*\s?[)\]]")
_OLD_STYLE = re.compile(r"\[\d*[a-z]?[RS]\*?-$")  # [R-(R*,S*)]-, as CAS index names were printed
_JOINTS = "\u200b\u2060\ufeff\u00ad"
NAME_CHARACTER = re.compile(
    # A straight double quote is a double prime only behind a locant, and a quotation mark else.
    rf"(?<=[\dN])\"(?=[,)\]RSEZ{re.escape(HYPHENS)}])|\$(?=l\^)|(?<=-)>(?=\d)|→|[A-Za-zα-ωΑ-Ω0-9,.:*+±~^()\[\]{{}}{re.escape(HYPHENS)}{re.escape(PRIMES)}"
    rf"⁰¹²³⁴-⁹ⁿ₀-₉&λ{_JOINTS}]"
)
SPACE = " \u00a0\u2009\u202f\u2002\u2003\t"
_PAIRS = {")": "(", "]": "[", "}": "{"}

_LOCANTS_BEFORE = re.compile(rf"(?:^|[{HYPHENS}\s(\[{{])[\d{PRIMES},]*\d[{PRIMES}]*,$")
_LOCANTS_AFTER = re.compile(rf"\d+[a-z]?[{PRIMES}]*(?:,\s?\d+[{PRIMES}]*)*[{HYPHENS}]")
# A comma after a word ends a name; inside one it stands between locants.
_LIST_COMMA = re.compile(
    r"(?<!alpha)(?<!beta)(?<!gamma)(?:(?<=[a-z]{2}),(?=[(\[])|(?<=[a-z]{3}),(?=[A-Za-z]))"
)

# A stretch without a space that is longer than this is handed on whole, for the name parser to
# refuse: no name is that long, and looking closer would take time.
LONGEST = 10_000

ACID_END = re.compile(r"(?:ic|ous)$", re.IGNORECASE)
# Endings of chemical words; asked for only where a name has no locant beside its descriptor.
_STEM_END = re.compile(
    r"(?:ane|ene|yne|ol|one|ine|ide|[a-z]{3}ate|ite|yl|ium|ole|ose|oyl|oxy|urea|in|am|fen|furan"
    r"|idene|thiol|nitrile|aldehyde|phenol)$",
    re.IGNORECASE,
)
# A short name in capitals, which a code of letters and digits is not.
_CAPITALS = re.compile(r"\d-[A-Z]{0,5}(?:[AEY]N(?:[AO]L|E|ONE)|I[DN]E|ATE)(?![A-Za-z\d])")
_PROSE = re.compile(PROSE_WORDS, re.IGNORECASE)


def token_around(text: str, start: int, end: int, floor: int) -> tuple[int, int] | None:
    """The stretch without spaces around a descriptor group, brackets balanced; a space is taken
    after a hyphen or after a comma between locants, where it can only be a slip."""
    left = start
    while left > floor and NAME_CHARACTER.match(text, left - 1):
        left -= 1
    for comma in _LIST_COMMA.finditer(text, left, start):
        left = comma.end()
    right = end
    while right < len(text):
        if text[right] == "," and _LIST_COMMA.match(text, right):
            break
        if NAME_CHARACTER.match(text, right) or _slipped_space(text, right):
            right += 1
        elif _bracketed_acid(text, left, right):
            right += len(" acid")
        elif (
            text[right] in SPACE
            and (group := GROUP.match(text, right + 1))
            and is_open(text[left:right])
        ):
            right = group.end()
        else:
            break
    if right - left > LONGEST:
        return left, right
    return _trimmed(text, left, right, start, end)


def _slipped_space(text: str, at: int) -> bool:
    if text[at] not in SPACE or at + 1 >= len(text):
        return False
    before, after = text[at - 1], text[at + 1]
    if before in HYPHENS:
        return bool(re.match(r"[\w(\[{]", after)) and text[at - 2] not in SPACE
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


def is_open(text: str) -> bool:
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


def is_chemical(token: str, group: str, acid: bool) -> bool:
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
