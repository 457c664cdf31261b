"""Sound records: dictionary entries whose name, flags and coordinates agree.

Soundness is settled without the program under test and without comparing the name's structure
with the drawing (so that the naive comparison of InChI stays a contrast and not a tautology):

- the dictionary's flags equal the descriptors of the ideal coordinates at every centre
  (a lower-case r or s cannot be flagged by the dictionary, which has R, S and N only);
- the letters printed in the name are, as a multiset, the descriptors of the coordinates;
- the dictionary's formula is that of the coordinates, its mass within 0.06 of today's.

The geometry of C=N–H (imines, amidines) is in every set of coordinates but often not in the
name. Where leaving it out makes the letters agree, the record is kept and drawn without it, as
chemists draw it; where the name states it, its hydrogen is drawn. Every exclusion is counted.
"""

from __future__ import annotations

import gzip
import json
import os
import tempfile
from collections import Counter
from collections.abc import Iterator
from dataclasses import asdict, dataclass, field
from importlib.metadata import version
from pathlib import Path
from random import Random

from rdkit import Chem
from rdkit.Chem import Descriptors

from tests.benchmarks import molecules, printed
from tests.benchmarks.dictionary import Component, Dictionary
from tests.benchmarks.molecules import Unit

_SCHEMA = 1
_SHUFFLE = 20_130_000  # the order of the dictionary, shuffled once for every sample
_FORMULA = r"([A-Z][A-Za-z]?)(\d*)"


@dataclass(frozen=True, slots=True)
class SoundRecord:
    """One record. `name` is verbatim but for line breaks; `weight` as printed in a dossier;
    `units` are the molblock's stereogenic units with their descriptors; `imine` says whether the
    name states, or is silent on, a C=N–H geometry ("" where there is none)."""

    id: str
    name: str
    molblock: str
    formula: str
    weight: str
    inchikey: str
    units: tuple[tuple[Unit, str], ...]
    imine: str = ""
    registry: str = ""


@dataclass(frozen=True, slots=True)
class Corpus:
    """Sound records in a fixed order, and why the other components looked at are not in it."""

    records: tuple[SoundRecord, ...]
    considered: int
    excluded: dict[str, int] = field(default_factory=dict)


class Excluded(Exception):
    """A component is not a sound record; the message is the reason that is counted."""


def load(size: int | None = None) -> Corpus:
    """The first `size` sound records of the shuffled dictionary, or all of them.

    All of them take some minutes and are kept in the temporary folder for the next time; a
    small sample is made afresh where that file is not there. Both give the same records.
    """
    kept = _cached()
    if kept is None:
        kept = _collect(size)
        if size is None:
            _keep(kept)
    if size is None or size >= len(kept.records):
        return kept
    return Corpus(kept.records[:size], kept.considered, kept.excluded)


def _collect(size: int | None) -> Corpus:
    records: list[SoundRecord] = []
    excluded: Counter[str] = Counter()
    seen: set[str] = set()
    considered = 0
    for component in _shuffled():
        if size is not None and len(records) >= size:
            break
        considered += 1
        try:
            record = sound_record(component)
            if record.inchikey in seen:
                raise Excluded("same structure as an earlier component")
        except Excluded as reason:
            excluded[str(reason)] += 1
            continue
        seen.add(record.inchikey)
        records.append(record)
    return Corpus(tuple(records), considered, dict(excluded.most_common()))


def _shuffled() -> Iterator[Component]:
    dictionary = Dictionary()
    identifiers = sorted(dictionary.ids)
    Random(_SHUFFLE).shuffle(identifiers)
    for identifier in identifiers:
        # Cheap look at the name first: most components have no descriptor in it.
        if printed.descriptors(dictionary.name(identifier)):
            yield dictionary.component(identifier)


def sound_record(component: Component) -> SoundRecord:
    """The component as a sound record, or `Excluded` with the reason."""
    name = component.name.strip()
    if "\n" in name or "\r" in name:
        raise Excluded("name broken over lines: what stood at the break is lost")
    if printed.relative(name):
        raise Excluded("name marked relative or racemic")
    if printed.axial(name):
        raise Excluded("name with a descriptor of an axis or helix: flags have none")
    if not component.bonds or (component.coordinates != component.coordinates).any():
        raise Excluded("no ideal coordinates")
    if "D" in component.elements or "X" in component.elements:
        raise Excluded("isotope or unknown element")
    try:
        full = molecules.from_coordinates(component)
    except (ValueError, RuntimeError, KeyError) as error:
        raise Excluded("the library makes no molecule of it") from error
    if _counts(component.elements) != _formula_counts(component.formula):
        raise Excluded("dictionary formula is not that of its coordinates")
    units, drawn, imine = _agreeing(component, full, name)
    molblock = _drawing(drawn, units)
    return SoundRecord(
        id=component.id,
        name=name,
        molblock=molblock,
        formula=component.formula.replace(" ", ""),
        weight=_printed_weight(component, full),
        inchikey=Chem.InchiToInchiKey(molecules.standard_inchi(_only(drawn, units))) or "",
        units=tuple(sorted(units.items())),
        imine=imine,
    )


def _agreeing(
    component: Component, full: Chem.Mol, name: str
) -> tuple[dict[Unit, str], Chem.Mol, str]:
    """The units, the molecule to draw and the imine mark, where name and flags agree."""
    letters = Counter(d.letter for d in printed.descriptors(name))
    stated = molecules.without_hydrogens(full, keep_imine=True)
    try:
        units = molecules.labels(stated)
    except RuntimeError as error:
        raise Excluded("the labeller gave up: too many paths") from error
    heavy = [i for i, element in enumerate(component.elements) if element != "H"]
    _same_flags(component, units, heavy)
    imines = [unit for unit in units if molecules.bears_imine_hydrogen(stated, unit)]
    if letters == Counter(units.values()):
        return units, stated, "stated" if imines else ""
    silent = molecules.without_hydrogens(full, keep_imine=False)
    fewer = molecules.labels(silent)
    if imines and letters == Counter(fewer.values()):
        return fewer, silent, "silent"
    raise Excluded(_why_letters_differ(name, letters, Counter(fewer.values())))


def _same_flags(component: Component, units: dict[Unit, str], heavy: list[int]) -> None:
    """Flags against labels, atom by atom; heavy atoms keep their order when hydrogens go."""
    for position, original in enumerate(heavy, start=1):
        flag = component.flags[original]
        label = units.get((position,), "N")
        if label in "rs":
            if flag != "N":
                raise Excluded("pseudoasymmetric centre flagged R or S")
        elif flag != label:
            if component.elements[original] == "P":
                raise Excluded("flag differs from coordinates at phosphorus (P=O / P–OH)")
            raise Excluded("flag differs from coordinates")


def _why_letters_differ(name: str, letters: Counter[str], expected: Counter[str]) -> str:
    upper = Counter(letter.upper() for letter in letters.elements())
    if upper == Counter(letter.upper() for letter in expected.elements()):
        return "letters differ in case only (r, s)"
    if printed.implied(name):
        return "letters fewer: configuration implied in words"
    if expected and letters < expected:
        return "letters fewer than units"
    if letters > expected:
        return "letters more than units"
    return "letters differ"


def _drawing(mol: Chem.Mol, units: dict[Unit, str]) -> str:
    """A molfile that carries exactly these descriptors when read again."""
    if mol.GetNumAtoms() > 999 or mol.GetNumBonds() > 999:
        raise Excluded("too large for a V2000 molfile")
    try:
        molblock = molecules.draw(mol, units)
        again = molecules.read_molblock(molblock)
        carried = molecules.labels(again) if again is not None else None
    except (ValueError, RuntimeError) as error:
        raise Excluded("the library draws no molfile of it") from error
    if carried != units:
        raise Excluded("drawn in two dimensions, the stereo is lost")
    return molblock


def _only(mol: Chem.Mol, units: dict[Unit, str]) -> Chem.Mol:
    """The molecule with marks at its units only."""
    unset = [
        (atom.GetIdx() + 1,)
        for atom in mol.GetAtoms()
        if atom.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED
        and (atom.GetIdx() + 1,) not in units
    ]
    return molecules.with_units(mol, unset=unset)


def _counts(elements: tuple[str, ...]) -> Counter[str]:
    return Counter(elements)


def _formula_counts(text: str) -> Counter[str]:
    """Element counts of a dictionary formula ("C8 H9 N O2"; its charge is not printed there)."""
    counts: Counter[str] = Counter()
    for part in text.split():
        symbol = part.rstrip("0123456789")
        counts[symbol.capitalize()] += int(part[len(symbol) :] or 1)
    return counts


def _printed_weight(component: Component, full: Chem.Mol) -> str:
    """The dictionary's mass as a dossier prints it: two decimals, one from 500 upwards.

    The dictionary adds up atomic weights of before 2007 (C 12.0107, O 15.9994), so its third
    decimal is not today's (C 12.011, O 15.999).
    """
    if abs(component.weight - Descriptors.MolWt(full)) > 0.06:
        raise Excluded("dictionary mass is not that of its formula")
    return f"{component.weight:.1f}" if component.weight >= 500 else f"{component.weight:.2f}"


# --- the copy in the temporary folder -------------------------------------------------------


def _cache_path() -> Path:
    owner = os.getuid() if hasattr(os, "getuid") else 0
    key = f"{version('biotite')}-{version('rdkit')}-{_SCHEMA}-{owner}"
    return Path(tempfile.gettempdir()) / f"sound-records-{key}.json.gz"


def _cached() -> Corpus | None:
    path = _cache_path()
    try:
        with gzip.open(path, "rt", encoding="utf-8") as stream:
            data = json.load(stream)
    except (OSError, EOFError, ValueError):
        return None
    records = tuple(
        SoundRecord(**{**row, "units": tuple((tuple(u), letter) for u, letter in row["units"])})
        for row in data["records"]
    )
    return Corpus(records, data["considered"], data["excluded"])


def _keep(corpus: Corpus) -> None:
    path = _cache_path()
    unfinished = path.with_suffix(f".{os.getpid()}")
    with gzip.open(unfinished, "wt", encoding="utf-8", compresslevel=3) as stream:
        json.dump(asdict(corpus), stream)
    unfinished.replace(path)


if __name__ == "__main__":
    whole = load()
    print(json.dumps({"sound": len(whole.records), "considered": whole.considered}, indent=1))
    print(json.dumps(whole.excluded, indent=1))
