"""Both sides of a finding as exhibits: verbatim, with what matters marked."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from dossiercheck.interpretation import Reading
from dossiercheck.model import Exhibit, Role
from dossiercheck.stereo.drawing import drawing_of
from dossiercheck.views import UnitView

_TITLES = {
    Role.MOLFILE: "Drawing",
    Role.NAME: "Systematic name",
    Role.FORMULA: "Molecular formula as printed",
    Role.MASS: "Relative molecular mass as printed",
    Role.REGISTRY: "Registry number as printed",
    Role.STEREO: "Statement",
    Role.ROTATION: "Optical rotation as printed",
    Role.ABSOLUTE: "Claim of absolute configuration",
    Role.FLACK: "Flack parameter as printed",
    Role.SPACE_GROUP: "Space group as printed",
}


def exhibit(
    reading: Reading,
    *,
    atoms: Mapping[int, str] | None = None,
    spans: Iterable[tuple[int, int] | None] = (),
    note: str = "",
    draw: bool = True,
) -> Exhibit:
    """One evidence; `atoms` (0-based, of its own structure) are marked in its drawing."""
    said = reading.evidence
    title = _TITLES.get(said.role, str(said.role))
    if reading.structure is not None and reading.structure.dimension == 3:
        title = "Coordinates"
    drawing = None
    if draw and reading.structure is not None:
        drawing = drawing_of(reading.structure, atoms, reading.like)
    text = said.text if said.role is not Role.MOLFILE else ""
    kept = sorted({span for span in spans if span})
    return Exhibit(said.id, title, text, said.place, tuple(kept), drawing, note)


def of_units(reading: Reading, views: Iterable[UnitView], *, reference: bool) -> Exhibit:
    """An evidence with the units of some views marked by the descriptor it gives them."""
    atoms: dict[int, str] = {}
    spans = []
    for view in views:
        mine = view.atoms if reference else view.other
        text = (view.descriptor if reference else view.shows) or "?"
        for atom in mine:
            atoms[atom] = ""
        atoms[mine[0]] = text
        if not reference:
            spans.append(view.span)
    return exhibit(reading, atoms=atoms, spans=spans)
