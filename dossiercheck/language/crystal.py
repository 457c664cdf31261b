"""What a crystal structure determination says of its hand: a measured value, a claim."""

from __future__ import annotations

import re
from dataclasses import dataclass

_MEASURED = re.compile(
    r"(?P<sign>[+-]?)(?P<whole>\d{1,4})(?:[.,](?P<decimals>\d{1,6}))?"
    r"(?:\((?P<last>\d{1,5})\)|±(?P<plus>\d{1,3}(?:[.,]\d{1,6})?))?"
)

# Codes of `_chemical_absolute_configuration`, core CIF dictionary 2.4.
CLAIMS = {
    "rm": "by a reference molecule of known configuration",
    "ad": "by anomalous dispersion",
    "rmad": "by a reference molecule and anomalous dispersion",
    "syn": "by synthesis",
    "unk": "unknown",
}
ON_DISPERSION = frozenset({"ad", "rmad"})


@dataclass(frozen=True, slots=True)
class Measured:
    """A value with its standard uncertainty, None where none is given."""

    value: float
    uncertainty: float | None = None


def measured(text: str) -> Measured | None:
    """A number as printed: "0.02(3)", "-0,1(11)", "0.02 ± 0.03"; None for anything else.

    The figure in brackets is in units of the last digit printed.
    """
    plain = re.sub(r"\s+", "", text).replace("−", "-").replace("–", "-").replace("+/-", "±")
    found = _MEASURED.fullmatch(plain)
    if found is None:
        return None
    decimals = found["decimals"] or ""
    number = float(f"{found['sign']}{found['whole']}.{decimals or '0'}")
    if found["last"]:
        return Measured(number, int(found["last"]) * 10.0 ** -len(decimals))
    if found["plus"]:
        return Measured(number, float(found["plus"].replace(",", ".")))
    return Measured(number)


def claim(text: str) -> str | None:
    """The code of a claim of absolute configuration, None where it is none of `CLAIMS`."""
    code = text.strip().casefold()
    return code if code in CLAIMS else None
