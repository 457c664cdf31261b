"""Statements that were understood and yet held against nothing: listed, for they look clean."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.calling import key_of
from dossiercheck.checks.claims import meant, stated
from dossiercheck.concordance import Case
from dossiercheck.language.statements import Statement
from dossiercheck.model import Unread
from dossiercheck.stereo.arrangement import arrangement


def uncompared(case: Case) -> Iterator[Unread]:
    """An unread entry for each statement of which a part could not be compared, with the reason."""
    for reading, statement in stated(case):
        said = reading.evidence
        why = ""
        if statement.relation or statement.step:
            why = _of_another(case, said.other or statement.other)
        elif case.structure is None and not said.group:
            why = f"nothing that was read gives a structure of “{case.substance.label}”"
        else:
            why = _undecided(case, statement)
        if why:
            yield Unread(said.place, "statement-not-compared", why, said.text)


def _of_another(case: Case, label: str) -> str:
    other = case.others.get(key_of(label))
    if other is None or other.structure is None:
        return f"nothing that was read gives a structure of “{label}”"
    if case.structure is None:
        return f"nothing that was read gives a structure of “{case.substance.label}”"
    return ""


def _undecided(case: Case, statement: Statement) -> str:
    structure = case.structure
    if structure is None:
        return ""
    for locant, letter in statement.letters:
        if not meant(case, structure, locant, letter):
            where = f"{letter} at {locant}" if locant else letter
            return f"which stereogenic unit “{where}” speaks of cannot be told for certain"
    for word in statement.words:
        if not arrangement(structure, word)[0]:
            return f"geometry alone does not decide what “{word}” means for this structure"
    return ""
