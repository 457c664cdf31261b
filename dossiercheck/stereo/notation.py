"""Line notations: the InChI and InChIKey of a structure, and what differs between two of them."""

from __future__ import annotations

import re

from rdkit import Chem

from dossiercheck.stereo.perception import quiet
from dossiercheck.stereo.structure import Structure, Unit, invert

KEY = re.compile(r"[A-Z]{14}-[A-Z]{8}[SN][A-Z]-[A-Z]")

_MOST_TRIES = 24

_LAYERS = {
    "c": "connections",
    "h": "hydrogen positions",
    "q": "charge",
    "p": "protonation",
    "b": "double-bond configuration",
    "t": "configuration at the centres",
    "m": "which of the two mirror images",
    "s": "kind of stereo (absolute, relative, racemic)",
    "i": "isotopes",
    "f": "fixed hydrogens",
}


def inchi_of(structure: Structure) -> str:
    """Standard InChI, "" where the InChI library refuses.

    A drawing goes to the InChI library as it stands, so that the marks are perceived by that
    library and not by ours.
    """
    with quiet():
        if structure.dimension and "V2000" in structure.text[:400]:
            found = str(Chem.MolBlockToInchi(structure.text))
            if found:
                return found
        return str(Chem.MolToInchi(structure.mol))


def possible_inchis(structure: Structure) -> list[str]:
    """The standard InChI that may rightly stand for a structure, the likeliest first.

    The drawing as the InChI library perceives it, and the structure as we perceive it. For a
    racemate or a relative configuration also the mirror image and the one without stereo, since
    the standard InChI cannot say more.
    """
    found = [inchi_of(structure)]
    with quiet():
        found.append(str(Chem.MolToInchi(structure.mol)))
        if structure.groups:
            bare = Chem.Mol(structure.mol)
            Chem.RemoveStereochemistry(bare)
            mirrored = Chem.Mol(structure.mol)
            for unit in structure.units:
                if unit.kind == "centre":
                    mirrored.GetAtomWithIdx(unit.atoms[0]).InvertChirality()
            found += [str(Chem.MolToInchi(mol)) for mol in (mirrored, bare)]
    return list(dict.fromkeys(text for text in found if text))


def key_of(inchi: str) -> str:
    """The InChIKey of an InChI, "" for none."""
    return str(Chem.InchiToInchiKey(inchi)) if inchi else ""


def units_of_key(structure: Structure, key: str) -> tuple[Unit, ...]:
    """The units that must be inverted for the structure to have a stated InChIKey: one, or all
    centres together; () where neither gives it.

    A key cannot be read backwards, so the likely errors are tried.
    """
    units = structure.units
    centres = tuple(unit for unit in units if unit.kind == "centre")
    tries: list[tuple[Unit, ...]] = [(unit,) for unit in units[:_MOST_TRIES]]
    if len(centres) > 1:
        tries.append(centres)
    with quiet():
        for inverted in tries:
            mol = Chem.Mol(structure.mol)
            for unit in inverted:
                invert(mol, unit)
            if key_of(str(Chem.MolToInchi(mol))) == key:
                return inverted
    return ()


def inchi_difference(stated: str, computed: str) -> str:
    """Which layers of two standard InChI differ, in words; "" where they are equal."""
    if stated == computed:
        return ""
    sides = [_layers(text) for text in (stated, computed)]
    if sides[0].get("1") != sides[1].get("1"):
        return f"the formula ({sides[0].get('1', '?')} against {sides[1].get('1', '?')})"
    names = [
        _LAYERS.get(letter, f"layer /{letter}")
        for letter in sorted({*sides[0], *sides[1]})
        if sides[0].get(letter) != sides[1].get(letter) and letter not in {"0", "1"}
    ]
    if names == [_LAYERS["s"]] or not names:
        return "the version or the kind of stereo"
    return ", ".join(names)


def key_difference(stated: str, computed: str) -> str:
    """Which block of two InChIKeys differs (InChI Technical Manual, section on the key)."""
    if stated == computed:
        return ""
    mine, theirs = stated.split("-"), computed.split("-")
    if mine[0] != theirs[0]:
        return "the first block: another constitution"
    if mine[1][:8] != theirs[1][:8]:
        return "the second block: another configuration or isotope pattern"
    if mine[1] != theirs[1]:
        return "the flags: another kind or version of InChI"
    return "the last letter: another protonation"


def _layers(inchi: str) -> dict[str, str]:
    parts = inchi.strip().split("/")
    layers = {"0": parts[0], "1": parts[1] if len(parts) > 1 else ""}
    for part in parts[2:]:
        layers.setdefault(part[:1], part[1:])
    return layers
