"""Sections of the common technical document: ICH M4Q(R1) numbers, and folders that say them."""

from __future__ import annotations

import pytest

from dossiercheck.ctd import section_of, within
from dossiercheck.model import Place


@pytest.mark.parametrize(
    ("place", "section"),
    [
        (Place("a.md", section="3.2.S.1.2"), "S.1.2"),
        (Place("a.md", section="2.3.S.3"), "S.3"),
        (Place("a.md", section="S.3.1 Elucidation"), "S.3.1"),
        (Place("a.md", section="3.2.P.5.5"), "P.5.5"),
        (Place("a.xml", section="11 DESCRIPTION"), "11"),
        (Place("m3/32s1-gen-info/structure.sdf"), "S.1.2"),
        (Place("m3/32s1-gen-info/other.sdf"), "S.1"),
        (Place("m3/32p5-contr-drug-prod/32p55-charac-imp/a.sdf"), "P.5.5"),
        # The heading of the page goes before the folder, and a number of another kind says nothing.
        (Place("m3/32s1-gen-info/a.md", section="4.2"), ""),
        (Place("Spiro compounds/a.sdf"), ""),
        (Place("a.md", section="Stability"), ""),
    ],
)
def test_section(place: Place, section: str) -> None:
    assert section_of(place) == section


def test_a_chapter_holds_its_parts_and_no_other() -> None:
    assert within("S.1.2", "S.1")
    assert within("S.1", "S.1")
    assert not within("S.10", "S.1")
    assert not within("S.1", "S.1.2")
