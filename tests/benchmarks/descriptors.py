"""The descriptor engine held against published labels, another computation, and the clock.

1. The published validation suite (Hanson et al., J. Chem. Inf. Model. 2018, 58, 1755), where it
   lies beside the project: each compound from the input that can express its units, the drawing.
2. The wwPDB chemical component dictionary: unit by unit against the structure library's labeller
   on the same atoms, and against the dictionary's own R and S flags.
3. CPU time a molecule, as drawn and in three dimensions, and two molecules that are hard.

    python -m tests.benchmarks.descriptors --size 2000
"""

from __future__ import annotations

import argparse
import json
import os
import re
import sys
import tomllib
from collections import Counter
from collections.abc import Iterator
from pathlib import Path
from random import Random
from time import process_time
from typing import Any

import numpy as np
from rdkit import Chem

from dossiercheck.stereo.cip.engine import BUDGET, rank_all
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.descriptors import own_units
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure, Unreadable
from tests.benchmarks import molecules
from tests.benchmarks.dictionary import Component, Dictionary

_HERE = Path(__file__).resolve().parents[2]
_EXTERNAL = Path(os.environ.get("DOSSIERCHECK_EXTERNAL", _HERE.parent / "shared" / "external"))
_SUITE = _EXTERNAL / "cip_suite"
_ORGANIC = frozenset(
    ["H", "D", "B", "C", "N", "O", "F", "Si", "P", "S", "Cl", "Ge", "As", "Se", "Br", "Te", "I"]
)
# A cage whose digraph is large, and a chain whose digraph is deep.
HARD = {
    "dodecahedrane, every centre marked": (
        "[C@H]12[C@H]3[C@@H]4[C@@H]5[C@H]1[C@H]6[C@H]7[C@@H]2[C@H]8[C@@H]3[C@H]9[C@@H]4"
        "[C@@H]%10[C@@H]5[C@@H]6[C@H]%11[C@@H]7[C@@H]8[C@@H]9[C@@H]%10%11"
    ),
    "peptide of 60 residues": "N[C@@H](C)C(=O)" * 60 + "O",
}


def suite() -> dict[str, Any] | None:
    """The published compounds, from their drawings; None where they are not here."""
    if not (_SUITE / "compounds_2d.sdf").is_file():
        return None
    right, wrong = {"ours": 0, "library": 0}, []
    records = (_SUITE / "compounds_2d.sdf").read_text("utf-8").split("$$$$\n")
    for record in filter(str.strip, records):
        structure = from_molblock(record[: record.index("M  END") + 7])
        found = re.search(r"> <CIP_LABELS>\n(.*)\n", record)
        expected = set(found[1].split()) if found else set()
        for who, units in (("ours", own_units(structure)), ("library", structure.units)):
            labels = {f"{atom + 1}{unit.descriptor}" for unit in units for atom in unit.atoms}
            right[who] += labels == expected
            if who == "ours" and labels != expected:
                wrong.append([record.split("\n", 1)[0], sorted(labels ^ expected)])
    notations = 0
    for line in (_SUITE / "compounds.smi").read_text("utf-8").splitlines():
        smiles, _, text, *_ = [*line.split("\t"), ""]
        units = own_units(from_smiles(smiles))
        labels = {f"{atom + 1}{unit.descriptor}" for unit in units for atom in unit.atoms}
        notations += labels == set(text.split())
    return {"compounds": 300, "drawn": right, "notation": notations, "misses": wrong}


def own_cases() -> dict[str, int]:
    """The project's own set, `tests/cases/descriptors.toml`."""
    from tests.cases.drawn import molblock

    cases = tomllib.loads((_HERE / "tests/cases/descriptors.toml").read_text("utf-8"))["case"]
    right = 0
    for case in cases:
        drawn = "atoms" in case
        structure = (
            from_molblock(molblock(case["atoms"], case["bonds"]))
            if drawn
            else from_smiles(case["smiles"])
        )
        found = {
            "-".join(str(atom + 1) for atom in sorted(unit.atoms)): unit.descriptor
            for unit in own_units(structure)
        }
        right += found == case["labels"]
    return {"structures": len(cases), "right": right}


def components(size: int | None) -> Iterator[Component]:
    """Organic components with coordinates, in a fixed shuffled order."""
    dictionary = Dictionary()
    names = dictionary.ids[:]
    Random(3).shuffle(names)
    for name in names[: size or len(names)]:
        component = dictionary.component(name)
        whole = bool(component.bonds) and not np.isnan(component.coordinates).any()
        if whole and set(component.elements) <= _ORGANIC:
            yield component


def _drawn(mol: Chem.Mol) -> str:
    flat = molecules.without_hydrogens(mol, keep_imine=False)
    return molecules.draw(flat, molecules.labels(flat))


def dictionary(size: int | None) -> dict[str, Any]:
    """Agreement unit by unit, and the time of each molecule."""
    counts: Counter[str] = Counter()
    apart: Counter[str] = Counter()
    listed: list[str] = []
    times: dict[str, list[float]] = {"in space": [], "drawn": []}
    for component in components(size):
        try:
            mol = molecules.from_coordinates(component)
            structure = from_molblock(Chem.MolToMolBlock(mol))
        except (ValueError, RuntimeError, Unreadable):
            counts["components that the library refuses"] += 1
            continue
        began = process_time()
        found = rank_all(source_of(structure))
        times["in space"].append(process_time() - began)
        try:
            drawing = from_molblock(_drawn(mol))
            began = process_time()
            rank_all(source_of(drawing))
            times["drawn"].append(process_time() - began)
        except (ValueError, RuntimeError, Unreadable):
            counts["components that the library does not draw"] += 1
        counts["components"] += 1
        library = {tuple(sorted(u.atoms)): u.descriptor for u in structure.units}
        if structure.doubt:
            counts["components that the library gives up"] += 1
            continue
        ours = {tuple(sorted(r.unit.ends)): r for r in found if r.descriptor or r.doubt}
        for atoms in set(library) | set(ours):
            ranked = ours.get(atoms)
            mine = ranked.descriptor if ranked else ""
            theirs = library.get(atoms, "")
            if not theirs and ranked and ranked.unit.kind == "axis":
                counts["axes, which the library does not label"] += 1
                continue
            counts["units"] += 1
            if mine == theirs:
                counts["units alike"] += 1
                continue
            symbols = "=".join(structure.mol.GetAtomWithIdx(atom).GetSymbol() for atom in atoms)
            why = "given up" if ranked and ranked.doubt else "apart"
            apart[f"{symbols}: {mine or 'none'} / {theirs or 'none'} ({why})"] += 1
            listed.append(f"{component.id} {[atom + 1 for atom in atoms]} {mine} / {theirs}")
        for atom, flag in enumerate(component.flags):
            ranked = ours.get((atom,))
            if flag in ("R", "S") and ranked and ranked.descriptor:
                counts["flags"] += 1
                counts["flags ours"] += ranked.descriptor.upper() == flag
                counts["flags library"] += library.get((atom,), "").upper() == flag
    return {
        "counts": dict(counts),
        "agreement, %": _percent(counts["units alike"], counts["units"]),
        "flags like ours, %": _percent(counts["flags ours"], counts["flags"]),
        "flags like the library's, %": _percent(counts["flags library"], counts["flags"]),
        "apart (ours / library)": dict(apart.most_common()),
        "listed": listed,
        "time, ms": {kind: _times(values) for kind, values in times.items()},
    }


def _percent(part: int, whole: int) -> float:
    return round(100 * part / whole, 3) if whole else 0.0


def _times(values: list[float]) -> dict[str, float]:
    ordered = sorted(values)
    if not ordered:
        return {}
    return {
        "median": round(1000 * ordered[len(ordered) // 2], 3),
        "99th percentile": round(1000 * ordered[int(0.99 * (len(ordered) - 1))], 2),
        "longest": round(1000 * ordered[-1], 1),
    }


def hard() -> dict[str, Any]:
    """CPU seconds and outcome of the hard molecules within the engine's budget."""
    result: dict[str, Any] = {"budget, steps a tree": BUDGET}
    for name, smiles in HARD.items():
        structure: Structure = from_smiles(smiles)
        began = process_time()
        found = rank_all(source_of(structure))
        result[name] = {
            "seconds": round(process_time() - began, 2),
            "units with a letter": sum(bool(one.descriptor) for one in found),
            "given up": sum(bool(one.doubt) for one in found),
            "marked": len(found),
        }
    return result


def measure(size: int | None) -> dict[str, Any]:
    """Every figure."""
    return {
        "suite": suite() or "not here: shared/external/cip_suite",
        "own cases": own_cases(),
        "dictionary": dictionary(size),
        "hard": hard(),
    }


def table(figures: dict[str, Any]) -> str:
    """The main figures, a line each."""
    found = figures["dictionary"]
    published = figures["suite"]
    rows = [
        (
            "own cases right",
            f"{figures['own cases']['right']}/{figures['own cases']['structures']}",
        ),
        ("units compared with the library", found["counts"].get("units", 0)),
        ("agreement, %", found["agreement, %"]),
        ("dictionary flags like ours, %", found["flags like ours, %"]),
        ("dictionary flags like the library's, %", found["flags like the library's, %"]),
        ("drawn molecule, median ms", found["time, ms"]["drawn"].get("median")),
        ("drawn molecule, 99th percentile ms", found["time, ms"]["drawn"].get("99th percentile")),
    ]
    if isinstance(published, dict):
        rows.insert(0, ("published suite, drawn", f"{published['drawn']['ours']}/300"))
        rows.insert(1, ("the library alone, drawn", f"{published['drawn']['library']}/300"))
        rows.insert(2, ("published suite, notation", f"{published['notation']}/300"))
    return "\n".join(f"{name:42} {value}" for name, value in rows)


def main() -> None:
    """Measure and print."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, help="components looked at; all without it")
    parser.add_argument("--json", type=Path)
    given = parser.parse_args()
    figures = measure(given.size)
    text = json.dumps(figures, indent=1, ensure_ascii=False)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(f"{text}\n\n{table(figures)}\n")


if __name__ == "__main__":
    main()
