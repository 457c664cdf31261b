"""Replays a derivation in the molecule, without any code of the engine: what in it is untrue?

Each stated path is followed, the set there made anew, the rule applied to it, and the letter worked
out from the ranks (IUPAC 2013, P-92.1.4 and P-92.2 to P-92.6). Auxiliary descriptors are taken as
stated; what they are worth under the rule is not.
"""

from collections import Counter
from collections.abc import Iterator
from itertools import pairwise
from typing import Any

from rdkit import Chem

from tests.unit.stereo.anew import around, spheres, turned, worth

WORTH = {"3": {"Z": 2, "E": 1}, "4c": {"r": 2, "m": 2, "s": 1, "p": 1}}
WORTH["4a"] = dict.fromkeys("RSMPez", 2) | dict.fromkeys("rsmpEZ", 1)
WORTH["4b"] = WORTH["5"] = dict.fromkeys("RMz", 1) | dict.fromkeys("SPe", -1)
FAR = 7  # so many spheres are compared before the deciding one


def unfounded(mol: Chem.Mol, means: dict[int, float], one: Any, side: Any) -> bool:
    path, ligand = tuple(atom - 1 for atom in side.path), side.ligand - 1
    bonds = [mol.GetBondBetweenAtoms(*s) if min(s) >= 0 else None for s in pairwise(path)]
    if any(bond is None for bond in bonds[:-1]) or (*path, ligand)[1] != ligand:
        return True
    # A path may end at a hydrogen or a duplicate: of a ring closure, a multiple bond, or a mean.
    double = bool(bonds and bonds[-1]) and bonds[-1].GetBondTypeAsDouble() > 1
    closed = path[-1] in path[:-1] or path[-1] < 0 or (double and not side.entries)
    nodes = [] if closed else around(mol, means, path)
    if not bonds:
        nodes = [node for node in nodes if node[::2] == (ligand, -1)][:1]
    values = [entry.value for entry in side.entries]
    if one.rule in WORTH:
        worths = [WORTH[one.rule].get(entry.descriptor, 0) for entry in side.entries]
        wrong = worths != values and not (one.rule == "4b" and [-w for w in worths] == values)
    elif one.rule == "6":
        favoured = {e.atom for e in (*one.higher.entries, *one.lower.entries) if e.value}
        wrong = len(favoured) != 1 or values != [e.atom in favoured for e in side.entries]
    else:
        made = Counter((n[0] + 1, n[2] >= 0, worth(mol, one.rule, *n)) for n in nodes)
        wrong = made != Counter((e.atom, e.duplicate, e.value) for e in side.entries)
    made = Counter((node[0] + 1, node[2] >= 0) for node in nodes)
    return wrong or made != Counter((entry.atom, entry.duplicate) for entry in side.entries)


def untrue(mol: Chem.Mol, means: dict[int, float], unit: Any) -> Iterator[str]:
    """What is not so in a unit's derivation; `mol` and `means` as `anew.prepared` gives them."""
    ends = [[r for r in unit.derivation.ranks if r.end == end + 1] for end in unit.atoms]
    pairs = [p for end in ends for p in pairwise([r for r in end if r.label != "lone pair"])]
    said = [(one.higher.ligand, one.lower.ligand) for one in unit.derivation.comparisons]
    named = ["".join(rank.rank for rank in end) in ("ab", "abcd") for end in ends]
    if [(a.ligand, b.ligand) for a, b in pairs] != said or not all(named):
        yield "the ranks do not follow from the comparisons"
    for one in unit.derivation.comparisons:
        sides, depth = (one.higher, one.lower), one.sphere - 1 if one.rule == "1a" else FAR
        if any(unfounded(mol, means, one, s) or len(s.path) != one.sphere for s in sides):
            yield f"not in the molecule: {one}"
        high, low = ([entry.value for entry in side.entries] for side in sides)
        if high <= low or (
            one.rule == "1a" and sorted(high) + sorted(low) != high[::-1] + low[::-1]
        ):
            yield f"not higher: {one}"
        starts = [(side.path[0] - 1, side.ligand - 1) for side in sides]
        before = [spheres(mol, means, start, min(depth, FAR)) for start in starts]
        if before[0] != before[1]:
            yield f"decided before: {one}"
    letter = turned(mol, unit.atoms, [[rank.ligand - 1 for rank in end] for end in ends])
    small = unit.ours in "rs" and all(one.rule != "5" for one in unit.derivation.comparisons)
    if small or letter not in ("", unit.ours.upper()):
        yield f"the ranks give {letter} and not {unit.ours}"
