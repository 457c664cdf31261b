"""The other substances that a substance's statements speak of ("the enantiomer of DX-101").

Their evidence goes with the substance to where it is judged, so that a relation can be computed
whichever process judges it.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from dossiercheck.calling import DRUG_SUBSTANCE, key_of, plays_a_part
from dossiercheck.language.statements import read_statement
from dossiercheck.model import Evidence, Role
from dossiercheck.settings import RegisterEntry
from dossiercheck.substances import Substance

Relatives = Mapping[str, Substance]


def other_label(said: Evidence) -> str:
    """The label of the substance that a statement compares its own with, "" for none."""
    if said.role is not Role.STEREO:
        return ""
    if said.other:
        return said.other
    statement = read_statement(said.text)
    return statement.other if statement else ""


def relatives(
    substances: Sequence[Substance], register: Sequence[RegisterEntry]
) -> list[Relatives]:
    """For each substance, in order, those that its statements name, by `key_of` their labels. A
    label that two substances bear names neither."""
    asked = [[label for said in one.evidence if (label := other_label(said))] for one in substances]
    if not any(asked):
        return [{} for _ in substances]
    known = _known(substances, register)
    return [
        {
            key_of(label): found
            for label in labels
            if (found := known.get(_key(label))) is not None and found is not one
        }
        for one, labels in zip(substances, asked, strict=True)
    ]


def _key(label: str) -> str:
    return key_of(DRUG_SUBSTANCE if plays_a_part(label) else label)


def _known(
    substances: Sequence[Substance], register: Sequence[RegisterEntry]
) -> dict[str, Substance | None]:
    known: dict[str, Substance | None] = {}

    def learn(label: str, substance: Substance) -> None:
        key = _key(label)
        if key and known.setdefault(key, substance) is not substance:
            known[key] = None

    by_title = {key_of(one.label): one for one in substances}
    for one in substances:
        for label in (one.label, *one.called):
            learn(label, one)
    for entry in register:
        titled = by_title.get(key_of(entry.id))
        for alias in entry.aliases if titled else ():
            assert titled is not None
            learn(alias, titled)
    drugs = [one for one in substances if one.role.casefold() == DRUG_SUBSTANCE]
    if len(drugs) == 1 and key_of(DRUG_SUBSTANCE) not in known:
        learn(DRUG_SUBSTANCE, drugs[0])
    return known
