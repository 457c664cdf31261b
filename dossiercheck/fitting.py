"""Which substance evidence without a label fits, by what its structures are."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from dossiercheck.model import Evidence, Kind
from dossiercheck.substances import FIRM, WEAK, Identity, Substance

Seen = frozenset[Identity]


@dataclass(slots=True)
class Fitting:
    """Which substances have a structure: by constitution and by parent."""

    _by_form: dict[str, list[tuple[Substance, Identity]]] = field(default_factory=dict)

    def enter(self, home: Substance, seen: Seen) -> None:
        """Take what a substance is."""
        for identity in sorted(seen, key=lambda one: (one.smiles, one.kind)):
            for form in {identity.flat, identity.parent} - {""}:
                self._by_form.setdefault(form, []).append((home, identity))

    def home(
        self, group: Sequence[Evidence], seen: Seen, tied: Substance | None, why: str, strength: str
    ) -> tuple[Substance | None, str, str]:
        """The home of a group, the reason and its strength; without a home the reason says why
        nobody can be held to be spoken of, "" where the group stands for itself."""
        alone = not group[0].group
        if not seen and tied is None:
            return None, "", WEAK
        if not seen:
            unlike = group[0].kind is Kind.NAME
            return tied, f"without a label; {why}", WEAK if unlike else strength
        alike = [entry for one in seen for entry in self._by_form.get(one.flat, [])]
        exact = {id(home): home for home, identity in alike if seen == {identity}}
        if tied is not None and id(tied) in exact:
            return tied, f"without a label; says exactly what this substance is, and {why}", FIRM
        if len(exact) == 1 or (exact and alone):
            return (
                next(iter(exact.values())),
                "without a label; says exactly what this substance is",
                FIRM,
            )
        related = [*alike, *(entry for one in seen for entry in self._by_form.get(one.parent, []))]
        if tied is not None and any(home is tied for home, _ in related):
            same = any(home is tied for home, _ in alike)
            form = "has its constitution" if same else "is a form of it"
            return tied, f"without a label; {why}; {form}", strength
        if alone and alike:
            return None, _nobody([home.label for home, _ in alike]), WEAK
        return None, "", WEAK


def _nobody(labels: Sequence[str]) -> str:
    names = " or ".join(f"“{label}”" for label in list(dict.fromkeys(labels))[:3])
    return (
        f"has the constitution of {names} but not the same configuration, and the text does not"
        " say of which substance it speaks"
    )
