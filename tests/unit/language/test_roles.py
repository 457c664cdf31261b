"""Heading synonyms: common practice of dossiers, specifications and structure files."""

from __future__ import annotations

import pytest

from dossiercheck.language.roles import KEYS, Aside, Meaning, meaning_of, says_itself
from dossiercheck.model import Role


@pytest.mark.parametrize(
    ("heading", "meaning"),
    [
        ("IUPAC name", Role.NAME),
        ("Name (IUPAC)", Role.NAME),
        ("CHEMICAL NAME", Role.NAME),
        ("chemical_name", Role.NAME),
        ("Systematic  name:", Role.NAME),
        ("CAS index name", Role.NAME),
        ("Molecular formula", Role.FORMULA),
        ("Mol. formula", Role.FORMULA),
        ("Empirical Formula", Role.FORMULA),
        ("MF", Role.FORMULA),
        ("Relative molecular mass", Role.MASS),
        ("M.W. (g/mol)", Role.MASS),
        ("Molecular weight [Da]", Role.MASS),
        ("Mr", Role.MASS),
        ("Molar mass, g/mol", Role.MASS),
        ("MW (g·mol⁻¹)", Role.MASS),
        ("CAS Registry No.", Role.REGISTRY),
        ("CAS RN", Role.REGISTRY),
        ("CAS-No.", Role.REGISTRY),
        ("SMILES", Role.SMILES),
        ("Isomeric SMILES", Role.SMILES),
        ("canonical SMILES", Role.SMILES),
        ("Std. InChI", Role.INCHI),
        ("InChI Key", Role.INCHIKEY),
        ("Stereochemistry", Role.STEREO),
        ("Optical form", Role.STEREO),
        ("Number of stereocentres", Aside.COUNT),
        ("Laboratory code", Aside.LABEL),
        ("Impurity", Aside.LABEL),
        ("Name", Aside.NAME_OR_LABEL),
        ("Exact mass", Aside.IGNORED),
        ("Monoisotopic mass", Aside.IGNORED),
        ("Batch", None),
        ("Mass", None),
        ("Name of the manufacturer", None),
        ("Molecular weight distribution", None),
        ("SMILES of the salt former", None),
        ("", None),
    ],
)
def test_headings(heading: str, meaning: Meaning | None) -> None:
    assert meaning_of(heading) == meaning


def test_the_users_mapping_wins() -> None:
    columns = {"Bezeichnung": "name", "SMILES": "ignore"}
    assert meaning_of("BEZEICHNUNG ", columns) is Role.NAME
    assert meaning_of("SMILES", columns) is Aside.IGNORED
    assert meaning_of("InChI", columns) is Role.INCHI


def test_the_keys_are_those_the_settings_accept() -> None:
    from dossiercheck.settings import COLUMN_ROLES

    assert set(COLUMN_ROLES) == set(KEYS)


@pytest.mark.parametrize(
    ("value", "role"),
    [
        ("InChI=1S/C2H6O/c1-2-3/h3H,2H2,1H3", Role.INCHI),
        ("LFQSCWFLJHTTHZ-UHFFFAOYSA-N", Role.INCHIKEY),
        ("InChIKey=LFQSCWFLJHTTHZ-UHFFFAOYSA-N", Role.INCHIKEY),
        ("LFQSCWFLJHTTHZ-UHFFFAOYSA", None),
        ("CCO", None),
    ],
)
def test_values_that_say_themselves(value: str, role: Role | None) -> None:
    """Ethanol's standard InChI and InChIKey, as in the InChI technical manual (from memory)."""
    assert says_itself(value) is role
