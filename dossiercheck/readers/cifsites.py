"""One block of a CIF to a cell, its symmetry operations and its atom sites, or the reason why not.

Data names are those of the core CIF dictionary and the names they replaced.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from math import isfinite

import gemmi
from gemmi import cif

from dossiercheck.limits import Refused
from dossiercheck.readers.packing import Crystal, Site
from dossiercheck.stereo.spacegroup import (
    group_of_operations,
    hall_group,
    parse_operations,
    space_group,
)

MOST_SITES = 2_000

_CELL = (
    "_cell_length_a",
    "_cell_length_b",
    "_cell_length_c",
    "_cell_angle_alpha",
    "_cell_angle_beta",
    "_cell_angle_gamma",
)
_OPERATIONS = ("_space_group_symop_operation_xyz", "_symmetry_equiv_pos_as_xyz")
SYMBOLS = (
    "_space_group_name_H-M_alt",
    "_symmetry_space_group_name_H-M",
    "_space_group_IT_number",
    "_symmetry_Int_Tables_number",
)
_HALL = ("_space_group_name_Hall", "_symmetry_space_group_name_Hall")
_SITE = "_atom_site_"
_COLUMNS = ("label", "fract_x", "fract_y", "fract_z")
_OPTIONAL = ("type_symbol", "occupancy", "disorder_assembly", "disorder_group", "calc_flag")
_SYMBOL = re.compile(r"([A-Za-z]{1,2})(?:\d*[+-]\d*)?")
_HEAD = re.compile(r"[A-Za-z]+")


def value(block: cif.Block, tag: str) -> str:
    """The value of a data name, "" where it is absent, unknown or not applicable."""
    raw = block.find_value(tag)
    text = "" if raw is None else cif.as_string(raw).strip()
    return "" if text in ("?", ".") else text  # some programs put the sign into quotes


def has_sites(block: cif.Block) -> bool:
    """Whether the block lists atoms in fractional coordinates."""
    return len(block.find_loop(_SITE + "fract_x")) > 0


def crystal(block: cif.Block) -> Crystal:
    """Raises `Refused` with the reason why the block gives no crystal."""
    cell = [_number(value(block, tag), tag) for tag in _CELL]
    a, b, c, alpha, beta, gamma = cell
    return Crystal((a, b, c, alpha, beta, gamma), operations(block), tuple(_sites(block)))


def operations(block: cif.Block) -> tuple[gemmi.Op, ...]:
    """All operations of the block's space group.

    Raises `Refused`: "space-group-not-known" where none are given and the symbol leaves the
    setting open, "space-group-contradictory" where operations and symbol part.
    """
    by_hall = next((found for tag in _HALL if (found := hall_group(value(block, tag)))), None)
    stated = [found for tag in SYMBOLS if (found := space_group(value(block, tag)))]
    stated = [by_hall, *stated] if by_hall else stated
    listed = listed_operations(block)
    if not listed:
        if not stated:
            raise Refused("space-group-not-known", "Neither operations nor a known space group.")
        if stated[0].settings > 1:
            detail = f"The symbol {stated[0].symbol} leaves the setting open, and no operations."
            raise Refused("space-group-not-known", detail)
        return tuple(gemmi.SpaceGroup(stated[0].symbol).operations())
    ops = parse_operations(listed)
    if ops is None:
        raise Refused("space-group-not-known", "The symmetry operations listed make no group.")
    known = group_of_operations(ops)
    if known:
        for group in stated:
            if group.number != known.number:
                raise Refused(
                    "space-group-contradictory",
                    f"The operations are those of {known.symbol}, the symbol says {group.symbol}.",
                )
    return ops


def listed_operations(block: cif.Block) -> tuple[str, ...]:
    """The operations as the block lists them, none where it does not."""
    for tag in _OPERATIONS:
        column = block.find_loop(tag)
        if len(column):
            return tuple(cif.as_string(text) for text in column)
        if value(block, tag):
            return (value(block, tag),)
    return ()


def _sites(block: cif.Block) -> Iterator[Site]:
    tags = [*_COLUMNS, *(f"?{name}" for name in _OPTIONAL)]
    table = block.find(_SITE, tags)
    if not table:
        raise Refused("no-structure", "The atom list has no labels or lacks a coordinate.")
    if len(table) > MOST_SITES:
        raise Refused("size-budget", f"The block lists {len(table)} atom sites.")
    met: set[str] = set()
    for row in table:
        found = [row.str(n) if row.has(n) else "" for n in range(len(tags))]
        label, x, y, z, symbol, occupancy, assembly, group, flag = (
            "" if text in ("?", ".") else text.strip() for text in found
        )
        if flag == "dum":
            continue
        if label in met or not label:
            raise Refused("damaged-record", f"Two atom sites are called “{label}”.")
        met.add(label)
        yield Site(
            label,
            _element(symbol, label),
            (_number(x, label), _number(y, label), _number(z, label)),
            _number(occupancy, label) if occupancy else 1.0,
            assembly,
            _whole(group, label) if group else 0,
        )


def _number(text: str, what: str) -> float:
    found = cif.as_number(text) if text else float("nan")
    if not isfinite(found) or abs(found) > 1e4:
        raise Refused("damaged-record", f"{what}: “{text[:40]}” is no number that can be meant.")
    return found


def _whole(text: str, label: str) -> int:
    if not re.fullmatch(r"[+-]?\d{1,3}", text):
        raise Refused("unresolved-disorder", f"{label}: the disorder group is “{text[:20]}”.")
    return int(text)


def _element(symbol: str, label: str) -> str:
    """The element by the type symbol; by the label only where it can be no other."""
    stated = _SYMBOL.fullmatch(symbol)
    if stated:
        name = stated[1].capitalize()
        if name == "D" or gemmi.Element(name).atomic_number:
            return name
    head = _HEAD.match(label)
    text = head[0] if head and not symbol else ""
    if len(text) == 1 and gemmi.Element(text.upper()).atomic_number:
        return text.upper()
    if len(text) == 2 and text[1].islower() and gemmi.Element(text).atomic_number:
        return text
    raise Refused("element-not-known", f"Which element {label} is, is not said for certain.")
