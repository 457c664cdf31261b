"""What substances are called: the register, defined terms, codes beside labels.

A label is known by its key (`key_of`). Two labels are one substance's where the register says so,
where the text defines one by the other ("hereinafter DX-101", "Impurity B (DX-102)"), or where a
place gives a code beside the label. A code that is given to two labels is followed to neither.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field

from dossiercheck.language.glossary import Term
from dossiercheck.language.labels import CLASS, MARK, PART
from dossiercheck.settings import RegisterEntry

DRUG_SUBSTANCE = "drug substance"

_SIGN = re.compile(r"\(\s*(\+\s*/\s*[-−–]|±|[-+−–])\s*\)")
_SIGNS = {"+": "plus", "-": "minus", "−": "minus", "–": "minus"}
# Short forms before a mark (common practice).
_SHORT = {
    "imp": "impurity",
    "int": "intermediate",
    "cpd": "compound",
    "cmpd": "compound",
    "sm": "startingmaterial",
    "deg": "degradationproduct",
}
_ABBREVIATED = re.compile(r"(imp|int|cpd|cmpd|sm|deg)\b\.?[\s-]*([a-z]{1,2}\d{0,3}|\d{1,3}[a-z]?)")
_QUALIFIED = re.compile(r"(?:the|specified|process|potential|related)\s+(?=\S)")
_MARKED = re.compile(rf"({CLASS})[ \u00a0-]{MARK}")

# Whether two labels may be one substance's, as far as what stands under them tells; the last
# argument is true for a definition in so many words.
Joins = Callable[[str, str, bool], bool]


def key_of(label: str) -> str:
    """What makes two labels the same: letters and digits, without case, spaces or hyphens. A sign
    of rotation counts: "(+)-…" and "(−)-…" are two substances, and "(±)-…" is a third. "Imp. B" is
    "Impurity B", and so is "specified impurity B"."""
    plain = unicodedata.normalize("NFKC", label).casefold().strip()
    plain = _SIGN.sub(lambda found: _SIGNS.get(found[1], "plusminus"), plain)
    plain = _QUALIFIED.sub("", plain, count=1) if _QUALIFIED.match(plain) else plain
    short = _ABBREVIATED.fullmatch(plain)
    if short:
        plain = _SHORT[short[1]] + short[2]
    return re.sub(r"[\W_]+", "", plain)


def plays_a_part(label: str) -> bool:
    """Whether a label says what part a substance plays ("the drug substance") and not which."""
    return PART.fullmatch(re.sub(r"^[Tt]he\s+", "", " ".join(label.split()))) is not None


def kind_of(label: str) -> str:
    """The kind that a marked label belongs to: "impurity" for "Impurity B", "" for a name of its
    own."""
    found = _MARKED.fullmatch(label.strip())
    return key_of(found[1]) if found else ""


@dataclass(frozen=True, slots=True)
class Called:
    """The substance that a label means, and why; `reason` is "" for the substance's own title."""

    title: str
    reason: str = ""


@dataclass(slots=True)
class Callings:
    """Which substance a label means. `refused` are the definitions that are not followed: the
    label is another substance's already, or what stands under the two is not one substance."""

    register: Sequence[RegisterEntry] = ()
    refused: list[Term] = field(default_factory=list)
    followed: list[Term] = field(default_factory=list)
    _by_key: dict[str, Called] = field(default_factory=dict)

    def __post_init__(self) -> None:
        for entry in self.register:
            for name in (entry.id, *entry.aliases):
                own = key_of(name) == key_of(entry.id)
                reason = "" if own else f"in the register “{entry.id}”"
                self._by_key[key_of(name)] = Called(entry.id, reason)

    def learn(self, terms: Iterable[Term], joins: Joins) -> None:
        """Take definitions, in the order of the dossier; the register goes before all."""
        terms = [one for one in terms if key_of(one.other) not in ("", key_of(one.label))]
        given: dict[str, set[str]] = {}
        for term in terms:
            given.setdefault(key_of(term.other), set()).add(key_of(self.called(term.label).title))
        for term in terms:
            label, other = term.label, term.other
            if self.knows(other) and not self.knows(label):
                label, other = other, label
            title = self.called(label).title
            already = self.called(other) if self.knows(other) else None
            if already and key_of(already.title) == key_of(title):
                continue
            several = other == term.other and len(given[key_of(other)]) > 1
            if already or several or plays_a_part(label) or not joins(label, other, term.plain):
                self.refused.append(term)
                continue
            why = f"which {term.said} “{label}”"
            if other != term.other:
                why = f"behind which stands “{label}”"
            self._enter(other, title, why)
            self.followed.append(term)

    def knows(self, label: str) -> bool:
        """Whether the register or a definition speaks of a label."""
        return key_of(label) in self._by_key

    def called(self, label: str) -> Called:
        """The substance that a label means: by itself, or as the register or the text defines."""
        return self._by_key.get(key_of(label)) or Called(label)

    def role(self, title: str) -> str:
        """The part that the register gives a substance, "" for none."""
        return next((entry.role for entry in self.register if entry.id == title), "")

    def declared(self, role: str) -> list[str]:
        """The titles to which the register gives a part."""
        return [entry.id for entry in self.register if entry.role.strip().casefold() == role]

    def means(self, part: str, title: str, why: str) -> None:
        """From now on a label that names a part means this substance, where nothing else does."""
        if not self.knows(part):
            self._by_key[key_of(part)] = Called(title, why)

    def _enter(self, label: str, title: str, why: str) -> None:
        self._by_key[key_of(label)] = Called(title, why)
        for key, called in list(self._by_key.items()):
            if key_of(called.title) == key_of(label):
                self._by_key[key] = Called(title, f"{called.reason}, {why}".strip(", "))
