"""The cases of `descriptors.toml` as values."""

from __future__ import annotations

import tomllib
from collections.abc import Iterable
from pathlib import Path
from typing import Any

from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure, Unit
from tests.cases.drawn import molblock

CASES: list[dict[str, Any]] = tomllib.loads(
    (Path(__file__).parent / "descriptors.toml").read_text("utf-8")
)["case"]


def structure(case: dict[str, Any]) -> Structure:
    """A case's notation or drawing, read."""
    if "smiles" in case:
        return from_smiles(case["smiles"])
    return from_molblock(molblock(case["atoms"], case["bonds"]))


def labels(units: Iterable[Unit]) -> dict[str, str]:
    """Letters as a case writes them: by the positions of a unit's ends, from 1."""
    return {"-".join(str(atom + 1) for atom in sorted(u.atoms)): u.descriptor for u in units}
