"""Evidence to substances: what stands together, or is called the same, speaks of one substance.

A label, a register entry, a record or a row attributes firmly. Evidence without a label goes by
what it says and where it stands: to the substance that it exactly is; to the one that its heading
or section is about. Where that fits in the skeleton only, the attribution is weak, and nothing
grave may rest on it. What fits nobody stands for itself, and what may be a misprint of several is
listed as unread instead of raising an alarm.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from dossiercheck.calling import DRUG_SUBSTANCE, Callings, key_of, kind_of, plays_a_part
from dossiercheck.fitting import Fitting, Seen
from dossiercheck.language.glossary import Term, beside
from dossiercheck.language.labels import words_of
from dossiercheck.model import Evidence, Kind, Unread
from dossiercheck.settings import RegisterEntry
from dossiercheck.standing import Standing
from dossiercheck.substances import FIRM, WEAK, Substance, Survey

_STRUCTURAL = (Kind.NAME, Kind.DRAWING, Kind.NOTATION, Kind.COORDINATES)


def attribute(
    evidence: Sequence[Evidence],
    register: Sequence[RegisterEntry],
    survey: Survey,
    terms: Sequence[Term] = (),
) -> tuple[list[Substance], list[Unread]]:
    """Sort evidence into substances, in the order in which these first appear.

    `terms` are the definitions that the dossier gives. `survey` interprets the evidence of
    substances; it is asked only where something stands without a label, or where a definition
    joins two labels that both have evidence.
    """
    groups = _groups(evidence)
    sorting = _Sorting(Callings(register), survey)
    for group in groups:
        sorting.used.add(key_of(_label(group)))
    for group in groups:
        sorting.draft(group)
    sorting.join([*terms, *_codes(groups)])
    sorting.find_drug_substance()
    sorting.follow_hints()
    unread = [*sorting.settle(), *sorting.not_followed()]
    substances = list(sorting.homes.values())
    order = {said.id: number for number, said in enumerate(evidence)}
    for home in substances:
        home.evidence.sort(key=lambda said: order[said.id])
    substances.sort(key=lambda home: order[home.evidence[0].id])
    for number, home in enumerate(substances, 1):
        home.id = f"s{number}"
    return substances, unread


@dataclass(slots=True)
class _Sorting:
    """The sorting as it stands: `homes` by the key of their label (or of a number, for what has
    none), `homeless` the groups without a label."""

    callings: Callings
    survey: Survey
    homes: dict[str, Substance] = field(default_factory=dict)
    homeless: list[list[Evidence]] = field(default_factory=list)
    seen: dict[str, Seen] = field(default_factory=dict)
    used: set[str] = field(default_factory=set)
    standing: Standing = field(default_factory=Standing)
    drug: Substance | None = None

    def draft(self, group: list[Evidence]) -> None:
        """Give a labelled group the home of its label; the register knows some already."""
        label = _label(group)
        if not key_of(label):
            self.homeless.append(group)
            return
        # "DS Impurity A" is another one than "Impurity A" where the dossier uses it as a label.
        longer = (h for h in group[0].hints if h.endswith(f" {label}") and key_of(h) in self.used)
        self._house(next(longer, label), group)

    def _house(self, label: str, group: Sequence[Evidence]) -> None:
        called = self.callings.called(label)
        home = self.homes.setdefault(key_of(called.title), Substance("", called.title))
        home.role = home.role or self.callings.role(called.title)
        for said in group:
            home.add(said, _reason(said, label, called.reason))

    def join(self, terms: Sequence[Term]) -> None:
        """Follow the definitions, and bring together what they make one substance."""
        if not terms:
            return
        used = self.used
        terms = [
            term
            for term in terms
            if (term.plain or key_of(term.label) in used or self.callings.knows(term.label))
            and {key_of(term.label), key_of(term.other)} & used
        ]
        both = {
            key
            for term in terms
            if {key_of(term.label), key_of(term.other)} <= used
            for key in (key_of(term.label), key_of(term.other))
        }
        asked = [key for key in self.homes if key in both]
        found = self.survey([self.homes[key] for key in asked]) if asked else []
        self.seen.update(zip(asked, found, strict=True))
        self.callings.learn(terms, self._one_substance)
        before, self.homes = self.homes, {}
        for home in before.values():
            for group in _groups(home.evidence):
                self._house(home.label if home.label in group[0].hints else _label(group), group)
        if len(self.homes) != len(before):
            self.seen.clear()

    def _one_substance(self, label: str, other: str, plain: bool) -> bool:
        """A definition in words may join what has one skeleton; a bracket, which may name a
        relative, only what is the same stereoisomer."""
        one, two = (self.seen.get(key_of(text), frozenset()) for text in (label, other))
        if not one or not two:
            return plain or not (kind_of(label) and kind_of(other))
        if plain:
            return any(a.like(b) for a in one for b in two)
        return bool(one & two)

    def follow_hints(self) -> None:
        """A name beside words that are a label elsewhere is what that label means."""
        left = []
        for group in self.homeless:
            label = next(filter(self._is_label, group[0].hints), "")
            if label:
                home = self.homes[key_of(self.callings.called(label).title)]
                home.add(group[0], f"set beside “{label}”, which is a label elsewhere")
                self.seen.pop(key_of(home.label), None)
            else:
                left.append(group)
        self.homeless = left

    def _is_label(self, text: str) -> bool:
        return key_of(self.callings.called(text).title) in self.homes

    def find_drug_substance(self) -> None:
        """Which substance is the drug substance, and with it what the words mean."""
        self.standing.enter(self.homes.values())
        title, why = self.standing.drug_substance(self.callings)
        if not title:
            return
        self.callings.means(DRUG_SUBSTANCE, title, why)
        for home in [one for one in self.homes.values() if plays_a_part(one.label)]:
            if key_of(home.label) != key_of(title):
                self.callings.means(home.label, title, why)
                del self.homes[key_of(home.label)]
                for group in _groups(home.evidence):
                    self._house(home.label, group)
                self.seen.clear()
        # Definitions may have brought a home under another one's title.
        self.drug = self.homes.get(key_of(self.callings.called(title).title))
        if self.drug and not self.drug.role:
            self.drug.role, self.drug.inferred = DRUG_SUBSTANCE, why

    def settle(self) -> Iterator[Unread]:
        """Give the groups without a label a home by what they say and where they stand."""
        if not self.homeless:
            return
        alone = [Substance("", _title(group), list(group)) for group in self.homeless]
        asked = [key for key in self.homes if key not in self.seen]
        found = self.survey([*(self.homes[key] for key in asked), *alone])
        self.seen.update(zip(asked, found, strict=False))
        fitting = Fitting()
        for key, home in self.homes.items():
            fitting.enter(home, self.seen[key])
        for group, seen in zip(self.homeless, found[len(asked) :], strict=True):
            target, reason, strength = fitting.home(group, seen, *self._tied(group))
            if target is not None:
                for said in group:
                    target.add(said, reason, strength)
            elif reason:
                yield Unread(group[0].place, "not-attributed", reason, group[0].text)
            else:
                home = Substance("", _title(group))
                for said in group:
                    home.add(said, "without a label; taken as a substance of its own")
                self.homes[f"#{len(self.homes)}"] = home
                fitting.enter(home, seen)

    def _tied(self, group: Sequence[Evidence]) -> tuple[Substance | None, str, str]:
        """The substance that the place of a group is about, why, and how strongly it ties."""
        said = group[0]
        if said.apart:
            return None, "", WEAK
        home, named = self._in_title(said.under)
        if home is not None:
            structural = any(one.kind in _STRUCTURAL for one in group)
            why = f"stands under a title that names “{named}”"
            return home, why, WEAK if structural else FIRM
        home, why = self.standing.subject(said.place, self.drug)
        loose = not said.group and said.kind is Kind.NAME
        return home, why, WEAK if loose else FIRM

    def _in_title(self, title: str) -> tuple[Substance | None, str]:
        """The one substance that a title names by a label known from elsewhere."""
        found: dict[int, tuple[Substance, str]] = {}
        whole = self.homes.get(key_of(self.callings.called(title).title)) if title else None
        if whole is not None:
            return whole, title
        for words in words_of(title):
            home = self.homes.get(key_of(self.callings.called(words).title))
            if home is not None and len(key_of(words)) > 2:
                found.setdefault(id(home), (home, words))
        return next(iter(found.values())) if len(found) == 1 else (None, "")

    def not_followed(self) -> Iterator[Unread]:
        """The definitions that were not followed, where a label was left to itself by that."""
        seen: set[tuple[str, str]] = set()
        for term in self.callings.refused:
            pair = key_of(term.label), key_of(term.other)
            if pair in seen or pair[1] not in self.homes or pair[0] not in self.homes:
                continue
            seen.add(pair)
            detail = (
                f"“{term.other}” {term.said} “{term.label}”, but what stands under the two labels"
                " is not one substance for certain; they are kept apart"
            )
            yield Unread(term.place, "label-not-followed", detail, f"{term.label} ({term.other})")


def _codes(groups: Sequence[Sequence[Evidence]]) -> Iterator[Term]:
    """The codes that stand beside labels."""
    for group in groups:
        label = _label(group)
        others = dict.fromkeys(other for said in group for other in said.also)
        yield from beside(label, others, group[0].place)


def _groups(evidence: Sequence[Evidence]) -> list[list[Evidence]]:
    groups: dict[str, list[Evidence]] = {}
    for said in evidence:
        groups.setdefault(said.group or f"alone {said.id}", []).append(said)
    return list(groups.values())


def _label(group: Sequence[Evidence]) -> str:
    return next((said.label for said in group if said.label), "")


def _reason(said: Evidence, label: str, why: str) -> str:
    called = f"called “{label if label in said.hints else said.label or label}”"
    if not said.label:
        called = f"stands together with what is called “{label}”"
    return f"{called}, {why}" if why else called


def _title(group: Sequence[Evidence]) -> str:
    said = group[0]
    if said.group:
        parts = str(said.place).split(", ")
        kept = [part for part in parts if not part.startswith(("field", "column", "char"))]
        return f"{said.place.source}, {', '.join(kept)}"
    text = " ".join(said.text.split())
    return text if len(text) <= 60 else f"{text[:57]}…"
