"""Optical rotation as printed: value, sign, wavelength, temperature, concentration, solvent.

The specific rotation is printed as "[α]D20 −23.4° (c 1.0, methanol)" (IUPAC Gold Book, "specific
optical rotation"); D is the sodium line at 589 nm (common practice). The sign says nothing about R
or S, and no such thing is inferred from it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

_ALPHA = re.compile(
    r"\[\s*(?:α|𝛼|alpha)\s*\]\s*(?P<marks>(?:[\s_^{}()]?(?:D|\d{2,3}(?![\d.,]*\s?°(?!C)|[.,]?\d)"
    r"|[⁰¹²³⁴-⁹]{2,3}|[₀-₉]{2,3}|°C?"
    r"|/D|,|nm|ᴅ)){0,6})",
    re.IGNORECASE,
)
_WORDS = re.compile(
    r"\b(?:specific (?:optical )?rotation|optical rotation|specific rotatory power|rotation)\b",
    re.IGNORECASE,
)
_SIGN = r"(?P<sign{0}>\+\s*/\s*[-−–]|[+±−–-])?"
_DEGREE = r"\s?(?:°(?!\s?C)|º(?!\s?C)|deg(?:rees?|\.)?\b)"
_VALUE = (
    rf"(?<![\w.,]){_SIGN.format(1)}\s?(?P<value1>\d{{1,4}}(?:[.,]\d+)?)(?:{_DEGREE})?"
    rf"(?:\s*(?:to|and|through|…|\.\.\.|[-–−](?=\s?[+−-]))\s*{_SIGN.format(2)}\s?"
    rf"(?P<value2>\d{{1,4}}(?:[.,]\d+)?))?{_DEGREE}"
)
_DEGREES = re.compile(_VALUE)
# Without a degree sign a number counts only directly behind "=", "is", "of" or ":".
_BARE = re.compile(
    rf"(?:=|:|\bis|\bof|\bwas|^)\s*{_SIGN.format(1)}\s?(?P<value1>\d{{1,4}}(?:[.,]\d+)?)"
    rf"(?:\s*(?:to|…)\s*{_SIGN.format(2)}\s?(?P<value2>\d{{1,4}}(?:[.,]\d+)?))?(?![\w.,%]|\s?"
    rf"(?:nm|°C|g|mg|mL))"
)
_TOLERANCE = re.compile(r"(?<=[\d°])°?\s?±\s?\d+(?:[.,]\d+)?\s?°")
_NANOMETRES = re.compile(r"\b(\d{3})\s?nm\b")
_SODIUM = re.compile(r"\bsodium D[\s-]line\b|\bNa[- ]?D\b|\bD[\s-]line\b", re.IGNORECASE)
_CONCENTRATION = re.compile(
    r"\bc\s?[=:]?\s?(\d+(?:[.,]\d+)?)\b|\b(\d+(?:[.,]\d+)?)\s?(?:g\s?/\s?100\s?m[lL]|%"
    r"(?:\s?\(?w/v\)?)?|mg/m[lL])"
)
_CELSIUS = re.compile(r"\b(\d{2})\s?(?:°|º)\s?C\b")
# How the usual solvents are printed (common practice).
_SOLVENTS = {
    "methanol": r"methanol|MeOH|CH3OH|CH₃OH",
    "ethanol": r"(?:anhydrous |absolute |96 ?% )?ethanol|EtOH|C2H5OH",
    "2-propanol": r"2-propanol|isopropanol|propan-2-ol|iPrOH",
    "chloroform": r"chloroform|CHCl3|CHCl₃",
    "dichloromethane": r"dichloromethane|methylene chloride|DCM|CH2Cl2|CH₂Cl₂",
    "water": r"water|H2O|H₂O",
    "acetone": r"acetone",
    "acetonitrile": r"acetonitrile|MeCN|CH3CN",
    "dimethylformamide": r"N,N-dimethylformamide|dimethylformamide|DMF",
    "dimethyl sulfoxide": r"dimethyl sul(?:f|ph)oxide|DMSO",
    "tetrahydrofuran": r"tetrahydrofuran|THF",
    "dioxane": r"(?:1,4-)?dioxane",
    "ethyl acetate": r"ethyl acetate|EtOAc",
    "acetic acid": r"(?:glacial )?acetic acid|AcOH",
    "toluene": r"toluene",
    "benzene": r"benzene",
    "pyridine": r"pyridine",
    "hexane": r"(?:n-)?hexane",
    "diethyl ether": r"(?:diethyl )?ether|Et2O",
    "hydrochloric acid": r"(?:\d+(?:\.\d+)? ?(?:M|N|mol/L) )?(?:hydrochloric acid|HCl)",
    "sodium hydroxide": r"(?:\d+(?:\.\d+)? ?(?:M|N|mol/L) )?(?:sodium hydroxide|NaOH)",
}
_SOLVENT = {
    solvent: re.compile(rf"(?<![\w-])(?:{pattern})(?![\w-])")
    for solvent, pattern in _SOLVENTS.items()
}


@dataclass(frozen=True, slots=True)
class Rotation:
    """`sign` is "+", "-" or "" (none printed, or both); `low` and `high` in degrees, with their
    sign, equal for one value; `wavelength` in nm, `concentration` as printed, `solvent` by its
    common name; "" for what is not printed."""

    sign: str
    low: float
    high: float
    wavelength: str = ""
    concentration: str = ""
    solvent: str = ""
    temperature: str = ""

    @property
    def size(self) -> float:
        """The least size that the value, or the range, allows, in degrees."""
        return 0.0 if self.low <= 0 <= self.high else min(abs(self.low), abs(self.high))


def speaks_of_rotation(text: str) -> bool:
    """Whether a text has the sign of a rotation or its words."""
    return bool(_ALPHA.search(text) or _WORDS.search(text))


def read_rotation(text: str) -> Rotation | None:
    """The one rotation that a text prints, None where there is none, or more than one.

    The heading "Specific rotation" may stand before the value or be missing (a field's value).
    """
    plain = " ".join(text.split()).strip()
    alpha = _ALPHA.search(plain)
    marks = alpha["marks"] if alpha else ""
    rest = plain[: alpha.start()] + " " + plain[alpha.end() :].lstrip() if alpha else plain
    rest = _TOLERANCE.sub("°", rest)
    bare = _CONCENTRATION.sub(lambda found: " " * len(found[0]), rest)
    found = list(_DEGREES.finditer(rest)) or list(_BARE.finditer(bare))
    if len(found) != 1:
        return None
    value = found[0]
    around = rest[: value.start()] + " " + rest[value.end() :]
    solvents = [name for name, pattern in _SOLVENT.items() if pattern.search(around)]
    waves = {*_NANOMETRES.findall(around), *re.findall(r"(?<!\d)\d{3}(?!\d)", _plain(marks))}
    if "D" in marks.upper() or "ᴅ" in marks or _SODIUM.search(around):
        waves.add("589")
    amounts = [one or other for one, other in _CONCENTRATION.findall(around)]
    warm = set(_CELSIUS.findall(around)) | set(re.findall(r"(?<!\d)\d{2}(?!\d)", _plain(marks)))
    if len(solvents) > 1 or len(waves) > 1:
        return None
    signs = [_sign(value["sign1"]), _sign(value["sign2"])]
    numbers = [_number(value["value1"]), _number(value["value2"])]
    if numbers[1] is None:
        numbers[1], signs[1] = numbers[0], signs[0]
    if None in signs or numbers[0] is None or numbers[1] is None:
        return None
    low, high = sorted(
        number * (-1 if sign == "-" else 1)
        for number, sign in zip(numbers, signs, strict=True)
        if number is not None
    )
    sign = str(signs[0]) if signs[0] == signs[1] else ""
    return Rotation(
        sign,
        low,
        high,
        next(iter(waves), ""),
        amounts[0].replace(",", ".") if len(amounts) == 1 else "",
        solvents[0] if solvents else "",
        next(iter(warm)) if len(warm) == 1 else "",
    )


def _plain(marks: str) -> str:
    return marks.translate(str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹₀₁₂₃₄₅₆₇₈₉", "01234567890123456789"))


def _sign(printed: str | None) -> str | None:
    """The sign, "" for none; None for both at once, which is no rotation of one enantiomer."""
    if not printed:
        return ""
    if printed == "±" or len(printed) > 1:
        return None
    return "+" if printed == "+" else "-"


def _number(printed: str | None) -> float | None:
    return float(printed.replace(",", ".")) if printed else None
