"""The comparison a script of ten lines makes, for contrast: InChI of name against InChI of drawing.

Everything by the library's defaults. It cannot say where two structures part, nor why.
"""

from __future__ import annotations

from collections.abc import Sequence

from rdkit import Chem

from tests.benchmarks import opsin, printed
from tests.benchmarks.corpus import SoundRecord


def differing(records: Sequence[SoundRecord]) -> list[bool | None]:
    """For each record whether the two InChI differ; None where the name is not parsed."""
    names = [printed.bare(record.name) for record in records]
    smiles = opsin.parse(names)
    found: list[bool | None] = []
    for name, record in zip(names, records, strict=True):
        text = smiles.get(name)
        mol = Chem.MolFromSmiles(text) if text else None
        drawn = Chem.MolFromMolBlock(record.molblock)
        if mol is None or drawn is None:
            found.append(None)
        else:
            pair = [Chem.MolToInchi(m, logLevel=None) for m in (mol, drawn)]
            found.append(pair[0] != pair[1])
    return found


def formulas_differ(records: Sequence[SoundRecord]) -> list[bool | None]:
    """For each record whether the name's structure has another formula than the dictionary's
    (protonation apart): then the name is of another compound, and the record is not sound."""
    from tests.benchmarks import molecules

    names = [printed.bare(record.name) for record in records]
    smiles = opsin.parse(names)
    found: list[bool | None] = []
    for name, record in zip(names, records, strict=True):
        text = smiles.get(name)
        mol = molecules.read_smiles(text) if text else None
        drawn = molecules.read_molblock(record.molblock)
        if mol is None or drawn is None:
            found.append(None)
        else:
            found.append(molecules.neutral_formula(mol) != molecules.neutral_formula(drawn))
    return found
