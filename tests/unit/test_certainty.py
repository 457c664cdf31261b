"""Nothing grave rests on an attribution that is not firm."""

from __future__ import annotations

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Cell, Grade, Passage, Place, Review, State, Table
from dossiercheck.settings import Settings

SETTINGS = Settings()
BOOK = rulebook.load(SETTINGS)
HEADINGS = ("3.2.S.1 General information", "3.2.S.1.2 Structure")
NAME = "(2S,3R)-2-amino-3-hydroxybutanoic acid"
OTHER = "(2S,3S)-2-amino-3-hydroxybutanoic acid"


def line(number: int, text: str) -> Passage:
    return Passage(text, Place("a.md", section="3.2.S.1.2", line=number), HEADINGS)


def reviewed(*items: Passage | Table) -> Review:
    return pipeline.review_items(items, SETTINGS, BOOK)


def table(*rows: tuple[str, str]) -> Table:
    place = Place("a.md", section="3.2.S.1.2", table=1)
    cells = tuple(
        tuple(
            Cell(text, Place("a.md", "3.2.S.1.2", table=1, row=n, column=c))
            for c, text in zip("AB", row, strict=True)
        )
        for n, row in enumerate(rows, 1)
    )
    return Table(cells, place, HEADINGS)


LABELLED = (line(1, "Substance: Dorvaline"), line(2, f"Systematic name: {NAME}"))


def test_a_contradiction_on_a_weak_attribution_is_undetermined() -> None:
    review = reviewed(*LABELLED, line(4, f"In older reports it was {OTHER}."))
    (finding,) = [one for one in review.findings if one.rule.startswith("name-and-drawing/")]
    assert finding.grade is Grade.REMARK
    assert finding.message.startswith("Undetermined, as it is not certain that")
    (substance,) = review.substances
    weak = [key for key, why in substance.attribution.items() if why.startswith("weak: ")]
    assert len(weak) == 1
    assert substance.concordance is not None
    states = {
        c.state for row in substance.concordance.rows for c in row.cells if c.evidence in weak
    }
    assert State.UNDETERMINED in states
    assert State.DIFFERS not in states


def test_the_same_contradiction_on_a_firm_one_is_grave() -> None:
    review = reviewed(*LABELLED, table(("Substance", "Dorvaline"), ("Systematic name", OTHER)))
    (finding,) = [one for one in review.findings if one.rule.startswith("name-and-drawing/")]
    assert finding.grade is Grade.CRITICAL


def test_what_a_group_says_against_itself_is_grave_whoever_it_speaks_of() -> None:
    said = table(("Systematic name", OTHER), ("Molecular formula", "C4H10NO3"))
    review = reviewed(*LABELLED, said)
    assert Grade.MAJOR in {
        one.grade for one in review.findings if one.rule == "identity/formula-differs"
    }
