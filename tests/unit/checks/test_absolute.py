"""Crystals beside what the rest of a dossier says: CIF in, findings out, and each error told once.

Criteria: H. D. Flack and G. Bernardinelli, J. Appl. Cryst. 2000, 33, 1143. That a space group
with operations of the second kind holds both enantiomers: International Tables for
Crystallography, volume A. All scenarios run as one dossier, each under a label of its own.
"""

from __future__ import annotations

from collections.abc import Callable

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Item, Place, Record, Review
from dossiercheck.settings import Settings
from tests.unit.checks.cases import (
    ACROSS,
    ALLO,
    BOTH_HANDS,
    CONFIGURATION,
    FLACK,
    INVERTED,
    MIRROR,
    MIRRORED,
    NAME_SILENT,
    NO_FLACK,
    STATED_KIND,
    THR,
    THREONINE,
)
from tests.unit.readers.crystals import Made, crystal
from tests.unit.readers.reading import read
from tests.unit.stereo.forms import v2000, v3000

SETTINGS = Settings()
BOOK = rulebook.load(SETTINGS)

Part = Callable[[str], list[Item]]  # what one place of the dossier says, given the label


def cif(
    smiles: str,
    symbol: str = "P 21 21 21",
    *,
    name: str = "?",
    claim: str = "?",
    flack: str = "?",
    change: Callable[[Made], object] | None = None,
) -> Part:
    def part(label: str) -> list[Item]:
        made = crystal(
            smiles,
            symbol,
            chemical_name_systematic=name,
            chemical_absolute_configuration=claim,
            refine_ls_abs_structure_Flack=flack,
        )
        made.block = label
        if change:
            change(made)
        return read(f"{label}/crystal.cif", made.text().encode())

    return part


def sound(smiles: str, name: str = "?") -> Part:
    return cif(smiles, name=name, claim="ad", flack="0.01(2)")


def drawing(molfile: str) -> Part:
    return lambda label: [Record(label, molfile, (), Place(f"{label}/drawing.sdf", record=1))]


def said(text: str) -> Part:
    return lambda label: read(f"{label}/text.txt", f"Substance: {label}\n{text}\n".encode())


DRAWN = drawing(v2000(THREONINE))
PEA = "C[C@H](O)c1ccccc1"
MESO = "O[C@@H](C(=O)O)[C@@H](C(=O)O)O"
SILENT = "2-amino-3-hydroxybutanoic acid"

SCENARIOS: dict[str, tuple[list[str], list[Part]]] = {
    # Drawing against coordinates: across-documents/structures-differ serves.
    "drawing and crystal agree": ([], [DRAWN, sound(THREONINE)]),
    "crystal of a diastereomer": ([ACROSS], [DRAWN, sound(ALLO)]),
    "crystal of the mirror image": ([ACROSS], [DRAWN, sound(MIRRORED)]),
    "crystal of a homologue": ([ACROSS], [DRAWN, sound("CC[C@@H](O)[C@H](N)C(=O)O")]),
    "name in the file": ([], [sound(THREONINE, THR)]),
    "wrong name in the file": ([CONFIGURATION], [sound(THREONINE, THR.replace("3R", "3S"))]),
    "mirrored name in the file": ([MIRROR], [sound(MIRRORED, THR)]),
    "silent name in the file": ([NAME_SILENT], [sound(THREONINE, SILENT)]),
    # The hand is said to be unknown: only relative configuration can be contradicted.
    "unknown hand, mirror image drawn": ([], [DRAWN, cif(MIRRORED, claim="unk")]),
    "unknown hand, mirror image named": ([], [cif(MIRRORED, name=THR, claim="unk")]),
    "unknown hand, diastereomer": ([ACROSS], [DRAWN, cif(ALLO, claim="unk")]),
    "unknown hand, single enantiomer stated": (
        [],
        [cif(THREONINE, claim="unk"), said("Stereochemistry: single enantiomer")],
    ),
    # Racemic crystals.
    "both hands, one drawn": ([BOTH_HANDS], [DRAWN, cif(THREONINE, "P 1 21/c 1")]),
    "both hands, the other drawn": ([BOTH_HANDS], [DRAWN, cif(MIRRORED, "P 1 21/c 1")]),
    "both hands, one named": ([BOTH_HANDS], [cif(THREONINE, "P -1", name=THR)]),
    "both hands, one stated": (
        [BOTH_HANDS],
        [cif(PEA, "P b c a"), said("Stereochemistry: single enantiomer")],
    ),
    "both hands, racemate stated": ([], [cif(PEA, "P b c a"), said("Stereochemistry: racemate")]),
    "both hands, racemate drawn": ([], [drawing(v3000(f"{PEA} |&1:1|")), cif(PEA, "P -1")]),
    "both hands, racemate named": ([], [cif(PEA, "P -1", name="1-phenylethan-1-ol")]),
    "both hands, achiral stated": (
        [STATED_KIND],
        [cif(PEA, "P b c a"), said("Stereochemistry: achiral")],
    ),
    "both hands of a diastereomer": (
        [BOTH_HANDS, ACROSS],
        [DRAWN, cif(ALLO, "P 1 21/c 1")],
    ),
    "meso in a group of both hands": ([], [drawing(v2000(MESO)), cif(MESO, "P -1")]),
    "meso in a group of one hand": ([], [drawing(v2000(MESO)), cif(MESO)]),
    "both hands, atoms not read": (
        [BOTH_HANDS],
        [DRAWN, cif(THREONINE, "P 1 21/c 1", change=lambda made: made.atoms.pop())],
    ),
    # Flack.
    "Flack sound": ([], [DRAWN, cif(THREONINE, claim="ad", flack="0.02(3)")]),
    "u of 0.04": ([FLACK], [DRAWN, cif(THREONINE, claim="ad", flack="0.02(4)")]),
    "u of 0.5": ([FLACK], [DRAWN, cif(THREONINE, claim="ad", flack="0.2(5)")]),
    "past three u": ([FLACK], [DRAWN, cif(THREONINE, claim="rmad", flack="0.13(3)")]),
    "x of 1": ([INVERTED], [DRAWN, cif(THREONINE, claim="ad", flack="0.99(3)")]),
    "x of 1, no claim": ([INVERTED], [DRAWN, cif(THREONINE, flack="0.99(3)")]),
    "u of 0.5, reference molecule": ([], [DRAWN, cif(THREONINE, claim="rm", flack="0.2(5)")]),
    "u of 0.5, unknown": ([], [DRAWN, cif(THREONINE, claim="unk", flack="0.2(5)")]),
    "u of 0.5, no claim": ([], [DRAWN, cif(THREONINE, flack="0.2(5)")]),
    "no Flack": ([NO_FLACK], [DRAWN, cif(THREONINE, claim="ad")]),
    "Flack not applicable": ([NO_FLACK], [DRAWN, cif(THREONINE, claim="ad", flack=".")]),
    "no Flack, by synthesis": ([], [DRAWN, cif(THREONINE, claim="syn")]),
    "Flack in the text": ([], [cif(THREONINE, claim="ad"), said("Flack parameter: 0.01(2)")]),
    "vague Flack in the text": (
        [FLACK],
        [cif(THREONINE, claim="ad"), said("Flack parameter: 0.3(2)")],
    ),
    "u of 0.08": ([FLACK], [cif(THREONINE, claim="ad", flack="0.02(8)")]),
    "u of 0.08, enantiopure": (
        [],
        [cif(THREONINE, claim="ad", flack="0.02(8)"), said("Stereochemistry: enantiopure")],
    ),
}
LABELS = {title: f"OVE-{number}" for number, title in enumerate(SCENARIOS, 201)}


@pytest.fixture(scope="module")
def review() -> Review:
    items = [
        item
        for title, (_, parts) in SCENARIOS.items()
        for part in parts
        for item in part(LABELS[title])
    ]
    return pipeline.review_items(items, SETTINGS, BOOK)


@pytest.mark.parametrize("title", SCENARIOS)
def test_the_findings_are_exactly_these(title: str, review: Review) -> None:
    (substance,) = (s for s in review.substances if s.label == LABELS[title])
    found = [f for f in review.findings if f.substance == substance.id and f.grade != "remark"]
    assert sorted(f.rule for f in found) == SCENARIOS[title][0], [f.message for f in found]
    assert all(len(finding.exhibits) > 1 for finding in found)


def test_nothing_broke_down(review: Review) -> None:
    assert len(review.substances) == len(SCENARIOS)
    assert [u.reason for u in review.unread] == ["charge-not-assignable"]


def test_coordinates_are_evidence_of_their_kind(review: Review) -> None:
    label = LABELS["crystal of a diastereomer"]
    (substance,) = (s for s in review.substances if s.label == label)
    (finding,) = (f for f in review.findings if f.substance == substance.id)
    assert "Coordinates" in {exhibit.title for exhibit in finding.exhibits}
