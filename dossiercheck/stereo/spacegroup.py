"""Space groups: by symbol, number or list of operations, and whether one enantiomer can have them.

The table of space groups is the library's own (gemmi), after International Tables for
Crystallography, volume A.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cache

import gemmi

_SHORT_SCREW = re.compile(r"(?<=\d)\((\d)\)")  # P2(1)/c, as older programs write P 21/c
_SUBSCRIPTS = re.compile(r"</?(?:su[bp]|i|em)>|[_{}$~*]", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class SpaceGroup:
    """`number` is that of International Tables, 0 where the group could not be named;
    `settings` counts the origins and cells that the symbol leaves open.

    `sohncke`: only rotations, screws and translations, so that a crystal of one enantiomer can
    have it (65 of the 230 types).
    """

    number: int
    symbol: str
    sohncke: bool
    settings: int = 1


def space_group(text: str) -> SpaceGroup | None:
    """A space group by its Hermann–Mauguin symbol, its number in International Tables, or its
    list of operations, separated by semicolons; None where it is not known."""
    if ";" in text or re.fullmatch(r"\s*x\s*,\s*y\s*,\s*z\s*", text, re.IGNORECASE):
        ops = parse_operations(text.split(";"))
        return group_of_operations(ops) if ops else None
    plain = _SUBSCRIPTS.sub("", unicodedata.normalize("NFKC", text.replace("−", "-")))
    plain = _SHORT_SCREW.sub(r"\1", plain)
    plain = re.sub(r"(\d)\u0305|\u0305(\d)", r"-\1\2", unicodedata.normalize("NFC", plain))
    plain = re.sub(r"\s*\((?:no\.?|number|#)\s*\d+\)\s*$", "", plain, flags=re.IGNORECASE)
    return _known(" ".join(plain.split()))


@cache
def _known(symbol: str) -> SpaceGroup | None:
    if re.fullmatch(r"\d{1,3}", symbol):
        number = int(symbol)
        if not 1 <= number <= 230:
            return None
        found = gemmi.find_spacegroup_by_number(number)
        return SpaceGroup(number, found.xhm(), found.is_sohncke(), 2)
    if not symbol or len(symbol) > 40:
        return None
    named = gemmi.find_spacegroup_by_name(symbol)
    if named is not None:
        open_settings = 1
        if ":" not in symbol:
            same = [g for g in gemmi.spacegroup_table() if g.hm == named.hm]
            open_settings = len(same)
        return SpaceGroup(named.number, named.xhm(), named.is_sohncke(), open_settings)
    return None


@cache
def hall_group(symbol: str) -> SpaceGroup | None:
    """A space group by its Hall symbol. The two notations must not be mixed up: "P 4 2" is
    P 4 2 2 after Hall and P 4₂ after Hermann and Mauguin."""
    if not symbol or len(symbol) > 60:
        return None
    try:
        return group_of_operations(list(gemmi.symops_from_hall(symbol)))
    except (RuntimeError, ValueError):
        return None


def parse_operations(texts: Sequence[str]) -> tuple[gemmi.Op, ...] | None:
    """Symmetry operations in the notation "x,1/2-y,-z"; None where they form no group."""
    if not 0 < len(texts) <= 192:
        return None
    try:
        ops = [gemmi.Op(text.strip().strip("'\"").lower()).wrap() for text in texts]
    except (RuntimeError, ValueError):
        return None
    distinct = {op.triplet() for op in ops}
    if len(distinct) != len(ops) or "x,y,z" not in distinct:
        return None
    if any(abs(op.det_rot()) != op.DEN**3 for op in ops):
        return None
    # A group is closed: every product of two operations is one of them.
    if any((one * two).wrap().triplet() not in distinct for one in ops for two in ops):
        return None
    return tuple(ops)


def group_of_operations(ops: Sequence[gemmi.Op]) -> SpaceGroup | None:
    """The space group that a complete list of operations makes up; in a setting that no table
    names it has no number."""
    sohncke = all(op.det_rot() > 0 for op in ops)
    found = gemmi.find_spacegroup_by_ops(gemmi.GroupOps(list(ops)))
    if found is None:
        return SpaceGroup(0, "unnamed setting", sohncke)
    return SpaceGroup(found.number, found.xhm(), sohncke)
