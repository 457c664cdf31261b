"""Disorder of a crystal structure: the part that is kept, and the parts that it stands for.

Sites of one assembly and one group are there together; the groups of an assembly exclude one
another (core CIF dictionary, `_atom_site_disorder_assembly`, `_atom_site_disorder_group`).
Refinement programs number the parts without naming assemblies: two parts 1 and 2 are then told
apart from others by their shares, which add up to one (common practice).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from dossiercheck.limits import Refused
from dossiercheck.readers.packing import Site

_FULL = 0.99
_SUM = 0.03
_SPREAD = 0.06
_MOST_ALTERNATIVES = 12


@dataclass(frozen=True, slots=True)
class Parts:
    """`major` are the sites of the ordered atoms and, of each assembly, of the group that is
    there most often; `others` put one other group in its place, each in turn. `note` says what
    was left aside, "" where nothing was."""

    major: tuple[Site, ...]
    others: tuple[tuple[Site, ...], ...] = ()
    note: str = ""


def parts(sites: Sequence[Site]) -> Parts:
    """The consistent parts of a list of sites. Raises `Refused` ("unresolved-disorder")."""
    ordered: list[int] = []
    assemblies: dict[tuple[str, float], dict[int, list[int]]] = {}
    two = _of_two_parts(sites)
    for number, site in enumerate(sites):
        if site.group < 0:
            ordered.append(number)  # its other parts are its own images
        elif site.group:
            share = min(site.occupancy, 1 - site.occupancy) if site.assembly in two else 0.0
            key = (site.assembly, round(share, 2))
            assemblies.setdefault(key, {}).setdefault(site.group, []).append(number)
        elif site.occupancy < _FULL:
            raise Refused(
                "unresolved-disorder",
                f"{site.label} is there to {site.occupancy:g} and belongs to no disorder group.",
            )
        else:
            ordered.append(number)
    shares = {key: _shares(sites, groups) for key, groups in assemblies.items()}
    kept = {key: max(found, key=lambda g: (found[g], -g)) for key, found in shares.items()}
    major = _chosen(sites, ordered, assemblies, kept)
    swaps = [
        {**kept, key: group}
        for key, groups in assemblies.items()
        for group in sorted(groups)
        if group != kept[key]
    ]
    if len(swaps) > _MOST_ALTERNATIVES:
        raise Refused("unresolved-disorder", f"The disorder has {len(swaps)} minor parts.")
    others = tuple(_chosen(sites, ordered, assemblies, swap) for swap in swaps)
    return Parts(major, others, "; ".join(_notes(sites, assemblies, shares, kept)))


def _of_two_parts(sites: Sequence[Site]) -> set[str]:
    groups: dict[str, set[int]] = {}
    for site in sites:
        if site.group > 0:
            groups.setdefault(site.assembly, set()).add(site.group)
    return {assembly for assembly, found in groups.items() if found == {1, 2}}


def _shares(sites: Sequence[Site], groups: dict[int, list[int]]) -> dict[int, float]:
    shares = {}
    for group, numbers in groups.items():
        found = [sites[number].occupancy for number in numbers]
        if max(found) - min(found) > _SPREAD:
            raise Refused(
                "unresolved-disorder",
                f"The sites of disorder group {group} are there to {min(found):g} up to"
                f" {max(found):g}.",
            )
        shares[group] = sum(found) / len(found)
    if abs(sum(shares.values()) - 1) > _SUM:
        names = sites[next(iter(groups.values()))[0]].label
        raise Refused(
            "unresolved-disorder",
            f"The groups of the disorder at {names} are there to {sum(shares.values()):.2f}"
            " together, not to 1.",
        )
    return shares


def _chosen(
    sites: Sequence[Site],
    ordered: Sequence[int],
    assemblies: dict[tuple[str, float], dict[int, list[int]]],
    kept: dict[tuple[str, float], int],
) -> tuple[Site, ...]:
    chosen = sorted([*ordered, *(n for key, group in kept.items() for n in assemblies[key][group])])
    return tuple(sites[number] for number in chosen)


def _notes(
    sites: Sequence[Site],
    assemblies: dict[tuple[str, float], dict[int, list[int]]],
    shares: dict[tuple[str, float], dict[int, float]],
    kept: dict[tuple[str, float], int],
) -> Iterator[str]:
    for key, groups in assemblies.items():
        for group, numbers in groups.items():
            if group != kept[key]:
                names = ", ".join(sites[number].label for number in numbers[:6])
                more = ", …" if len(numbers) > 6 else ""
                yield f"group {group} (to {shares[key][group]:.2f}): {names}{more}"
