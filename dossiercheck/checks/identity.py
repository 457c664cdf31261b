"""Identity data against the structure: notations, formula, mass, registry number."""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.checks.configuration import describe, unit_of
from dossiercheck.checks.exhibits import exhibit, of_units
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.model import Role
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.formula import (
    Formula,
    difference,
    mass_spread,
    molecular_formula,
    relative_mass,
)
from dossiercheck.stereo.notation import (
    inchi_difference,
    key_difference,
    key_of,
    possible_inchis,
    units_of_key,
)

_REGISTRY = re.compile(r"(?<!\d)(\d{2,7})-(\d{2})-(\d)(?!\d)")


def registry_check_digit_ok(text: str) -> bool | None:
    """Whether the check digit of a CAS registry number is right; None where there is no number.

    The digit is the sum of the others, each times its position counted from the right, modulo
    10 (the rule the registry's owner publishes; common practice).
    """
    found = _REGISTRY.search(text)
    return None if found is None else _expected(found) == int(found.group(3))


def _expected(found: re.Match[str]) -> int:
    digits = (found.group(1) + found.group(2))[::-1]
    return sum(position * int(digit) for position, digit in enumerate(digits, 1)) % 10


@check(needs=("notation",), fields=("role", "difference"))
def notation_differs(case: Case, params: Params) -> Iterator[Observation]:
    """A SMILES or InChI stands for another compound or another stereoisomer."""
    for pair in case.pairs:
        reading = pair.reading
        role = reading.evidence.role
        if role not in (Role.SMILES, Role.INCHI) or case.structure is None:
            continue
        if role is Role.INCHI:
            stated = reading.evidence.text.strip()
            computed = possible_inchis(case.structure)
            if stated in computed or not computed:
                continue
            if reading.structure and set(possible_inchis(reading.structure)) & set(computed):
                continue
        text, views = describe(case, pair)
        if not text and role is Role.INCHI:
            text = inchi_difference(stated, computed[0])
        if not text:
            continue
        assert case.reference is not None
        yield Observation(
            {"role": str(role), "difference": text},
            (
                of_units(reading, views, reference=False),
                of_units(case.reference, views, reference=True),
            ),
            unit_of(case, views),
        )


@check(needs=("notation",), fields=("stated", "computed", "difference"))
def inchikey_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The InChIKey is not that of the structure."""
    if case.structure is None or case.reference is None:
        return
    for reading in case.of_role(Role.INCHIKEY):
        stated = reading.evidence.text.strip().removeprefix("InChIKey=").strip()
        keys = [key_of(inchi) for inchi in possible_inchis(case.structure)]
        if not keys or stated in keys:
            continue
        units = units_of_key(case.structure, stated) if stated[:14] == keys[0][:14] else ()
        where = ", ".join("–".join(str(a + 1) for a in unit.atoms) for unit in units)
        why = key_difference(stated, keys[0])
        yield Observation(
            {
                "stated": stated,
                "computed": keys[0],
                "difference": f"{why} (opposite at atom {where})" if units else why,
            },
            (
                exhibit(reading),
                exhibit(
                    case.reference,
                    atoms={unit.atoms[0]: unit.descriptor for unit in units},
                    note=f"InChIKey computed: {keys[0]}",
                ),
            ),
            ", ".join(case.unit_ids[frozenset(unit.atoms)] for unit in units),
        )


@check(needs=("property",), fields=("stated", "computed", "difference"))
def formula_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The printed molecular formula is not that of the structure."""
    for reading in case.of_role(Role.FORMULA):
        stated = reading.formula
        formulas = _formulas(case, reading)
        if stated is None or not formulas or case.reference is None:
            continue
        if any(_same(stated, formula) for formula in formulas):
            continue
        yield Observation(
            {
                "stated": reading.evidence.text.strip(),
                "computed": str(formulas[0]),
                "difference": difference(formulas[0], stated),
            },
            (exhibit(reading), exhibit(case.reference, note=f"formula computed: {formulas[0]}")),
        )


@check(needs=("property",), fields=("stated", "computed", "tolerance"))
def mass_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The printed relative molecular mass is not that of the structure.

    The tolerance is half a unit of the last printed digit (common practice), widened by what
    the standard atomic weights moved between editions.
    """
    for reading in case.of_role(Role.MASS):
        formulas = _formulas(case, reading)
        if reading.mass is None or not formulas or case.reference is None:
            continue
        stated, decimals = reading.mass
        half = 0.5 * 10.0**-decimals
        if any(abs(stated - relative_mass(f)) <= half + mass_spread(f) + 1e-9 for f in formulas):
            continue
        computed = f"{relative_mass(formulas[0]):.{max(decimals, 2)}f}"
        yield Observation(
            {
                "stated": reading.evidence.text.strip(),
                "computed": computed,
                "tolerance": f"{half + mass_spread(formulas[0]):.{decimals + 2}f}",
            },
            (exhibit(reading), exhibit(case.reference, note=f"mass computed: {computed}")),
        )


@check(needs=("property",), fields=("stated", "expected"))
def registry_check_digit(case: Case, params: Params) -> Iterator[Observation]:
    """The last digit of a CAS registry number does not follow from the others."""
    for reading in case.of_role(Role.REGISTRY):
        for found in _REGISTRY.finditer(reading.evidence.text):
            if _expected(found) != int(found.group(3)):
                yield Observation(
                    {"stated": found.group(), "expected": str(_expected(found))},
                    (exhibit(reading, spans=[found.span(3)]),),
                )


def _formulas(case: Case, reading: Reading) -> list[Formula]:
    """The reference's formula, and that of a structure which stands beside the property but
    departs from the reference: that departure is a finding already, this would be its echo."""
    if case.structure is None:
        return []
    found = [molecular_formula(case.structure)]
    for pair in case.pairs:
        beside = pair.reading.evidence.group == reading.evidence.group != ""
        apart = pair.alignment.constitution.verdict in (con.DIFFERENT, con.SALT)
        if beside and apart and pair.reading.structure is not None:
            found.append(molecular_formula(pair.reading.structure))
    return found


def _same(stated: Formula, computed: Formula) -> bool:
    """Equal counts; a charge that is not printed is not held against the formula."""
    if dict(stated.counts) != dict(computed.counts):
        return False
    return stated.charge in (0, computed.charge)
