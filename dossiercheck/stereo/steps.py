"""Retention or inversion: the arrangement at the centres of a compound before and after a step.

Letters prove nothing here: R may become S because a ligand's rank changed. The unchanged part of
both compounds is laid on each other, and at each centre the unchanged ligands are compared, an
exchanged ligand standing for the one that it takes the place of (IUPAC Gold Book, "inversion",
"retention of configuration"). Where the unchanged part can be laid in ways that disagree, nothing
is said.
"""

from __future__ import annotations

from dataclasses import dataclass

from rdkit import Chem
from rdkit.Chem import rdFMCS

from dossiercheck.stereo.graph import Centre, Graph, graph_of, same_centre
from dossiercheck.stereo.structure import Structure

RETENTION = "retention"
INVERSION = "inversion"

# The largest common part is searched among so many atoms only; the search is exponential.
_MOST_ATOMS = 70
_MOST_WAYS = 200
_SECONDS = 20
_EXCHANGED = 10**9  # stands for the ligand that is exchanged, on both sides


@dataclass(frozen=True, slots=True)
class Step:
    """`kind` is "retention", "inversion" or "" (undetermined, `note` says why); `before` and
    `after` are the atoms (0-based) of the centres that decide, in each structure."""

    kind: str
    before: tuple[int, ...] = ()
    after: tuple[int, ...] = ()
    note: str = ""


def compare_step(one: Structure, two: Structure) -> Step:
    """What happened on the way from `one` to `two`, at the one centre whose ligand is exchanged,
    or else at all centres that both have."""
    if one.groups or two.groups or one.doubt or two.doubt:
        return Step("", note="the configuration of one of them is not certain")
    mols = [_main(one), _main(two)]
    if max(mol.GetNumAtoms() for mol, _ in mols) > _MOST_ATOMS:
        return Step("", note="too large to be laid on each other")
    common = rdFMCS.FindMCS(
        [mol for mol, _ in mols],
        timeout=_SECONDS,
        ringMatchesRingOnly=True,
        completeRingsOnly=True,
    )
    if common.canceled or common.numAtoms < 4:
        return Step("", note="no common part was found")
    pattern = Chem.MolFromSmarts(common.smartsString)
    ways = [mol.GetSubstructMatches(pattern, False, True, _MOST_WAYS + 1) for mol, _ in mols]
    if max(map(len, ways)) > _MOST_WAYS:
        return Step("", note="too symmetric to be laid on each other in every way")
    graphs = graph_of(one), graph_of(two)
    laid: dict[int, list[dict[int, int]]] = {}
    for mine in ways[0]:
        for theirs in ways[1]:
            mapping = {mols[0][1][a]: mols[1][1][b] for a, b in zip(mine, theirs, strict=True)}
            laid.setdefault(_alike(graphs, mapping), []).append(mapping)
    found: dict[str, Step] = {}
    for mapping in laid[max(laid)]:
        step = _judged(one, two, graphs, mapping)
        found.setdefault(step.kind, step)
    if len(found) != 1:
        return Step("", note="the common part can be laid in ways that disagree")
    return next(iter(found.values()))


def _main(structure: Structure) -> tuple[Chem.Mol, list[int]]:
    """The largest component without stereo marks, and its atoms in the structure."""
    kept = max(structure.components(), key=lambda part: (len(part), -part[0]))
    heavy = [a for a in kept if structure.mol.GetAtomWithIdx(a).GetAtomicNum() > 1]
    mol = Chem.RWMol(structure.mol)
    for atom in mol.GetAtoms():
        atom.SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    for index in reversed(range(structure.mol.GetNumAtoms())):
        if index not in heavy:
            mol.RemoveAtom(index)
    plain = mol.GetMol()
    Chem.FastFindRings(plain)
    return plain, sorted(heavy)


def _alike(graphs: tuple[Graph, Graph], mapping: dict[int, int]) -> int:
    """How many atoms have as many hydrogens and neighbours as their images: what did not react."""
    one, two = graphs
    return sum(
        one.hydrogens[a] == two.hydrogens[b] and len(one.near[a]) == len(two.near[b])
        for a, b in mapping.items()
    )


def _judged(
    one: Structure, two: Structure, graphs: tuple[Graph, Graph], mapping: dict[int, int]
) -> Step:
    units = [{u.atoms[0] for u in s.units if u.kind == "centre"} for s in (one, two)]
    touched: list[tuple[int, int, str]] = []
    whole: list[tuple[int, int, str]] = []
    for atom in sorted(units[0]):
        image = mapping.get(atom)
        if image is None or image not in units[1]:
            continue
        here, there = graphs[0].centres[atom], graphs[1].centres[image]
        outcome = _outcome(here, there, mapping)
        if outcome is None:
            return Step("", note="a centre's ligands do not correspond")
        kind, exchanged = outcome
        (touched if exchanged else whole).append((atom, image, kind))
    deciding = touched or whole
    if not deciding or len(touched) > 1:
        return Step("", note="no one centre can be told to be meant")
    kinds = {kind for _, _, kind in deciding}
    if len(kinds) > 1:
        return Step("", note="some centres are retained and some inverted")
    before = tuple(atom for atom, _, _ in deciding)
    after = tuple(image for _, image, _ in deciding)
    return Step(kinds.pop(), before, after)


def _outcome(here: Centre, there: Centre, mapping: dict[int, int]) -> tuple[str, bool] | None:
    """Retention or inversion at one centre, and whether one of its ligands was exchanged."""
    gone = [a for a in here.order if a >= 0 and mapping.get(a) not in there.order]
    carried = {mapping.get(a) for a in here.order if a >= 0}
    come = [b for b in there.order if b >= 0 and b not in carried]
    if len(gone) != len(come) or len(gone) > 1:
        return None
    if gone:
        mapping = {**mapping, gone[0]: come[0]}
    same = same_centre(here, there, mapping)
    if same is None:
        return None
    return (RETENTION if same else INVERSION), bool(gone)
