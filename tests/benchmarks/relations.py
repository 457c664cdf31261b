"""The relation of two structures, for pairs made so that their relation is known.

Each pair starts from a molecule of the wwPDB chemical component dictionary as drawn; the partner
is made from it with the structure library alone and written anew (atoms renumbered; a drawing or
a line notation). What the relation is follows from how the pair was made, and where symmetry has
a say (the mirror image of a meso compound is the compound itself) from the canonical SMILES and
the InChI of both, which must agree with each other; where they do not, the pair is left out and
counted.

    python -m tests.benchmarks.relations --size 1000
"""

from __future__ import annotations

import argparse
import json
import re
import sys
from collections import Counter
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from random import Random
from typing import Any

from rdkit import Chem, RDLogger
from rdkit.Chem import rdMolDescriptors

from dossiercheck.stereo.graph import graph_of
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.possible import space_of
from dossiercheck.stereo.relations import UNDETERMINED, relation
from dossiercheck.stereo.states import state_of
from dossiercheck.stereo.structure import Structure
from tests.benchmarks import corpus, molecules
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.molecules import Identity, Unit

_SEED = 5
NOT_FIXED = "same or undetermined"
WITHHELD = "right, units withheld"  # a unit elsewhere is open, or its wedge ambiguous
_DONATES = Chem.MolFromSmarts("[#6;!$([#6]=*);!$([#6]#*);!a:1][CH3,F,Cl,Br,I,$([OH][#6]):2]")
_TAKES = Chem.MolFromSmarts("[CX4;H1,H2,H3]")
_BASE = Chem.MolFromSmarts("[NX3;!$(N~[!#6]);!$(N-[#6]=,#,:[*]);!$(N#*)]")


@dataclass(frozen=True, slots=True)
class Pair:
    """`first` is a molfile, `second` a molfile or a SMILES. `units` are those that were changed,
    1-based in the first; `expected` is the relation, with "epimer" or "geometry" after it."""

    made: str
    record: str
    first: str
    second: str
    expected: str
    units: tuple[Unit, ...] = ()


class Divided(Exception):
    """The canonical SMILES and the InChI do not agree on what the partner is."""


def _same(one: Identity, two: Identity) -> bool:
    found = one.same_as(two)
    if found is None:
        raise Divided
    return found


def _identity(mol: Chem.Mol) -> Identity:
    found = molecules.identity(_directed(mol))
    if found is None or not found.fixed or not found.smiles:
        raise Divided
    return found


def _directed(mol: Chem.Mol) -> Chem.Mol:
    """With the bonds beside double bonds pointing as the geometry says: the writer of line
    notations would go by the directions as first drawn."""
    pointed = Chem.Mol(mol)
    for bond in pointed.GetBonds():
        bond.SetBondDir(Chem.BondDir.NONE)
    Chem.SetDoubleBondNeighborDirections(pointed)
    return pointed


def _written(mol: Chem.Mol, dice: Random) -> str:
    """The molecule with its atoms in another order, as a drawing or a line notation; a drawing
    that does not show what it should is not used."""
    order = list(range(mol.GetNumAtoms()))
    dice.shuffle(order)
    again = Chem.RenumberAtoms(_directed(mol), order)
    again.RemoveAllConformers()
    wanted = _identity(mol)
    if dice.random() < 0.5:
        text = molecules.draw(again, molecules.labels(Chem.Mol(again)))
        read = molecules.read_molblock(text)
        if read is not None and molecules.identity(read) == wanted:
            return text
    text = str(Chem.MolToSmiles(again, canonical=False))
    read = molecules.read_smiles(text)
    if read is None or _identity(read) != wanted:
        raise Divided
    return text


def _stereo_relation(mol: Chem.Mol, other: Chem.Mol) -> str:
    """Same, enantiomer or diastereomer for one constitution, by the canonical forms."""
    one, two = _identity(mol), _identity(other)
    if _same(one, two):
        return "same"
    return "enantiomer" if _same(_identity(molecules.mirror_image(mol)), two) else "diastereomer"


def _redrawn(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    return mol, "same", []


def _mirror(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    units = [unit for unit, _ in record.units if len(unit) == 1]
    if not units:
        raise LookupError
    image = molecules.with_units(mol, flip=units)
    return image, "same" if _same(_identity(mol), _identity(image)) else "enantiomer", units


def _centres(record: SoundRecord, mol: Chem.Mol) -> list[Unit]:
    """The centres, less those that proton transfer undoes by the standard InChI, as P of a
    phosphate drawn with =O and –OH."""
    found = []
    for unit in (unit for unit, _ in record.units if len(unit) == 1):
        if mol.GetAtomWithIdx(unit[0] - 1).GetSymbol() != "C":
            changed = molecules.with_units(mol, flip=[unit])
            if molecules.standard_inchi(mol) == molecules.standard_inchi(changed):
                continue
        found.append(unit)
    return found


def _centre(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    centres = _centres(record, mol)
    if len(centres) < 2:
        raise LookupError
    unit = dice.choice(centres)
    other = molecules.with_units(mol, flip=[unit])
    kind = _stereo_relation(mol, other)
    return other, kind + (" epimer" if kind == "diastereomer" else ""), [unit]


def _several(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    centres = _centres(record, mol)
    if len(centres) < 4:
        raise LookupError
    units = sorted(dice.sample(centres, 2))
    other = molecules.with_units(mol, flip=units)
    return other, _stereo_relation(mol, other), units


def _bond(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    bonds = [unit for unit, _ in record.units if len(unit) == 2]
    if not bonds:
        raise LookupError
    unit = dice.choice(bonds)
    other = molecules.with_units(mol, flip=[unit])
    if molecules.standard_inchi(_directed(mol)) == molecules.standard_inchi(_directed(other)):
        # Hydrogen is mobile at the bond, or a charge runs along it: the InChI calls both the same,
        # the canonical SMILES does not, and either answer but "diastereomer" will do.
        return other, NOT_FIXED, [unit]
    if molecules.bears_imine_hydrogen(mol, unit):
        return other, "undetermined", [unit]  # =N–H turns over freely (common practice)
    kind = _stereo_relation(mol, other)
    return other, kind + (" geometry" if kind == "diastereomer" else ""), [unit]


def _moved(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    """A methyl group, a halogen or a hydroxy group on another carbon atom."""
    given = [pair for pair in mol.GetSubstructMatches(_DONATES) if pair[0] != pair[1]]
    taking = [match[0] for match in mol.GetSubstructMatches(_TAKES)]
    dice.shuffle(given)
    dice.shuffle(taking)
    for carbon, group in given[:4]:
        for other in taking[:6]:
            if other in (carbon, group):
                continue
            changed = Chem.RWMol(mol)
            changed.RemoveAllConformers()
            Chem.RemoveStereochemistry(changed)
            changed.RemoveBond(carbon, group)
            changed.AddBond(other, group, Chem.BondType.SINGLE)
            for atom in changed.GetAtoms():
                atom.SetNoImplicit(False)
                atom.SetNumExplicitHs(0)
            try:
                Chem.SanitizeMol(changed)
            except ValueError:
                continue
            made = changed.GetMol()
            one, two = (molecules.standard_inchi(m).split("/") for m in (mol, made))
            if len(one) > 2 and len(two) > 2 and one[1] == two[1] and one[2] != two[2]:
                return made, "constitutional isomer", []
    raise LookupError


def _salt(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    """The hydrochloride, as two molecules or as ions, of the compound or its mirror image."""
    found = mol.GetSubstructMatches(_BASE)
    if not found or len(Chem.GetMolFrags(mol)) > 1 or Chem.GetFormalCharge(mol):
        raise LookupError
    kind, changed, units = "same", mol, []
    centres = [unit for unit, _ in record.units if len(unit) == 1]
    if centres and dice.random() < 0.5:
        changed, kind, units = _mirror(record, mol, dice)
    joined = Chem.RWMol(Chem.CombineMols(changed, Chem.MolFromSmiles("Cl")))
    if dice.random() < 0.5:
        nitrogen = joined.GetAtomWithIdx(dice.choice(found)[0])
        nitrogen.SetFormalCharge(1)
        nitrogen.SetNumExplicitHs(nitrogen.GetTotalNumHs() + 1)
        nitrogen.SetNoImplicit(True)
        chlorine = joined.GetAtomWithIdx(joined.GetNumAtoms() - 1)
        chlorine.SetFormalCharge(-1)
        chlorine.SetNumExplicitHs(0)
        chlorine.SetNoImplicit(True)
    joined.RemoveAllConformers()
    Chem.SanitizeMol(joined)
    return joined.GetMol(), kind, units


def _silent(record: SoundRecord, mol: Chem.Mol, dice: Random) -> tuple[Chem.Mol, str, list[Unit]]:
    """A centre left open that matters: with either configuration there it is another compound."""
    held: list[int] = []
    rdMolDescriptors.CalcNumBridgeheadAtoms(mol, held)  # these have no choice of their own
    centres = [u for u, _ in record.units if len(u) == 1 and u[0] - 1 not in held]
    if not centres:
        raise LookupError
    unit = dice.choice(centres)
    if _same(_identity(mol), _identity(molecules.with_units(mol, flip=[unit]))):
        raise LookupError
    return molecules.with_units(mol, unset=[unit]), "undetermined", [unit]


_WAYS: dict[str, Callable[[SoundRecord, Chem.Mol, Random], tuple[Chem.Mol, str, list[Unit]]]] = {
    "double bond exchanged": _bond,
    "substituent moved": _moved,
    "hydrochloride": _salt,
    "two centres inverted": _several,
    "one centre inverted": _centre,
    "mirror image": _mirror,
    "one centre left open": _silent,
    "drawn anew": _redrawn,
}


def pairs(records: Sequence[SoundRecord], size: int, left_out: Counter[str]) -> Iterator[Pair]:
    """At least `size` pairs, as many of each way as can be; dictionary isomers besides."""
    share = -(-size // len(_WAYS))
    made: Counter[str] = Counter()
    for record in records:
        if all(made[way] >= share for way in _WAYS):
            break
        mol = molecules.read_molblock(record.molblock)
        if mol is None:
            left_out["not read by the library"] += 1
            continue
        for way, change in _WAYS.items():
            if made[way] >= share:
                continue
            dice = Random(f"{_SEED} {record.id} {way}")
            try:
                other, expected, units = change(record, mol, dice)
                text = _written(other, dice)
            except LookupError:
                continue
            except (Divided, RuntimeError):
                left_out[f"{way}: the canonical forms are divided"] += 1
                continue
            made[way] += 1
            yield Pair(way, record.id, record.molblock, text, expected, tuple(units))
    yield from _listed(records, share)


def _listed(records: Sequence[SoundRecord], share: int) -> Iterator[Pair]:
    """Two entries of one formula with other connections in their InChI."""
    by_formula: dict[str, list[SoundRecord]] = {}
    for record in records:
        by_formula.setdefault(record.formula, []).append(record)
    count = 0
    for same in by_formula.values():
        for one, two in zip(same[::2], same[1::2], strict=False):
            mols = [molecules.read_molblock(r.molblock) for r in (one, two)]
            forms = [molecules.standard_inchi(mol).split("/") for mol in mols if mol is not None]
            if count < share and len(forms) == 2 and all(len(form) > 2 for form in forms):
                hand, other = forms
                charged = any(re.match(r"[qp]", part) for form in forms for part in form[2:])
                if hand[1] == other[1] and hand[2] != other[2] and not charged:
                    count += 1
                    yield Pair(
                        "two entries of one formula",
                        f"{one.id} {two.id}",
                        one.molblock,
                        two.molblock,
                        "constitutional isomer",
                    )


def _read(text: str) -> Structure:
    return from_molblock(text) if "M  END" in text else from_smiles(text)


def judge(pair: Pair) -> tuple[str, bool]:
    """What the program says, and whether the units that it names, changed in the first, give the
    second."""
    first = _read(pair.first)
    found = relation(first, _read(pair.second))
    said = found.kind
    kind, _, flag = pair.expected.partition(" ")
    open_elsewhere = found.note.startswith("settled all the same")
    if flag in ("epimer", "geometry") and said == kind and open_elsewhere:
        return WITHHELD, True
    said += " epimer" if found.epimer else ""
    said += " geometry" if found.geometry else ""
    if pair.expected.split()[-1] not in ("epimer", "geometry"):
        return said, True
    mol, other = (_plain(text) for text in (pair.first, pair.second))
    named = [tuple(sorted(atom + 1 for atom in unit)) for unit in found.units]
    if named == [tuple(sorted(unit)) for unit in pair.units]:
        return said, True
    # Another unit may do as well: its like in a symmetric molecule, the other end of a ring.
    changed = molecules.with_units(mol, flip=named)
    return said, len(named) == len(pair.units) and _identity(changed) == _identity(other)


def _plain(text: str) -> Chem.Mol:
    read = molecules.read_molblock if "M  END" in text else molecules.read_smiles
    mol = read(text)
    assert mol is not None
    return mol


def rings(records: Sequence[SoundRecord]) -> dict[str, int]:
    """Pairs of bridgeheads that are held to have no choice, against the dictionary's coordinates:
    one that stands otherwise would refute the rule in `stereo/cages.py`."""
    counts = Counter({"pairs of bridgeheads": 0, "otherwise": 0, "not drawn": 0})
    for record in records:
        structure = from_molblock(record.molblock)
        if not rdMolDescriptors.CalcNumBridgeheadAtoms(structure.mol):
            continue
        space = space_of(structure)
        graph = graph_of(structure)
        state = state_of(structure, graph, space, {atom: atom for atom in graph.atoms})
        for one, two, odd in space.ties:
            if (state.open >> one | state.open >> two) & 1:
                counts["not drawn"] += 1
                continue
            counts["pairs of bridgeheads"] += 1
            counts["otherwise"] += (state.bits >> one ^ state.bits >> two) & 1 != odd
    return dict(counts)


def measure(size: int, skip: int = 0) -> dict[str, Any]:
    """Every pair judged, from the records after the first `skip`."""
    left_out: Counter[str] = Counter()
    ways: dict[str, Counter[str]] = {}
    wrong = []
    records = corpus.load(2 * size + skip).records[skip:]
    for pair in pairs(records, size, left_out):
        said, unit = judge(pair)
        accepted = (
            ("same", UNDETERMINED) if pair.expected == NOT_FIXED else (pair.expected, WITHHELD)
        )
        outcome = "right" if said in accepted and unit else "wrong"
        if outcome == "wrong" and said == UNDETERMINED:
            outcome = "undetermined"
        ways.setdefault(pair.made, Counter())[outcome] += 1
        if said == WITHHELD:
            ways[pair.made][WITHHELD] += 1
        ways[pair.made][f"expected {pair.expected}"] += 1
        if outcome != "right":
            wrong.append(
                {"record": pair.record, "made": pair.made, "expected": pair.expected, "said": said}
                | {"second": pair.second}
            )
    total = sum((Counter(w) for w in ways.values()), Counter())
    return {
        "pairs": total["right"] + total["wrong"] + total["undetermined"],
        "right": total["right"],
        "of these with the units withheld": total[WITHHELD],
        "wrong": total["wrong"],
        "undetermined though determined": total["undetermined"],
        "ways": {way: dict(counts) for way, counts in ways.items()},
        "left out": dict(left_out),
        "small bridged rings": rings(records),
        "not right": wrong,
    }


def table(figures: dict[str, Any]) -> str:
    """A line for each way of making pairs."""
    rows = [f"{'made by':30}{'pairs':>7}{'right':>7}{'wrong':>7}{'undetermined':>14}"]
    for way, counts in {**figures["ways"], "all": figures}.items():
        right, wrong = counts.get("right", 0), counts.get("wrong", 0)
        undetermined = counts.get("undetermined", counts.get("undetermined though determined", 0))
        rows.append(f"{way:30}{right + wrong + undetermined:7}{right:7}{wrong:7}{undetermined:14}")
    rows.append(f"bridgeheads: {figures['small bridged rings']}")
    return "\n".join(rows)


def main() -> None:
    """Measure and print."""
    # Only here: in the tests the program listens to what the library says.
    RDLogger.DisableLog("rdApp.*")
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=1000, help="pairs, at least")
    parser.add_argument("--skip", type=int, default=0, help="sound records passed over")
    parser.add_argument("--json", type=Path)
    given = parser.parse_args()
    figures = measure(given.size, given.skip)
    text = json.dumps(figures, indent=1, ensure_ascii=False)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(f"{text}\n\n{table(figures)}\n")


if __name__ == "__main__":
    main()
