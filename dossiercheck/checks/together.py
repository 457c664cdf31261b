"""Substances held against one another, and printed values of one substance at several places."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.calling import kind_of
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.dossier import Dossier, Portrait
from dossiercheck.interpretation import Reading
from dossiercheck.model import Evidence, Exhibit, Role
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Unreadable

# Two numbers may mean one compound (two batches, two standards): nothing follows from it.
_LOOSE = ("compound", "referencestandard")
_STRUCTURAL = (Role.MOLFILE, Role.SMILES, Role.INCHI, Role.NAME)


@check(needs=("dossier",), fields=("name", "one", "other"))
def name_for_two_labels(case: Dossier, params: Params) -> Iterator[Observation]:
    """One systematic name under two labels of a kind ("Impurity B" and "Impurity D").

    An impurity may be an intermediate too; then its two labels are of two kinds.
    """
    met: dict[tuple[str, str], tuple[Portrait, Evidence]] = {}
    for portrait in case.portraits:
        kind = _kind(portrait)
        names = [said for said in _firm(portrait) if said.role is Role.NAME]
        for said in names if kind else ():
            earlier, first = met.setdefault((kind, _plain(said.text)), (portrait, said))
            if earlier is not portrait:
                yield _both(
                    {"name": " ".join(said.text.split())}, (earlier, first), (portrait, said)
                )
                break


@check(needs=("dossier",), fields=("one", "other"))
def structure_for_two_labels(case: Dossier, params: Params) -> Iterator[Observation]:
    """One stereoisomer under two labels of a kind, called by two names or by none."""
    met: dict[tuple[str, object], Portrait] = {}
    for portrait in case.portraits:
        kind = _kind(portrait)
        if not kind or len(portrait.identities) != 1 or not _is_settled(portrait):
            continue
        earlier = met.setdefault((kind, next(iter(portrait.identities))), portrait)
        if earlier is portrait or _names(earlier) & _names(portrait):
            continue
        sides = [(one, _structural(one)) for one in (earlier, portrait)]
        yield _both({}, *sides)


@check(needs=("property",), fields=("role", "stated", "elsewhere"), params={"role": str})
def printed_differs(case: Case, params: Params) -> Iterator[Observation]:
    """Two places print different values for one substance, and no structure says which is right.

    `role` is "formula" or "registry". Registry numbers are compared between files only: one entry
    may list the numbers that were given to one substance at different times.
    """
    role = {"formula": Role.FORMULA, "registry": Role.REGISTRY}[params["role"]]
    if role is Role.FORMULA and case.structure is not None:
        return
    first: Reading | None = None
    for reading in case.of_role(role):
        if first is None:
            first = reading
        elif _apart(first, reading) and _value(first) != _value(reading):
            yield Observation(
                {
                    "role": str(role),
                    "stated": reading.evidence.text.strip(),
                    "elsewhere": first.evidence.text.strip(),
                },
                (exhibit(reading), exhibit(first)),
            )


def _kind(portrait: Portrait) -> str:
    kind = kind_of(portrait.substance.label)
    return "" if kind in _LOOSE else kind


def _apart(one: Reading, two: Reading) -> bool:
    if one.evidence.role is Role.REGISTRY:
        return one.evidence.place.source != two.evidence.place.source
    return one.evidence.group != two.evidence.group


def _value(reading: Reading) -> object:
    if reading.formula is not None:
        return tuple(sorted(reading.formula.counts.items()))
    return "".join(c for c in reading.evidence.text if c.isdigit())


def _both(
    values: dict[str, str], one: tuple[Portrait, Evidence], two: tuple[Portrait, Evidence]
) -> Observation:
    labels = {"one": one[0].substance.label, "other": two[0].substance.label}
    sides = tuple(_quoted(*side) for side in (two, one))
    return Observation({**values, **labels}, sides, substance=two[0].entry.id)


def _quoted(portrait: Portrait, said: Evidence) -> Exhibit:
    text = said.text if said.role is not Role.MOLFILE else ""
    return Exhibit(said.id, portrait.substance.label, text, said.place)


def _firm(portrait: Portrait) -> list[Evidence]:
    return [said for said in portrait.entry.evidence if said.id not in portrait.substance.weak]


def _structural(portrait: Portrait) -> Evidence:
    return next(said for said in _firm(portrait) if said.role in _STRUCTURAL)


def _is_settled(portrait: Portrait) -> bool:
    """Whether a SMILES says which stereoisomer it is: nothing is open, and there is no axis."""
    (identity,) = portrait.identities
    if identity.kind not in ("absolute", "achiral"):
        return False
    try:
        structure = from_smiles(identity.smiles)
    except Unreadable:
        return False
    return not structure.undefined and not structure.axis_atoms


def _names(portrait: Portrait) -> set[str]:
    return {_plain(said.text) for said in _firm(portrait) if said.role is Role.NAME}


def _plain(name: str) -> str:
    return "".join(name.split())
