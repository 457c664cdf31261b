"""The characters of a printed name, brought to the few that the name parser reads.

A name in a dossier carries the typography of the word processor, the drawing program and the
font it came from. `clean` maps it to plain ASCII and keeps, for each character it leaves, the
place of that character in the verbatim text, so that every span can be given in the original.
It changes characters only: whether the result is a name is for the parser to say.

What cannot be mapped is left as it is and reported by `foreign`, never dropped: a name that
lost a character may be a different, valid name.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cache

_PRIMES = {
    1: "'`´‘’‚‛ʹʻʼʽˈˊˋ′‵＇Ꞌꞌ\uf0a2",
    2: '"“”„‟ʺ˝ˮ″‶＂〃\uf0b2',
    3: "‴‷",
    4: "⁗",
}
# The private-use characters are the Symbol font's, as word processors write them.
_HYPHENS = "−˗⁃⎯─➖⁻₋\uf02d\uf0be"
_SPACES_OF_NO_WIDTH = "\u200b\u200c\u200d\u2060\ufeff\u180e\u2061\u2062\u2063\u2064\u200e\u200f"
_LETTERS = {
    **dict(zip("ᴀʙᴄᴅᴇɢʜɪʟᴍɴᴏᴘʀꜱᴛᴜᴠᴡʏᴢ", "ABCDEGHILMNOPRSTUVWYZ", strict=True)),
    "ß": "beta",
    "∆": "delta",
    "±": "+/-",
    "∓": "-/+",
    "→": "->",
    "⟶": "->",
    "←": "<-",
    "↔": "<->",
    "∗": "*",
    "⁎": "*",
    "✱": "*",
    "⁄": "/",
    "\uf061": "alpha",
    "\uf062": "beta",
    "\uf067": "gamma",
    "\uf064": "delta",
    "\uf065": "epsilon",
    "\uf06c": "lambda",
    "\uf077": "omega",
    "\uf0b1": "+/-",
    "\uf0ae": "->",
}
_GREEK = [
    "alpha",
    "beta",
    "gamma",
    "delta",
    "epsilon",
    "zeta",
    "eta",
    "theta",
    "iota",
    "kappa",
    "lambda",
    "mu",
    "nu",
    "xi",
    "omicron",
    "pi",
    "rho",
    "sigma",
    "tau",
    "upsilon",
    "phi",
    "chi",
    "psi",
    "omega",
]
_SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹"
_SUPERSCRIPT = re.compile(rf"[{_SUPERSCRIPTS}]+(?:[,,⸴][{_SUPERSCRIPTS}]+)*")
_MARKUP = re.compile(
    r"""(?P<curly>~\{(?P<curled>[^{}]*)\})              # 2~{R}
    | (?P<tilde>~(?P<raised>\d+(?:,\d+)*'*)~)           # N~2~, 0^2,7^ written 0~2,7~
    | (?P<caret>(?<=[NOSP])\^?(?P<digits>\d+'*)\^(?=-)) # N6^-, N^6^-
    | (?P<bridge>(?<=\d)\^\((?P<bridged>\d+,\d+)\))    # 0^(2,7)
    | (?P<tag></?(?:i|em|b|strong|sup|sub|small|span|font|u)(?:\s[^<>]*)?>)
    | (?P<star>(?<![A-Za-z*])\*(?P<starred>[A-Za-z]+)\*(?![A-Za-z]))
    | (?P<line>(?<![A-Za-z0-9_])_(?P<lined>[A-Za-z]+)_(?![A-Za-z0-9_])
        |(?<=\d)_(?P<lined2>[A-Za-z])_(?![A-Za-z0-9_]))
    | (?P<dotted>\.(?:alpha|beta|gamma|delta|epsilon|zeta|eta|kappa|lambda|mu|xi|omega|\+/-|\+-)\.)
    """,
    re.VERBOSE | re.IGNORECASE,
)
_CURLED = re.compile(r"~\{([A-Za-z]+)\}")
_PLAIN = re.compile(
    r"[A-Za-z0-9\-'()\[\]{},.+/:;?=!&%#@$|>]+(?:(?<!,) [A-Za-z0-9\-'()\[\]{},.+/:;]+)*"
)
# The parser reads greek locants in small letters only.
_GREEK_LOCANT = re.compile(r"(?<![A-Za-z])(?:ALPHA|BETA|GAMMA|DELTA|OMEGA)(?='*[RS](?![a-z]))")
# What naming programs put after a name of theirs; no part of it.
# A mark of a footnote, raised behind the name's last letter.
_NOTE = re.compile(r"(?<=[A-Za-z)\]])(?:[⁰¹²³⁴-⁹]+|[ᵃ-ᶻʰⁱ])(?:[,⸴](?:[⁰¹²³⁴-⁹]+|[ᵃ-ᶻʰⁱ]))*\s*$")
_REMARK = re.compile(r" ?\((?:non-)?preferred(?: IUPAC)? name\)$", re.IGNORECASE)
_UNUSUAL = re.compile(r"\.[a-z+]+[/-]*\.|preferred|ALPHA|BETA|GAMMA|DELTA|OMEGA", re.IGNORECASE)
_BREAKS = "\r\n\v\f\x85\u2028\u2029"


@dataclass(frozen=True, slots=True)
class Cleaned:
    """A name in plain characters. `offsets[i]` is the index in `original` of the character
    that `text[i]` came from; several characters of `text` may come from one."""

    text: str
    offsets: tuple[int, ...]
    original: str

    def span(self, start: int, end: int) -> tuple[int, int]:
        """The characters of the verbatim text that text[start:end] came from."""
        if start >= end or not self.offsets:
            place = self.offsets[start] if start < len(self.offsets) else len(self.original)
            return place, place
        return self.offsets[start], self.offsets[end - 1] + 1

    def raised(self, index: int) -> bool:
        """Whether text[index] was printed as a superscript digit."""
        return self.original[self.offsets[index]] in _SUPERSCRIPTS


def clean(text: str) -> Cleaned:
    """Map the typography of a printed name to plain characters.

    Hyphens, dashes and minus signs become `-`; primes, quotation marks and accents `'` (a
    double prime two of them); Greek letters their names; spaces of any width one space, none
    at the ends; letters in bold, italic, full-width or small-capital forms the plain letters;
    mark-up around a letter (`2~{R}`, `*R*`, `<i>R</i>`) goes. Control characters stay, for
    `foreign` to report, except around the name and where a line break stands beside a hyphen,
    comma or bracket, where no name has a space.
    """
    if _PLAIN.fullmatch(text) and not _UNUSUAL.search(text):
        return Cleaned(text, tuple(range(len(text))), text)
    note = _NOTE.search(text)
    if note:
        return replace(clean(text[: note.start()]), original=text)
    uncurled = _uncurled(text) if "~{" in text else None
    if uncurled:
        return uncurled
    pairs = list(_joined(_spaced(list(_characters(text)))))
    plain = "".join(c for c, _ in pairs)
    plain = _GREEK_LOCANT.sub(lambda match: match[0].lower(), plain)
    plain = _REMARK.sub("", plain)
    return Cleaned(plain, tuple(i for _, i in pairs[: len(plain)]), text)


def _uncurled(text: str) -> Cleaned | None:
    """A name that is plain but for letters set as `~{R}`, the commonest mark-up; the quick way."""
    pieces: list[str] = []
    offsets: list[int] = []
    place = 0
    for match in _CURLED.finditer(text):
        pieces += (text[place : match.start()], match[1])
        offsets += range(place, match.start())
        offsets += range(*match.span(1))
        place = match.end()
    pieces.append(text[place:])
    offsets += range(place, len(text))
    plain = "".join(pieces)
    if _PLAIN.fullmatch(plain) and not _UNUSUAL.search(plain):
        return Cleaned(plain, tuple(offsets), text)
    return None


def foreign(cleaned: Cleaned) -> tuple[str, int] | None:
    """The first character that no systematic name has, with its index in the verbatim text.

    The name parser drops a NUL, takes a tabulator for the end of the name and a carriage
    return for the start of the next one; such a name is not to be sent.
    """
    if cleaned.text.isascii() and cleaned.text.isprintable():
        return None
    for character, place in zip(cleaned.text, cleaned.offsets, strict=True):
        if not " " <= character <= "~":
            return character, place
    return None


def _characters(text: str) -> Iterator[tuple[str, int]]:
    """Plain characters with the place of each, spaces and line breaks not yet sorted out."""
    marks = _unmarked(text)
    place = 0
    while place < len(text):
        if place in marks:
            kept, end = marks[place]
            for piece, at in kept:
                yield from ((c, at) for c in piece)
            place = end
            continue
        for plain in _plain(text, place):
            yield plain, place
        place += 1


def _unmarked(text: str) -> dict[int, tuple[list[tuple[str, int]], int]]:
    """Mark-up and raised digits: start -> (what stays of it with places, end)."""
    found: dict[int, tuple[list[tuple[str, int]], int]] = {}
    for match in _MARKUP.finditer(text):
        group = match.lastgroup or ""
        inner = {
            "curly": "curled",
            "curled": "curled",
            "tilde": "raised",
            "raised": "raised",
            "caret": "digits",
            "digits": "digits",
            "bridge": "bridged",
            "bridged": "bridged",
            "star": "starred",
            "starred": "starred",
            "lined": "lined",
            "lined2": "lined2",
            "line": "lined" if match["lined"] else "lined2",
        }.get(group)
        if group == "dotted":
            start, end = match.start() + 1, match.end() - 1
        elif inner:
            start, end = match.span(inner)
        else:
            start = end = match.start()
        kept = [(text[i], i) for i in range(start, end)]
        if inner in ("raised", "bridged") and match.start() and text[match.start() - 1].isdigit():
            kept = [("^{", match.start()), *kept, ("}", match.end() - 1)]
        found[match.start()] = (kept, match.end())
    for match in _SUPERSCRIPT.finditer(text):
        kept = [(_digit(text[i]), i) for i in range(*match.span())]
        if _in_von_baeyer_ring(text, match.start()):
            kept = [("^{", match.start()), *kept, ("}", match.end() - 1)]
        found[match.start()] = (kept, match.end())
    return found


def _in_von_baeyer_ring(text: str, place: int) -> bool:
    """Whether the raised digits at `place` are bridgeheads (3.3.1.1³,⁷), where 13,7 would be
    another bridge."""
    before = text[max(0, place - 80) : place]
    return bool(re.search(r"[\[(.]\d+(?:[.,]\d+[⁰¹²³⁴⁵⁶⁷⁸⁹,]*)*\.\d+$", before))


def _digit(character: str) -> str:
    return unicodedata.normalize("NFKC", character) if character not in ",⸴" else ","


@cache
def _mapped(character: str) -> str:
    """One character's plain form; the character itself where there is none."""
    if character in _SPACES_OF_NO_WIDTH or unicodedata.category(character) == "Mn":
        return "" if character in _SPACES_OF_NO_WIDTH else character
    for count, primes in _PRIMES.items():
        if character in primes:
            return "'" * count
    if unicodedata.category(character) == "Pd" or character in _HYPHENS:
        return "-"
    if unicodedata.category(character) == "Zs":
        return " "
    if character in _LETTERS:
        return _LETTERS[character]
    plain = unicodedata.normalize("NFKC", character)
    if all(" " <= c <= "~" for c in plain):
        return plain if plain.strip() else character
    if len(plain) == 1:
        name = unicodedata.name(plain, "")
        if name.startswith("GREEK "):
            letter = name.split(" LETTER ")[-1].split()
            if letter[0] == "FINAL":
                letter = letter[1:]
            word = {"lamda": "lambda"}.get(letter[0].lower(), letter[0].lower())
            if word in _GREEK and len(letter) == 1:
                return word
        if plain != character:
            return _mapped(plain)
    return character


def _plain(text: str, place: int) -> str:
    character = text[place]
    if character == "\u00ad":
        # A soft hyphen inside a word, or beside a hyphen or comma, only marks where a line may
        # break; beside a digit or a bracket it is a hyphen in the wrong code.
        sides = text[max(place - 1, 0) : place] + text[place + 1 : place + 2]
        marks = any(side == "," or _mapped(side) == "-" for side in sides)
        return "" if marks or (sides.isalpha() and len(sides) == 2) else "-"
    if " " <= character <= "~" and character not in "\"'`":
        return character
    return _mapped(character)


def _spaced(pairs: list[tuple[str, int]]) -> list[tuple[str, int]]:
    """One space between words, none at the ends, control characters at the ends gone."""
    kept: list[tuple[str, int]] = []
    for character, place in pairs:
        if character == " " and (not kept or kept[-1][0] in " \r\n"):
            continue
        if character in "\r\n" and kept and kept[-1][0] == " ":
            kept.pop()
        kept.append((character, place))
    start, end = 0, len(kept)
    while start < end and kept[start][0] in " \t\r\n\v\f":
        start += 1
    while start < end and kept[end - 1][0] in " \t\r\n\v\f":
        end -= 1
    return kept[start:end]


def _joined(pairs: list[tuple[str, int]]) -> Iterator[tuple[str, int]]:
    """Without the line breaks that stand where a name cannot have a space, and without the
    space that typists set after a comma inside brackets."""
    depth = 0
    for index, (character, place) in enumerate(pairs):
        depth += (character in "([{") - (character in ")]}")
        if character in _BREAKS:
            if _beside(pairs, index, -1) in "-,([{" or _beside(pairs, index, 1) in "-,)]}":
                continue
        elif character == " " and depth > 0 and _beside(pairs, index, -1) == ",":
            after = _beside(pairs, index, 1)
            if after.isdigit() or after in "RSEZ":
                continue
        yield character, place


def _beside(pairs: list[tuple[str, int]], index: int, step: int) -> str:
    """The next character that is no space or break in the direction of `step`."""
    index += step
    while 0 <= index < len(pairs):
        if pairs[index][0] not in " " + _BREAKS:
            return pairs[index][0]
        index += step
    return "-"
