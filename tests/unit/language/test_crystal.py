"""Values with standard uncertainties, after the rule that the figure in brackets counts in units
of the last digit (International Tables for Crystallography, volume G, 2.2.7; common practice)."""

from __future__ import annotations

import pytest

from dossiercheck.interpretation import interpret
from dossiercheck.language.crystal import CLAIMS, ON_DISPERSION, Measured, measured
from dossiercheck.language.roles import meaning_of
from dossiercheck.model import Evidence, Kind, Place, Role
from dossiercheck.names.parser import NameParser


@pytest.mark.parametrize(
    ("text", "value", "uncertainty"),
    [
        ("0.02(3)", 0.02, 0.03),
        ("0.02 (3)", 0.02, 0.03),
        ("-0.02(3)", -0.02, 0.03),
        ("−0.02(3)", -0.02, 0.03),
        ("0.1(11)", 0.1, 1.1),
        ("-0.003(12)", -0.003, 0.012),
        ("0(10)", 0.0, 10.0),
        ("1.00(15)", 1.0, 0.15),
        ("0,02(3)", 0.02, 0.03),
        ("0.02 ± 0.03", 0.02, 0.03),
        ("0.02+/-0.03", 0.02, 0.03),
        ("0.5", 0.5, None),
        ("+0.5", 0.5, None),
    ],
)
def test_measured(text: str, value: float, uncertainty: float | None) -> None:
    found = measured(text)
    assert found is not None
    assert found.value == pytest.approx(value)
    assert found.uncertainty == (None if uncertainty is None else pytest.approx(uncertainty))


@pytest.mark.parametrize(
    "text",
    [
        "",
        "?",
        ".",
        "0.02(",
        "0.02()",
        "0.02(3)(4)",
        "about 0.02",
        "0.02-0.04",
        "nan",
        "1e-2",
        "< 0.1",
    ],
)
def test_what_is_no_measured_value(text: str) -> None:
    assert measured(text) is None


@pytest.mark.parametrize(
    ("heading", "role"),
    [
        ("Flack parameter", Role.FLACK),
        ("Flack x", Role.FLACK),
        ("_refine_ls_abs_structure_Flack", Role.FLACK),
        ("Space group", Role.SPACE_GROUP),
        ("_space_group_name_H-M_alt", Role.SPACE_GROUP),
        ("_symmetry_space_group_name_H-M", Role.SPACE_GROUP),
        ("_chemical_absolute_configuration", Role.ABSOLUTE),
        ("Absolute configuration", Role.STEREO),
        ("_chemical_formula_sum", Role.FORMULA),
        ("_chemical_formula_weight", Role.MASS),
        ("_chemical_name_systematic", Role.NAME),
        ("_chemical_optical_rotation", None),
        ("_space_group_name_Hall", None),
    ],
)
def test_headings(heading: str, role: Role | None) -> None:
    """A Hall symbol must not be taken for a Hermann–Mauguin symbol."""
    assert meaning_of(heading) is role


@pytest.mark.parametrize(
    ("role", "text", "kind", "refused"),
    [
        (Role.FLACK, "0.02(3)", Kind.PROPERTY, False),
        (Role.FLACK, "not refined", Kind.PROPERTY, True),
        (Role.SPACE_GROUP, "P2(1)2(1)2(1)", Kind.PROPERTY, False),
        (Role.SPACE_GROUP, "monoclinic", Kind.PROPERTY, True),
        (Role.ABSOLUTE, "AD", Kind.STATEMENT, False),
        (Role.ABSOLUTE, "yes", Kind.STATEMENT, True),
    ],
)
def test_interpretation(role: Role, text: str, kind: Kind, refused: bool) -> None:
    with NameParser() as parser:
        (reading,) = interpret([Evidence("e1", role, text, Place("a.cif"))], parser)
    assert reading.kind is kind
    assert bool(reading.refusal) is refused
    assert (reading.unread is not None and reading.unread.reason == "malformed") is refused
    if not refused:
        assert reading.flack == Measured(0.02, pytest.approx(0.03)) or role is not Role.FLACK
        assert role is not Role.SPACE_GROUP or (reading.space_group and reading.space_group.sohncke)
        assert role is not Role.ABSOLUTE or reading.claim == "ad"


def test_the_codes_are_those_of_the_dictionary() -> None:
    """Core CIF dictionary 2.4.5, `_chemical_absolute_configuration`."""
    assert set(CLAIMS) == {"rm", "ad", "rmad", "syn", "unk"}
    assert set(CLAIMS) > ON_DISPERSION
