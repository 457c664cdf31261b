"""Numbers of stereogenic units as public substance records state them.

780 records of the FDA/NCATS registration system, slimmed (`gsrs_open/substances.jsonl` beside the
project). Their counts have errors and conventions of their own: the count of double bonds takes
the amide bonds of many peptides in, and leaves those of some macrocycles and salts out.
"""

from __future__ import annotations

import json
import os
from pathlib import Path

import pytest
from rdkit import Chem

from dossiercheck.stereo.counting import Count, stereoisomers
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Unreadable

_HERE = Path(__file__).resolve().parents[2]
_EXTERNAL = Path(os.environ.get("DOSSIERCHECK_EXTERNAL", _HERE.parent / "shared" / "external"))
_RECORDS = _EXTERNAL / "gsrs_open" / "substances.jsonl"

pytestmark = pytest.mark.skipif(not _RECORDS.is_file(), reason="the public records are not here")


def counts(molfile: str) -> list[Count] | None:
    """One count a component, None where one is not to be had."""
    structure = from_molblock(molfile)
    parts = [part for part in structure.components() if len(part) > 1]
    flat = [Chem.MolFragmentToSmiles(structure.mol, part) for part in parts]
    found = [stereoisomers(from_smiles(smiles)) for smiles in flat]
    return None if None in found else [count for count in found if count is not None]


def test_centres_as_the_records_state_them() -> None:
    compared = alike = 0
    for line in _RECORDS.read_text("utf-8").splitlines():
        record = json.loads(line)
        try:
            found = counts(record["molfile"])
        except Unreadable:
            continue
        if found is None or record["stereoCenters"] is None:
            continue
        compared += 1
        most = sum(count.centres for count in found)
        spare = sum(count.nitrogens + count.conditional for count in found)
        alike += most - spare <= record["stereoCenters"] <= most
    # Read one by one, the four that differ: a silicate cage, two records that count one of several
    # like components, an antimony complex.
    assert compared >= 770
    assert compared - alike <= 4
