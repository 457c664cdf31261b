"""Claims of sentences through the line: found where wrong, silent where right, hedged or open.

Structures are simple ones; what is right of them follows from the letters and from IUPAC, Basic
Terminology of Stereochemistry, 1996.
"""

from __future__ import annotations

from collections.abc import Mapping

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Field, Item, Passage, Place, Record, Review
from dossiercheck.settings import Settings

BOOK = rulebook.load(Settings())
THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"  # (2S,3R)
ALLO = "C[C@H](O)[C@H](N)C(=O)O"  # (2S,3S)
MIRROR = "C[C@H](O)[C@@H](N)C(=O)O"  # (2R,3S)
RACEMATE = "C[C@@H](O)[C@H](N)C(=O)O |&1:1,3|"


def review(substances: Mapping[str, str], *sentences: str, name: str = "", jobs: int = 1) -> Review:
    """Records of SMILES by label, the first with a name, then the sentences as passages."""
    items: list[Item] = []
    for number, (label, smiles) in enumerate(substances.items(), 1):
        place = Place("a.sdf", record=number)
        given = {"label": label, "SMILES": smiles}
        if name and number == 1:
            given["IUPAC name"] = name
        fields = tuple(
            Field(k, v, Place("a.sdf", record=number, field=k)) for k, v in given.items()
        )
        items.append(Record("", "", fields, place))
    items += [
        Passage(text, Place("b.md", line=number), ("Stereochemistry",))
        for number, text in enumerate(sentences, 1)
    ]
    return pipeline.review_items(items, Settings(columns={"label": "label"}, jobs=jobs), BOOK)


def statement_rules(review: Review) -> list[str]:
    return [
        finding.rule.partition("/")[2]
        for finding in review.findings
        if finding.rule.startswith("statement/")
    ]


PAIR = {"DX-101": THREONINE, "Impurity A": MIRROR}


@pytest.mark.parametrize(
    ("substances", "text", "rules"),
    [
        (PAIR, "Impurity A is the enantiomer of DX-101.", []),
        (PAIR, "Impurity A is a diastereomer of DX-101.", ["relation-differs"]),
        (PAIR, "Impurity A is an epimer of DX-101.", ["relation-differs"]),
        (PAIR, "Impurity A is a constitutional isomer of DX-101.", ["relation-differs"]),
        (PAIR, "Impurity A is a stereoisomer of DX-101.", []),
        (PAIR, "Impurity A is the enantiomer of DX-999.", []),
        ({"DX-101": THREONINE, "Impurity A": ALLO}, "Impurity A is an epimer of DX-101.", []),
        (
            {"DX-101": THREONINE, "Impurity A": "CC(O)[C@H](N)C(=O)O"},
            "Impurity A is the enantiomer of DX-101.",
            [],
        ),
        (
            {"DX-101": THREONINE, "Impurity A": THREONINE},
            "Impurity A is the enantiomer of DX-101.",
            ["relation-differs"],
        ),
        (
            {"DX-101": THREONINE, "Impurity R": RACEMATE},
            "Impurity R is the racemate of DX-101.",
            [],
        ),
        ({"DX-101": RACEMATE}, "DX-101 is a single enantiomer.", ["kind-differs"]),
        ({"DX-101": RACEMATE}, "DX-101 is not a racemate.", ["kind-differs"]),
        ({"DX-101": THREONINE}, "DX-101 is not a racemate.", []),
        ({"DX-101": THREONINE}, "DX-101 is optically inactive.", ["kind-differs"]),
        ({"DX-101": "CCO"}, "DX-101 is chiral.", ["kind-differs"]),
        ({"DX-101": THREONINE}, "DX-101 is probably a racemate.", []),
        ({"DX-101": THREONINE}, "DX-101 has three stereocentres.", ["centre-count-differs"]),
        ({"DX-101": THREONINE}, "DX-101 can exist as four stereoisomers.", []),
        (
            {"DX-101": THREONINE},
            "DX-101 can exist as three stereoisomers.",
            ["isomer-count-differs"],
        ),
        (
            {"DX-101": RACEMATE},
            "The specific rotation of DX-101 is −20.0° (c 1, water, 589 nm).",
            ["rotation-impossible"],
        ),
        (
            {"DX-101": THREONINE},
            "The specific rotation of DX-101 is −20.0° (c 1, water, 589 nm).",
            [],
        ),
    ],
)
def test_sentences(substances: Mapping[str, str], text: str, rules: list[str]) -> None:
    assert statement_rules(review(substances, text)) == rules


@pytest.mark.parametrize(
    ("text", "rules"),
    [
        ("The configuration at C-3 of DX-101 is R.", []),
        ("The configuration at C-3 of DX-101 is S.", ["configuration-differs"]),
        ("The configuration at C-2 of DX-101 is R.", ["configuration-differs"]),
        # No unit has the locant by the name: another numbering, and nothing is said.
        ("The configuration at C-7 of DX-101 is S.", []),
        ("The configuration at C-3 of DX-101 is presumably S.", []),
    ],
)
def test_locants_are_those_of_the_name(text: str, rules: list[str]) -> None:
    found = review({"DX-101": THREONINE}, text, name="(2S,3R)-2-amino-3-hydroxybutanoic acid")
    assert statement_rules(found) == rules


def test_without_a_name_a_locant_decides_nothing() -> None:
    found = review({"DX-101": THREONINE}, "The configuration at C-3 of DX-101 is S.")
    assert statement_rules(found) == []


def test_a_locant_that_two_units_bear_decides_nothing() -> None:
    found = review(
        {"DX-101": "C[C@@H](O)C(=O)O[C@@H](C)CC"},
        "The configuration at C-2 of DX-101 is R.",
        "The configuration at C-2 of DX-101 is S.",
        name="(2S)-butan-2-yl (2R)-2-hydroxypropanoate",
    )
    assert statement_rules(found) == []
    assert [finding.rule for finding in found.findings] == []


def test_two_signs_need_one_solvent_and_one_wavelength() -> None:
    first = "The specific rotation of DX-101 is −20.0° (c 1, water, 589 nm)."
    for second, expected in (
        ("The specific rotation of DX-101 is +20.0° (c 1, water, 589 nm).", True),
        ("The specific rotation of DX-101 is +20.0° (c 1, methanol, 589 nm).", False),
        ("The specific rotation of DX-101 is +20.0° (c 1, water, 365 nm).", False),
        ("The specific rotation of DX-101 is +20.0° (c 1, 589 nm).", False),
    ):
        found = statement_rules(review({"DX-101": THREONINE}, first, second))
        assert ("rotation-signs-differ" in found) is expected


def test_relations_are_the_same_with_two_workers() -> None:
    substances = {"DX-101": THREONINE, "Impurity A": ALLO, "Impurity B": MIRROR}
    said = [
        "Impurity A is the enantiomer of DX-101.",
        "Impurity B is the enantiomer of DX-101.",
    ]
    one, two = (review(substances, *said, jobs=jobs) for jobs in (1, 2))
    assert one.findings == two.findings
    assert statement_rules(one) == ["relation-differs"]


@pytest.mark.parametrize(
    ("text", "open_"),
    [
        ("Impurity A is the enantiomer of DX-999.", True),
        ("Impurity Q is a single enantiomer.", True),
        ("The configuration at C-7 of DX-101 is S.", True),
        ("DX-101 is the trans isomer.", True),
        ("Impurity A is the enantiomer of DX-101.", False),
        ("DX-101 is a single enantiomer.", False),
        ("DX-101 has two stereocentres.", False),
    ],
)
def test_a_statement_held_against_nothing_is_listed(text: str, open_: bool) -> None:
    reasons = [one.reason for one in review(PAIR, text).unread]
    assert reasons == ["statement-not-compared"] * open_


@pytest.mark.parametrize(
    ("text", "rules"),
    [
        ("DX-101 is the epimer at C-3 of Impurity A.", []),
        ("DX-101 is the epimer at C-2 of Impurity A.", ["relation-differs"]),
        # No name gives a unit this locant: it may be of another numbering.
        ("DX-101 is the epimer at C-6 of Impurity A.", []),
    ],
)
def test_an_epimer_differs_at_the_locant_stated(text: str, rules: list[str]) -> None:
    substances = {"DX-101": THREONINE, "Impurity A": ALLO}
    found = review(substances, text, name="(2S,3R)-2-amino-3-hydroxybutanoic acid")
    assert statement_rules(found) == rules
