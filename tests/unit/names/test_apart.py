"""Names of which the parser makes two molecules although they may name one."""

from __future__ import annotations

import pytest

from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names


@pytest.mark.parametrize(
    "text",
    [
        "5-BROMOSALICYLIC ACID ACETATE",
        "3-hydroxy-1-methylpyridinium bromide dimethylcarbamate",
        "salicylic anhydride diacetate",
        "isopropyl alcohol (isopropanol)",
        "carbatin",
    ],
)
def test_two_readings_give_no_structure(text: str, parser: NameParser) -> None:
    (reading,) = read_names([text], parser)
    assert reading.structure is None
    assert reading.refusal is not None
    assert reading.refusal.reason == "ambiguous"


@pytest.mark.parametrize(
    "text",
    [
        "ethanamine hydrochloride",
        "sodium acetate",
        "tetramethylammonium bromide",
        "(2S)-2-aminopropanoic acid hydrochloride",
        "calcium diacetate",
        "carbon",
        "(S)-2-aminopropanoic acid (2R,3R)-2,3-dihydroxybutanedioate",
        "ethanamine sulfate (2:1)",
        "4-chlorobenzoyl chloride",
    ],
)
def test_salts_are_read_as_before(text: str, parser: NameParser) -> None:
    (reading,) = read_names([text], parser)
    assert reading.structure is not None, reading.refusal


def test_a_racemic_part_does_not_make_the_whole_racemic(parser: NameParser) -> None:
    both, one = read_names(
        [
            "(+)-1-methylpiperidin-3-yl (±)-hydroxy(phenyl)acetate",
            "1-methylpiperidin-3-yl (±)-hydroxy(phenyl)acetate",
        ],
        parser,
    )
    assert both.stereo_kind == "silent"
    assert one.stereo_kind == "racemic"
