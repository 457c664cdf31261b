"""A derivation as plain data, and back: what `findings.json` and the pages hold of it."""

from __future__ import annotations

from typing import Any

from dossiercheck.model import Derived, RankPlace, Sight

Json = dict[str, Any]


def derived_json(derived: Derived) -> Json:
    """A unit's derivation; `descriptor`, `ours` and `library` are None where there is none."""
    return {
        "kind": derived.kind,
        "atoms": list(derived.atoms),
        "locant": derived.locant,
        "descriptor": derived.descriptor or None,
        "ours": derived.ours or None,
        "library": derived.library or None,
        "note": derived.note,
        "steps": list(derived.steps),
        "sight": _sight(derived.sight),
    }


def _sight(sight: Sight | None) -> Json | None:
    """What is marked in the drawing, with rows for the ranks as drawings have them for atoms."""
    if sight is None:
        return None
    return {
        "kind": sight.kind,
        "atoms": list(sight.atoms),
        "ranks": [[one.rank, one.atom, one.label, one.end, one.held] for one in sight.ranks],
        "turn": sight.turn,
        "numbers": [[atom, text] for atom, text in sight.numbers],
    }


def sight_of(found: Json) -> Sight:
    """The data type again, from the document's rows."""
    return Sight(
        found["kind"],
        tuple(found["atoms"]),
        tuple(RankPlace(*row) for row in found["ranks"]),
        found["turn"],
        tuple((atom, text) for atom, text in found["numbers"]),
    )


def heading(derived: Json) -> str:
    """A unit and its descriptor in a few words."""
    atoms = ", ".join(str(atom) for atom in derived["atoms"])
    where = f"atom {atoms}" if len(derived["atoms"]) == 1 else f"atoms {atoms}"
    if derived["locant"]:
        where = f"locant {derived['locant']}, {where}"
    return f"{derived['kind']} at {where}: {derived['descriptor'] or 'undetermined'}"
