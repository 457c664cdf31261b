"""The wwPDB chemical component dictionary as the package `biotite` ships it.

Components come out as plain values with their ideal coordinates and the dictionary's own R/S
flags; nothing is judged here. wwPDB data are in the public domain (CC0).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise
from typing import Any

import numpy as np


@dataclass(frozen=True, slots=True)
class Component:
    """One entry. `coordinates` are in ångström, NaN where the dictionary has none; `flags` are
    its R, S or N per atom; `bonds` hold 0-based atom positions and the order."""

    id: str
    name: str
    formula: str
    weight: float
    elements: tuple[str, ...]
    charges: tuple[int, ...]
    flags: tuple[str, ...]
    coordinates: np.ndarray
    bonds: tuple[tuple[int, int, int], ...]


_ORDERS = {"SING": 1, "DOUB": 2, "TRIP": 3}


def _runs(column: np.ndarray) -> dict[str, tuple[int, int]]:
    """Where each component's rows begin and end; the dictionary keeps them together."""
    starts = np.concatenate([[0], np.flatnonzero(column[1:] != column[:-1]) + 1, [len(column)]])
    return {str(column[begin]): (int(begin), int(end)) for begin, end in pairwise(starts)}


class Dictionary:
    """The columns of the dictionary, read once; a component is cut out when asked for."""

    def __init__(self) -> None:
        from biotite.structure.info.ccd import get_ccd

        block = get_ccd()
        entries, atoms, bonds = (
            block[part] for part in ("chem_comp", "chem_comp_atom", "chem_comp_bond")
        )
        self.ids: list[str] = [str(value) for value in entries["id"].as_array()]
        self._names = entries["name"].as_array()
        self._formulas = entries["formula"].as_array()
        self._weights = entries["formula_weight"].as_array(float)
        self._positions = {identifier: number for number, identifier in enumerate(self.ids)}
        self._atom_runs = _runs(atoms["comp_id"].as_array())
        self._bond_runs = _runs(bonds["comp_id"].as_array())
        self._atoms: dict[str, Any] = {
            "id": atoms["atom_id"].as_array(),
            "element": atoms["type_symbol"].as_array(),
            "charge": atoms["charge"].as_array(int),
            "flag": atoms["pdbx_stereo_config"].as_array(),
            "xyz": np.stack(
                [atoms[f"pdbx_model_Cartn_{axis}_ideal"].as_array(float) for axis in "xyz"], axis=1
            ),
        }
        self._bonds: dict[str, Any] = {
            "begin": bonds["atom_id_1"].as_array(),
            "end": bonds["atom_id_2"].as_array(),
            "order": bonds["value_order"].as_array(),
        }

    def name(self, identifier: str) -> str:
        """The printed name, verbatim with the dictionary's own mark-up and line breaks."""
        return str(self._names[self._positions[identifier]])

    def component(self, identifier: str) -> Component:
        """One component; without bonds where the dictionary lists none."""
        number = self._positions[identifier]
        first, last = self._atom_runs.get(identifier, (0, 0))
        where = {str(atom): i for i, atom in enumerate(self._atoms["id"][first:last])}
        begin, end = self._bond_runs.get(identifier, (0, 0))
        return Component(
            id=identifier,
            name=str(self._names[number]),
            formula=str(self._formulas[number]),
            weight=float(self._weights[number]),
            elements=tuple(str(e).capitalize() for e in self._atoms["element"][first:last]),
            charges=tuple(int(c) for c in self._atoms["charge"][first:last]),
            flags=tuple(str(f) for f in self._atoms["flag"][first:last]),
            coordinates=np.ascontiguousarray(self._atoms["xyz"][first:last]),
            bonds=tuple(self._bond_rows(where, begin, end)),
        )

    def _bond_rows(
        self, where: dict[str, int], begin: int, end: int
    ) -> Iterator[tuple[int, int, int]]:
        for row in range(begin, end):
            yield (
                where[str(self._bonds["begin"][row])],
                where[str(self._bonds["end"][row])],
                _ORDERS[str(self._bonds["order"][row])],
            )
