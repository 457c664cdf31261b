"""Whether a molecule comes out of a crystal's coordinates as it was put in.

`python -m tests.benchmarks.crystals [--size 600] [--seed 1] [--show]`

Components of the wwPDB dictionary, with hydrogens, are embedded by the structure library, given
counter-ions where they are charged, and put into cells of several space groups; the coordinates
get the errors of an X-ray determination (0.01 Å, X–H bonds too short by 0.1 Å). Only the
asymmetric unit is written. What the reader makes of the file is held against the SMILES that went
in, by canonical isomeric SMILES. A second and third run lack a hydrogen: in the second the
formula still counts it, in the third, the harder one, it does not. Prints JSON.
"""

from __future__ import annotations

import argparse
import json
import random
import sys
from collections import Counter
from collections.abc import Iterator
from typing import Any

import numpy as np
from rdkit import Chem, RDLogger

from dossiercheck.model import Record, Source, Unread
from dossiercheck.readers.cif import FORMULA, read
from dossiercheck.stereo.perception import from_molblock, from_smiles
from tests.benchmarks.dictionary import Dictionary
from tests.benchmarks.molecules import from_coordinates, standard_inchi, without_hydrogens
from tests.unit.readers import crystals

GROUPS = (
    "P 21 21 21",
    "P 1 21/c 1",
    "P 1 21 1",
    "P -1",
    "C 1 2 1",
    "P 41 21 2",
    "P b c a",
    "R 3:H",
)
HEAVY = (4, 60)
_SHORT = {"C": 0.97, "N": 0.88, "O": 0.84}


def canonical(smiles: str) -> str:
    """Written, read and written again: the writer's first text is not always the canonical one."""
    mol = Chem.MolFromSmiles(smiles)
    return Chem.MolToSmiles(Chem.MolFromSmiles(Chem.MolToSmiles(mol))) if mol else ""


def key(smiles: str) -> str:
    """The standard InChI, "" where it fails."""
    mol = Chem.MolFromSmiles(smiles)
    return standard_inchi(mol) if mol else ""


def nuclei(smiles: str) -> str:
    """Which atoms are bonded, hydrogens included, and how centres are configured; what the bonds'
    orders are is left out. The text itself where double bonds have a geometry."""
    mol = Chem.MolFromSmiles(smiles)
    if mol is None or "/" in smiles:
        return smiles
    bare = Chem.RWMol(Chem.AddHs(mol))
    Chem.Kekulize(bare, clearAromaticFlags=True)
    for atom in bare.GetAtoms():
        atom.SetFormalCharge(0)
        atom.SetNoImplicit(True)
    for bond in bare.GetBonds():
        bond.SetBondType(Chem.BondType.SINGLE)
    return str(Chem.MolToSmiles(bare))


def structures(size: int, chance: random.Random) -> Iterator[str]:
    """SMILES of dictionary components of covered elements, in random order, ions made neutral."""
    dictionary = Dictionary()
    ids = list(dictionary.ids)
    chance.shuffle(ids)
    seen: set[str] = set()
    for identifier in ids:
        if len(seen) >= size:
            return
        component = dictionary.component(identifier)
        heavy = sum(element not in ("H", "D") for element in component.elements)
        covered = set(component.elements) <= {*"HCNOFPSBI", "Cl", "Br", "Si", "Se"}
        if not HEAVY[0] <= heavy <= HEAVY[1] or not covered or not component.bonds:
            continue
        if not np.isfinite(component.coordinates).all() or "H" not in component.elements:
            continue
        try:
            mol = without_hydrogens(from_coordinates(component), keep_imine=True)
            smiles = Chem.MolToSmiles(mol)
        except (ValueError, RuntimeError):
            continue
        charge = Chem.GetFormalCharge(mol)
        ion = ".[Cl-]" if charge > 0 else ".[Na+]"
        smiles = canonical(smiles + ion * abs(charge))
        # Neither a configuration that the dictionary leaves open nor a bipyramid can be told.
        open_or_odd = "@TB" in smiles or "@SP" in smiles or "@OH" in smiles
        if smiles and smiles not in seen and not open_or_odd and not from_smiles(smiles).undefined:
            seen.add(smiles)
            yield smiles


def measured(made: crystals.Made, chance: random.Random) -> None:
    """Give the atoms the errors of an X-ray determination, in place."""
    places = np.array([atom.position for atom in made.atoms])
    for number, atom in enumerate(made.atoms):
        if atom.element != "H":
            continue
        lengths = np.linalg.norm(places - places[number], axis=1)
        lengths[[n for n, other in enumerate(made.atoms) if other.element == "H"]] = 99
        parent = int(np.argmin(lengths))
        short = _SHORT.get(made.atoms[parent].element)
        if short:
            atom.position = places[parent] + (places[number] - places[parent]) * (
                short / lengths[parent]
            )
    for atom in made.atoms:
        atom.position = atom.position + [chance.gauss(0, 0.01) for _ in range(3)]


def outcome(text: str, smiles: str) -> tuple[str, str]:
    """("right" | "other form" | "wrong" | "refused", what was read or why not). Another form has
    the same nuclei and configuration and the charge or the double bonds drawn
    elsewhere: the same standard InChI, or the same bonds between the same atoms and no E or Z."""
    data = text.encode()
    items = list(read(Source("a.cif", "", len(data), "cif"), data))
    for item in items:
        if isinstance(item, Record) and item.molblock:
            found = from_molblock(item.molblock).mol
            again = canonical(Chem.MolToSmiles(without_hydrogens(found, keep_imine=True)))
            if again == canonical(smiles):
                return "right", again
            same = key(again) == key(smiles) != "" or nuclei(again) == nuclei(smiles)
            return ("other form" if same else "wrong"), again
    reasons = [item for item in items if isinstance(item, Unread)]
    return "refused", f"{reasons[0].reason}: {reasons[0].detail}" if reasons else "nothing said"


def without_one(made: crystals.Made, chance: random.Random) -> None:
    """Leave out one hydrogen, in place."""
    hydrogens = [n for n, atom in enumerate(made.atoms) if atom.element == "H"]
    del made.atoms[chance.choice(hydrogens)]


def counted(made: crystals.Made) -> str:
    """The formula of the atoms listed."""
    counts = Counter(atom.element for atom in made.atoms)
    return " ".join(f"{element}{number}" for element, number in counts.items())


def run(size: int, seed: int) -> dict[str, Any]:
    """Counts by outcome for each run, the reasons of the refusals, and every reading that is not
    letter for letter what went in."""
    chance = random.Random(seed)
    tallies = {name: Counter[str]() for name in ("whole", "one hydrogen short", "and not counted")}
    reasons: Counter[str] = Counter()
    wrong: list[tuple[str, str, str]] = []
    refused: list[tuple[str, str]] = []
    for number, smiles in enumerate(structures(size, chance)):
        try:
            from_smiles(smiles)
            made = crystals.crystal(smiles, GROUPS[number % len(GROUPS)], seed=seed)
        except (ValueError, RuntimeError):
            tallies["whole"]["not embedded"] += 1
            continue
        measured(made, chance)
        shown, said = outcome(made.text(), smiles)
        tallies["whole"][shown] += 1
        if shown in ("wrong", "other form"):
            wrong.append((shown, smiles, said))
        if shown == "refused":
            reasons[said.partition(":")[0]] += 1
            refused.append((smiles, said))
        for name in ("one hydrogen short", "and not counted"):
            if name == "one hydrogen short":
                without_one(made, chance)
            else:
                made.tags[FORMULA] = counted(made)
            shown, said = outcome(made.text(), smiles)
            tallies[name]["refused" if shown == "refused" else "wrong"] += 1
            if shown != "refused":
                wrong.append((name, smiles, said))
    return {
        **{name: dict(tally) for name, tally in tallies.items()},
        "reasons": dict(reasons.most_common()),
        "not as put in": wrong,
        "refused": refused,
    }


def main() -> None:
    """Measure and print."""
    # Only here: in the tests the program listens to what the library says.
    RDLogger.DisableLog("rdApp.*")
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=600)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--show", action="store_true", help="list every refusal too")
    given = parser.parse_args()
    result = run(given.size, given.seed)
    if not given.show:
        del result["refused"]
    sys.stdout.write(json.dumps(result, indent=1, ensure_ascii=False) + "\n")


if __name__ == "__main__":
    main()
