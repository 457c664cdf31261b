"""Optical rotation and enantiomeric excess, held against what rotates at all.

The sign is never compared with R or S: nothing leads from one to the other.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations

from dossiercheck.checks.claims import quoted, stated
from dossiercheck.checks.configuration import hand_open
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.checks.statements import stereo_kind
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.model import Role
from dossiercheck.stereo.descriptors import all_certain

_INACTIVE = ("racemic", "achiral", "inactive")


def _inactive(case: Case) -> tuple[str, Reading] | None:
    """Why the substance rotates no light: what it is, and the evidence for it."""
    structure = case.structure
    if structure is not None and case.reference is not None:
        kind = stereo_kind(structure)
        certain = not structure.doubt and not structure.axis_atoms and not hand_open(structure)
        if kind in ("racemic", "achiral") and certain and all_certain(structure):
            return kind, case.reference
    for reading, statement in stated(case):
        if statement.kind in _INACTIVE:
            return {"inactive": "optically inactive"}.get(statement.kind, statement.kind), reading
    return None


@check(needs=("property",), fields=("printed", "found"), params={"least": float})
def rotation_impossible(case: Case, params: Params) -> Iterator[Observation]:
    """A rotation of `least` degrees or more is printed for a racemate or an achiral substance."""
    readings = [r for r in case.of_role(Role.ROTATION) if r.rotation]
    why = _inactive(case) if readings else None
    if why is None:
        return
    for reading in readings:
        assert reading.rotation is not None
        if reading.rotation.size >= params["least"]:
            yield Observation(
                {"printed": quoted(reading), "found": why[0]}, (exhibit(reading), exhibit(why[1]))
            )


@check(needs=("property",), fields=("one", "two", "solvent", "wavelength"))
def rotation_signs_differ(case: Case, params: Params) -> Iterator[Observation]:
    """Two rotations of opposite sign in one solvent at one wavelength, nothing else that is
    printed for both being different."""
    readings = [r for r in case.of_role(Role.ROTATION) if r.rotation and r.rotation.sign]
    for first, second in combinations(readings, 2):
        one, two = first.rotation, second.rotation
        assert one is not None
        assert two is not None
        if one.sign == two.sign or not one.solvent or one.solvent != two.solvent:
            continue
        if not one.wavelength or one.wavelength != two.wavelength:
            continue
        if one.temperature and two.temperature and one.temperature != two.temperature:
            continue
        yield Observation(
            {
                "one": quoted(first),
                "two": quoted(second),
                "solvent": one.solvent,
                "wavelength": one.wavelength,
            },
            (exhibit(first), exhibit(second)),
        )
        return


@check(needs=("statement",), fields=("stated", "excess"), params={"least": float})
def excess_of_racemate(case: Case, params: Params) -> Iterator[Observation]:
    """An enantiomeric excess of `least` per cent or more is stated of a racemate."""
    for reading, statement in stated(case):
        if statement.excess is None or statement.excess < params["least"]:
            continue
        why = _inactive(case)
        if why is not None and why[0] == "racemic" and why[1] is not reading:
            yield Observation(
                {
                    "stated": quoted(why[1]) if why[1].statement else "a racemate",
                    "excess": f"{statement.excess:g}",
                },
                (exhibit(reading), exhibit(why[1])),
            )
