"""What the name parser assumes is not what the name says.

IUPAC-IUB, Nomenclature and Symbolism for Amino Acids and Peptides (1983), 3AA-3: the prefixes D
and L state the configuration; without one, none is stated. (Section from memory.)
"""

import pytest

from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names


def slugs(name: str, parser: NameParser) -> list[str]:
    return [fault.slug for fault in read_names([name], parser)[0].faults]


@pytest.mark.parametrize(
    "name", ["phenylalanine", "ethyl alaninate", "N-acetylleucine", "valinamide"]
)
def test_an_amino_acid_without_a_prefix_states_no_configuration(
    name: str, parser: NameParser
) -> None:
    assert slugs(name, parser) == ["assumed-configuration"]


@pytest.mark.parametrize(
    "name",
    ["L-phenylalanine", "D-alanine", "(2S)-2-aminopropanoic acid", "glycine", "cholesterol"],
)
def test_what_a_name_states_or_its_parent_implies_is_not_assumed(
    name: str, parser: NameParser
) -> None:
    assert "assumed-configuration" not in slugs(name, parser)
