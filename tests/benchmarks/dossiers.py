"""The corpus of short dossiers: its files, what they hold, and what is expected of each.

A set (`tuning`, `holdout`) is a folder of TOML files beside `structures/<set>.toml`, which gives
SMILES and systematic name of every invented substance by key. A dossier has

- `[files]`: path and text. `{key.name}`, `{key.smiles}`, `{key.formula}`, `{key.mass}` and
  `{key.inchikey}` stand for what the structure of that key gives;
- `[drawings]`: path of an SDF file and its records, each a label and the key of its structure;
- `[who."path"]`: attribution. A quotation from that file, and the substance that the words between
  « and » speak of (all of the quotation where there are no marks). Every drawing counts too. A
  key `substance/form` is a salt or solvate of `substance`: one substance, another form;
- `mutations`: changes of a sound dossier that make it wrong, `[kind, path, quotation, instead]`,
  and for two labels that change places `["labels", path, one, other]`;
- `sound = true`, or a contradiction: `kind`, `gravity` (the least grade that will do) and
  `planted`, quotations as `[path, quotation]` of which a finding must touch one. `missing` holds
  words instead, of which a finding of the family `coverage` must have one;
- `complete = true` where the dossier states all that the coverage rules look for: only there is a
  finding of the family `coverage` on a sound dossier a false alarm.

A dossier with `base` is that one with `changes` (`[path, quotation, instead]`) and `redrawn`
(`[path, label, key]`); where it has no `planted`, what was changed is what must be found.
"""

from __future__ import annotations

import re
import tomllib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace
from functools import cache, cached_property
from pathlib import Path
from typing import Any

from rdkit import Chem
from rdkit.Chem import rdDepictor
from rdkit.Chem.Descriptors import MolWt
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

FOLDER = Path(__file__).resolve().parents[1] / "cases" / "dossiers"
SETS = ("tuning", "holdout")
_HOLE = re.compile(r"\{([\w./-]+)\.(name|smiles|formula|mass|inchikey)\}")
_KEYS = {
    *("title", "sound", "complete", "files", "drawings", "who", "mutations"),
    *("base", "changes", "redrawn", "kind", "gravity", "planted", "missing"),
}


@dataclass(frozen=True)
class Structure:
    """An invented substance. `name` is "" where no parser reads one."""

    key: str
    smiles: str
    name: str = ""

    @cached_property
    def mol(self) -> Chem.Mol:
        return Chem.MolFromSmiles(self.smiles)

    def says(self, what: str) -> str:
        """What stands in a text for `{key.what}`."""
        if what == "name":
            return self.name
        if what == "smiles":
            # Without enhanced stereo a racemate's line notation has no marks (common practice).
            return Chem.MolToSmiles(self.mol, isomericSmiles="|" not in self.smiles)
        if what == "formula":
            return CalcMolFormula(self.mol)
        if what == "mass":
            return f"{MolWt(self.mol):.2f}"
        return Chem.MolToInchiKey(Chem.MolFromSmiles(self.says("smiles")))

    def record(self, label: str) -> str:
        """One record of an SDF file, drawn with wedges and the chiral flag of one enantiomer."""
        mol = Chem.Mol(self.mol)
        mol.SetProp("_Name", label)
        rdDepictor.Compute2DCoords(mol)
        if "|" in self.smiles:
            block = Chem.MolToV3KMolBlock(mol)
        else:
            marked = Chem.FindMolChiralCenters(mol, useLegacyImplementation=False)
            mol.SetIntProp("_MolFileChiralFlag", int(bool(marked)))
            block = Chem.MolToMolBlock(mol)
        return f"{block}$$$$\n"


@dataclass(frozen=True)
class Words:
    """Words in a file. `line` counts from 1; `start` and `end` from 0 in that line. In an SDF
    file `line` is the record and the words are its label."""

    path: str
    line: int
    start: int
    end: int
    text: str
    drawn: bool = False


@dataclass(frozen=True)
class Dossier:
    """One dossier with its texts filled in; `record` holds (label, key) by path of a drawing."""

    id: str
    title: str
    sound: bool
    complete: bool
    texts: Mapping[str, str]
    records: Mapping[str, tuple[tuple[str, str], ...]]
    who: tuple[tuple[Words, str], ...]
    mutations: tuple[tuple[str, str, str, str], ...]
    base: str = ""
    kind: str = ""
    gravity: str = ""
    planted: tuple[Words, ...] = ()
    missing: tuple[str, ...] = ()
    structures: Mapping[str, Structure] = field(default_factory=dict)

    def write(self, folder: Path) -> None:
        """The dossier's files, below `folder`."""
        for path, text in self._whole():
            (folder / path).parent.mkdir(parents=True, exist_ok=True)
            (folder / path).write_text(text, encoding="utf-8")

    def _whole(self) -> Iterator[tuple[str, str]]:
        yield from self.texts.items()
        for path, records in self.records.items():
            yield path, "".join(self.structures[key].record(label) for label, key in records)

    def mutated(self, mutation: tuple[str, str, str, str]) -> tuple[Dossier, tuple[Words, ...]]:
        """The dossier with one mutation, and the words that it put in."""
        kind, path, one, other = mutation
        text = self.texts[path]
        if kind == "labels":
            kept = re.compile(rf"(?<!\w)(?:{re.escape(one)}|{re.escape(other)})(?!\w)")
            text = kept.sub(lambda found: other if found[0] == one else one, text)
            placed = [_placed(path, text, m.start(), m.end()) for m in kept.finditer(text)]
            return replace(self, texts={**self.texts, path: text}), tuple(placed)
        text, words = changed(path, text, one, _fill(other, self.structures, path))
        return replace(self, texts={**self.texts, path: text}), (words,)


@cache
def structures(which: str) -> dict[str, Structure]:
    """All substances of a set, by key."""
    data = tomllib.loads((FOLDER / "structures" / f"{which}.toml").read_text(encoding="utf-8"))
    return {key: Structure(key, *said) for key, said in data.items()}


@cache
def dossiers(which: str) -> tuple[Dossier, ...]:
    """The dossiers of a set in the order of their file names. ValueError, with the file's name,
    where a quotation does not stand in its file just once, or a key is not known."""
    known = structures(which)
    raw = {
        path.stem: tomllib.loads(path.read_text(encoding="utf-8"))
        for path in sorted((FOLDER / which).glob("*.toml"))
    }
    made = []
    for name, data in raw.items():
        try:
            made.append(_dossier(name, data, raw, known))
        except (KeyError, ValueError) as error:
            raise ValueError(f"{which}/{name}.toml: {error}") from error
    return tuple(made)


def _dossier(
    name: str, data: dict[str, Any], raw: Mapping[str, dict[str, Any]], known: dict[str, Structure]
) -> Dossier:
    if unknown := set(data) - _KEYS:
        raise ValueError(f"unknown keys {sorted(unknown)}")
    whole = {**raw[data["base"]], **data} if "base" in data else data
    texts = {path: _fill(text, known, path) for path, text in whole["files"].items()}
    records = {
        path: [(label, key) for label, key in listed]
        for path, listed in whole.get("drawings", {}).items()
    }
    planted: list[Words] = []
    for path, quotation, instead in data.get("changes", ()):
        texts[path], words = changed(
            path, texts[path], _fill(quotation, known, path), _fill(instead, known, path)
        )
        planted.append(words)
    for path, label, key in data.get("redrawn", ()):
        number = [one for one, _ in records[path]].index(label)
        records[path][number] = (label, key)
        planted.append(Words(path, number + 1, 0, 0, label, drawn=True))
    if "planted" in data:
        planted = [
            _quoted(path, texts, records, _fill(said, known, path))
            for path, said in data["planted"]
        ]
    # In a dossier that is wrong, whom the changed place speaks of is what is in question.
    expected = () if "base" in data and "who" not in data else _who(whole, texts, records, known)
    return Dossier(
        id=name,
        title=data["title"],
        sound=data.get("sound", False),
        complete=whole.get("complete", False),
        texts=texts,
        records={path: tuple(listed) for path, listed in records.items()},
        who=tuple(expected),
        mutations=tuple((k, p, _fill(a, known, p), b) for k, p, a, b in data.get("mutations", ())),
        base=data.get("base", ""),
        kind=data.get("kind", ""),
        gravity=data.get("gravity", ""),
        planted=tuple(planted),
        missing=tuple(data.get("missing", ())),
        structures=known,
    )


def _who(
    whole: dict[str, Any],
    texts: Mapping[str, str],
    records: Mapping[str, list[tuple[str, str]]],
    known: Mapping[str, Structure],
) -> Iterator[tuple[Words, str]]:
    for path, said in whole.get("who", {}).items():
        for quotation, key in said.items():
            yield _quoted(path, texts, records, _fill(quotation, known, path)), key
    for path, listed in records.items():
        for number, (label, key) in enumerate(listed, 1):
            yield Words(path, number, 0, 0, label, drawn=True), known[key].key


def _quoted(
    path: str,
    texts: Mapping[str, str],
    records: Mapping[str, list[tuple[str, str]]],
    quotation: str,
) -> Words:
    if path in records:
        number = [label for label, _ in records[path]].index(quotation)
        return Words(path, number + 1, 0, 0, quotation, drawn=True)
    return find_words(path, texts[path], quotation)


def find_words(path: str, text: str, quotation: str) -> Words:
    """Where the marked words of a quotation stand; ValueError unless it is there just once."""
    whole = quotation.replace("«", "").replace("»", "")
    if text.count(whole) != 1:
        raise ValueError(f"{path}: {text.count(whole)} times and not once: {quotation!r}")
    start = text.index(whole)
    if "«" not in quotation:
        return _placed(path, text, start, start + len(whole))
    start += quotation.index("«")
    return _placed(path, text, start, start + quotation.index("»") - quotation.index("«") - 1)


def changed(path: str, text: str, quotation: str, instead: str) -> tuple[str, Words]:
    """The text with the marked words of a quotation replaced, and where what replaces them is.
    Where nothing replaces them, the words are the line's rest."""
    words = find_words(path, text, quotation)
    lines = text.split("\n")
    line = lines[words.line - 1]
    lines[words.line - 1] = line[: words.start] + instead + line[words.end :]
    end = words.start + len(instead)
    new = instead or lines[words.line - 1]
    if not instead:
        return "\n".join(lines), Words(path, words.line, 0, len(new), new)
    return "\n".join(lines), Words(path, words.line, words.start, end, instead)


def _placed(path: str, text: str, start: int, end: int) -> Words:
    before = text.rfind("\n", 0, start) + 1
    return Words(
        path, text.count("\n", 0, start) + 1, start - before, end - before, text[start:end]
    )


def _fill(text: str, known: Mapping[str, Structure], path: str) -> str:
    def value(hole: re.Match[str]) -> str:
        said = known[hole[1]].says(hole[2])
        # A cell with commas is quoted (RFC 4180).
        return f'"{said}"' if path.endswith(".csv") and "," in said else said

    return _HOLE.sub(value, text)
