"""Names in capitals: "O-" is oxygen or ortho, and where it matters the name is ambiguous."""

from __future__ import annotations

import pytest

from dossiercheck.names.capitals import with_ortho
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names


@pytest.mark.parametrize(
    ("text", "other"),
    [
        ("O-HYDROXYHIPPURIC ACID", "o-HYDROXYHIPPURIC ACID"),
        ("CINNAMIC ACID, O-HYDROXY-, (Z)-", "CINNAMIC ACID, o-HYDROXY-, (Z)-"),
        ("CIS-O-HYDROXYCINNAMIC ACID", "CIS-o-HYDROXYCINNAMIC ACID"),
        ("O-methyl-L-tyrosine", ""),
        ("2-O-METHYLGLUCOSE", ""),
        ("BENZO-FURAN", ""),
        ("N-METHYLANILINE", ""),
    ],
)
def test_where_ortho_could_be_meant(text: str, other: str) -> None:
    assert with_ortho(text) == other


@pytest.mark.parametrize(
    ("text", "refused"),
    [
        ("O-METHYLBENZOIC ACID", True),
        ("O-HYDROXYHIPPURIC ACID", True),
        ("O-METHYL-L-TYROSINE", True),
        ("o-methylbenzoic acid", False),
        ("METHYL 4-O-METHYL-β-D-GLUCOPYRANOSIDE", False),
    ],
)
def test_an_ambiguous_letter_gives_no_structure(
    text: str, refused: bool, parser: NameParser
) -> None:
    (reading,) = read_names([text], parser)
    assert (reading.structure is None) is refused
    if refused:
        assert reading.refusal is not None
        assert reading.refusal.reason == "ambiguous"
