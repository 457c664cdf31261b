"""One evidence laid on the reference: what it says of each stereogenic unit, as data."""

from __future__ import annotations

from dataclasses import dataclass

from dossiercheck.interpretation import Reading
from dossiercheck.model import State
from dossiercheck.stereo.alignment import Alignment
from dossiercheck.stereo.constitution import SAME


@dataclass(frozen=True, slots=True)
class UnitView:
    """One unit as one evidence has it.

    `atoms` number the reference, `other` the evidence's own structure, 0-based. `state` is that
    of the concordance; `silent_side` is "reference" or "other" where one of them is silent.
    `descriptor` is the reference's, `shows` the evidence's; for a name `shows` is the printed
    descriptor where it could be tied to the unit, and `span` its characters.
    """

    kind: str
    atoms: tuple[int, ...]
    other: tuple[int, ...]
    state: State
    descriptor: str
    shows: str
    silent_side: str = ""
    locant: str = ""
    span: tuple[int, int] | None = None
    note: str = ""


@dataclass(frozen=True, slots=True)
class Pair:
    """One structural evidence laid on the reference."""

    reading: Reading
    alignment: Alignment
    views: tuple[UnitView, ...]

    @property
    def agrees(self) -> bool:
        """Whether it says of the constitution and of every unit what the reference says, and both
        speak of one stereoisomer."""
        found = self.alignment
        other = self.reading.structure
        return (
            found.constitution.verdict == SAME
            and not found.doubt
            and other is not None
            and not other.groups
            and all(view.state is State.AGREES for view in self.views)
        )

    def having(self, state: State, silent_side: str = "") -> list[UnitView]:
        """The units in a state, in the reference's order."""
        return [
            view
            for view in self.views
            if view.state is state and (not silent_side or view.silent_side == silent_side)
        ]
