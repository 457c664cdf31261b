"""One structure laid on another: constitution first, then every stereogenic unit."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from rdkit import Chem

from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.graph import Graph, graph_of
from dossiercheck.stereo.likeness import same_stereoisomer
from dossiercheck.stereo.mapping import Mapped, best_mapping, compare
from dossiercheck.stereo.structure import StereoGroup, Structure

SAME = "same"
OPPOSITE = "opposite"
OTHER_SILENT = "other silent"
REFERENCE_SILENT = "reference silent"


@dataclass(frozen=True, slots=True)
class Verdict:
    """One unit in both structures. `atoms` number the reference, `other` the structure laid on
    it; the descriptors are each structure's own, "" where it is silent."""

    kind: str
    atoms: tuple[int, ...]
    other: tuple[int, ...]
    state: str
    descriptor: str
    other_descriptor: str


@dataclass(frozen=True, slots=True)
class Alignment:
    """`mapping` leads from the reference's atoms to the other's; empty where the constitutions
    differ. `doubt` says why the verdicts may not be relied on, "" where they may. `mirrored` is
    true where the other, as a whole, is the mirror image."""

    constitution: con.Constitution
    mapping: Mapping[int, int]
    verdicts: tuple[Verdict, ...]
    mirrored: bool = False
    doubt: str = ""

    def count(self, state: str) -> int:
        """How many units stand in a state."""
        return sum(verdict.state == state for verdict in self.verdicts)


def align(reference: Structure, other: Structure) -> Alignment:
    """Lay `other` on `reference` in the way that leaves the fewest disagreements."""
    mapping = {} if reference.groups or other.groups else same_stereoisomer(reference, other)
    if mapping:
        # One stereoisomer has one set of descriptors: they need not be computed twice.
        verdicts = tuple(
            Verdict(
                unit.kind,
                unit.atoms,
                tuple(mapping[atom] for atom in unit.atoms),
                SAME,
                unit.descriptor,
                unit.descriptor,
            )
            for unit in reference.units
        )
        return Alignment(con.Constitution(con.SAME), mapping, verdicts, doubt=reference.doubt)
    return _align_slowly(reference, other)


def _align_slowly(reference: Structure, other: Structure) -> Alignment:
    found = con.compare_constitution(reference, other)
    if found.verdict == con.DIFFERENT:
        return Alignment(found, {}, ())
    one, two = _stereo_graph(reference), _stereo_graph(other)
    within = None
    if found.verdict == con.SALT:
        within = (_main(one), _main(two))
    centres = frozenset(a[0] for kind, a, _ in reference.possible if kind == "centre")
    centres |= frozenset(one.centres)
    bonds = frozenset(frozenset(a) for kind, a, _ in reference.possible if kind != "centre")
    bonds |= frozenset(one.bonds)
    judged = (frozenset(a for a in centres if a in one.near), bonds)
    groups = _Groups(reference, other)
    mapped = best_mapping(
        one,
        two,
        exact=found.verdict == con.SAME,
        within=within,
        judged=judged,
        final=(lambda m: groups.cost(one, two, judged, m)) if groups else None,
    )
    if mapped is None:
        return Alignment(found, {}, (), doubt="the two structures could not be laid on each other")
    verdicts = _verdicts(reference, other, one, two, judged, mapped)
    if groups:
        verdicts = groups.settle(verdicts, mapped.mapping)
    verdicts = _without_echoes(reference, other, verdicts)
    doubt = reference.doubt or other.doubt
    if not mapped.complete:
        doubt = "too symmetric to try every way of laying the structures on each other"
    mirrored = found.verdict == con.SAME and not groups and _is_mirror(reference, other, verdicts)
    return Alignment(found, mapped.mapping, verdicts, mirrored, doubt)


def _stereo_graph(structure: Structure) -> Graph:
    """The graph with only those marks that make a stereogenic unit."""
    graph = graph_of(structure)
    units = {frozenset(unit.atoms) for unit in structure.units}
    return replace(
        graph,
        centres={a: c for a, c in graph.centres.items() if frozenset((a,)) in units},
        bonds={b: g for b, g in graph.bonds.items() if b in units},
    )


def _main(graph: Graph) -> tuple[int, ...]:
    """The component with the most carbon atoms, then the most atoms."""
    return max(
        graph.components(),
        key=lambda part: (sum(graph.element[a] == 6 for a in part), len(part), -part[0]),
    )


def _verdicts(
    reference: Structure,
    other: Structure,
    one: Graph,
    two: Graph,
    judged: tuple[frozenset[int], frozenset[frozenset[int]]],
    mapped: Mapped,
) -> tuple[Verdict, ...]:
    own = {frozenset(unit.atoms): unit.descriptor for unit in reference.units}
    theirs = {frozenset(unit.atoms): unit.descriptor for unit in other.units}
    found = []
    units: list[int | frozenset[int]] = [*sorted(judged[0]), *sorted(judged[1], key=sorted)]
    for unit in units:
        atoms = (unit,) if isinstance(unit, int) else tuple(sorted(unit))
        if any(atom not in mapped.mapping for atom in atoms):
            continue
        image = tuple(mapped.mapping[atom] for atom in atoms)
        result = compare(one, two, unit, mapped.mapping)
        if result is None:
            continue
        state = {True: SAME, False: OPPOSITE, "one": OTHER_SILENT, "two": REFERENCE_SILENT}[result]
        found.append(
            Verdict(
                "centre" if isinstance(unit, int) else "double bond",
                atoms,
                image,
                state,
                own.get(frozenset(atoms), ""),
                theirs.get(frozenset(image), ""),
            )
        )
    return tuple(found)


def _without_echoes(
    reference: Structure, other: Structure, verdicts: tuple[Verdict, ...]
) -> tuple[Verdict, ...]:
    """Without silences that only echo an opposite unit elsewhere.

    Turn one end of (2R,3r,4S)-pentane-2,3,4-triol round and C3 is no centre any more: there is
    nothing that a name could say of it (IUPAC 2013, P-92.6).
    """
    if not any(v.state == OPPOSITE for v in verdicts):
        return verdicts
    kept = []
    for verdict in verdicts:
        side, atoms = other, verdict.other
        if verdict.state == REFERENCE_SILENT:
            side, atoms = reference, verdict.atoms
        elif verdict.state != OTHER_SILENT:
            kept.append(verdict)
            continue
        if any(frozenset(unit.atoms) == frozenset(atoms) for unit in side.undefined):
            kept.append(verdict)
    return tuple(kept)


def _is_mirror(reference: Structure, other: Structure, verdicts: tuple[Verdict, ...]) -> bool:
    if not any(v.kind == "centre" and v.state == OPPOSITE for v in verdicts):
        return False
    return reference.smiles == mirror_smiles(other)


def mirror_smiles(structure: Structure) -> str:
    """Canonical SMILES of the mirror image: every centre inverted, double bonds kept."""
    mol = Chem.Mol(structure.mol)
    for unit in structure.units:
        if unit.kind == "centre":
            mol.GetAtomWithIdx(unit.atoms[0]).InvertChirality()
    return str(Chem.MolToSmiles(mol))


class _Groups:
    """Groups of centres known only relative to each other, on either side."""

    def __init__(self, reference: Structure, other: Structure) -> None:
        self.reference: tuple[StereoGroup, ...] = reference.groups
        self.other: tuple[StereoGroup, ...] = other.groups

    def __bool__(self) -> bool:
        return bool(self.reference or self.other)

    def _group(self, atoms: tuple[int, ...], image: tuple[int, ...]) -> tuple[str, int] | None:
        """The group that binds a centre: the coarser of the two sides' groups wins."""
        for side, groups, atom in (("r", self.reference, atoms[0]), ("o", self.other, image[0])):
            for number, group in enumerate(groups):
                if len(atoms) == 1 and atom in group.atoms:
                    return side, number
        return None

    def cost(
        self,
        one: Graph,
        two: Graph,
        judged: tuple[frozenset[int], frozenset[frozenset[int]]],
        mapping: dict[int, int],
    ) -> int:
        """Disagreements, each group counted the way round that suits it better."""
        alone = 0
        tally: dict[tuple[str, int], list[int]] = {}
        units: list[int | frozenset[int]] = [*judged[0], *judged[1]]
        for unit in units:
            atoms = (unit,) if isinstance(unit, int) else tuple(unit)
            if any(a not in mapping for a in atoms):
                continue
            result = compare(one, two, unit, mapping)
            group = self._group(atoms, tuple(mapping[a] for a in atoms))
            if group and isinstance(result, bool):
                tally.setdefault(group, [0, 0])[result] += 1
            elif result not in (True, None):
                alone += 1
        return alone + sum(min(pair) for pair in tally.values())

    def settle(
        self, verdicts: tuple[Verdict, ...], mapping: Mapping[int, int]
    ) -> tuple[Verdict, ...]:
        """Turn a group's verdicts round where the group as a whole is opposite."""
        tally: dict[tuple[str, int], int] = {}
        for verdict in verdicts:
            group = self._group(verdict.atoms, verdict.other)
            if group and verdict.state in (SAME, OPPOSITE):
                step = 1 if verdict.state == OPPOSITE else -1
                tally[group] = tally.get(group, 0) + step
        turned = {SAME: OPPOSITE, OPPOSITE: SAME}
        return tuple(
            replace(v, state=turned.get(v.state, v.state))
            if tally.get(self._group(v.atoms, v.other) or ("", 0), 0) > 0
            else v
            for v in verdicts
        )
