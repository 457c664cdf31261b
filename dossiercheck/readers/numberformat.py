"""A stored number as the sheet shows it: 281.3 in the format 0.00 is read as "281.30".

The printed digits decide the tolerance of a mass later on, so they must be those a person sees.
Format codes are those of ECMA-376 part 1, 18.8.30 (numFmts) and 18.8.31.
"""

from __future__ import annotations

import re
from datetime import datetime, timedelta
from decimal import ROUND_HALF_UP, Decimal, InvalidOperation

# Built-in format ids that matter here (ECMA-376 part 1, 18.8.30); the rest show as General.
BUILT_IN = {
    1: "0",
    2: "0.00",
    3: "#,##0",
    4: "#,##0.00",
    9: "0%",
    10: "0.00%",
    11: "0.00E+00",
    14: "yyyy-mm-dd",
    15: "d-mmm-yy",
    16: "d-mmm",
    17: "mmm-yy",
    22: "yyyy-mm-dd hh:mm",
    37: "#,##0",
    38: "#,##0",
    39: "#,##0.00",
    40: "#,##0.00",
    48: "##0.0E+0",
}

_ORNAMENT = re.compile(r"\[[^\]]*\]|_.|\*.")
_LITERAL = re.compile(r'"([^"]*)"|\\(.)')
_DIGITS = re.compile(r"([#0?,]*)(?:\.([#0?]*))?(?:E\+?(0+))?(%?)")


def shown(raw: str, code: str, *, epoch_1904: bool = False) -> str:
    """The text of the number `raw` in the format `code`; `raw` itself where `raw` is no number.

    Fractions and conditional formats are shown as General.
    """
    try:
        number = Decimal(repr(float(raw)))
    except (ValueError, InvalidOperation):
        return raw
    if not number.is_finite():
        return raw
    section = _ORNAMENT.sub("", code).split(";")[0].strip()
    if not section or section.lower() in ("general", "@"):
        return _general(number)
    bare = _LITERAL.sub("", section)
    if re.search(r"[dmyhs]", bare, re.IGNORECASE):
        return _date(number, epoch_1904)
    digits = _DIGITS.fullmatch(bare.strip())
    if not digits or not re.search(r"[0#?]", bare):
        return _general(number)
    before, after = _literals(section)
    return before + _fixed(number, digits) + after


def _literals(section: str) -> tuple[str, str]:
    """Quoted text before and after the digits, with spaces as they stand."""
    first = re.search(r'[#0?](?=[^"]*(?:"[^"]*"[^"]*)*$)', section)
    last = max((m.end() for m in re.finditer(r"[#0?%]", _LITERAL.sub(_blank, section))), default=0)
    start = first.start() if first else 0
    return _unquoted(section[:start]), _unquoted(section[last:])


def _unquoted(part: str) -> str:
    return _LITERAL.sub(lambda match: match[1] or match[2] or "", part)


def _blank(match: re.Match[str]) -> str:
    return " " * len(match[0])


def _general(number: Decimal) -> str:
    text = format(number, "f") if -10 < number.adjusted() < 15 else str(number)
    return text.rstrip("0").rstrip(".") if "." in text and "E" not in text else text


def _fixed(number: Decimal, digits: re.Match[str]) -> str:
    whole, decimals, exponent, percent = digits[1], digits[2] or "", digits[3], digits[4]
    if percent:
        number *= 100
    if exponent:
        mantissa, _, power = f"{number:.{len(decimals)}E}".partition("E")
        return f"{mantissa}E{power[0]}{power[1:].zfill(len(exponent))}"
    step = Decimal(1).scaleb(-len(decimals))
    try:
        rounded = number.quantize(step, rounding=ROUND_HALF_UP)
    except InvalidOperation:
        return _general(number)
    text = format(rounded, ",f" if "," in whole else "f")
    optional = len(decimals) - len(decimals.rstrip("#?"))
    while optional and text.endswith("0"):
        text, optional = text[:-1], optional - 1
    return text.rstrip(".") + percent


def _date(number: Decimal, epoch_1904: bool) -> str:
    """A serial day as ISO 8601: what was typed is no longer known, only the day it became."""
    start = datetime(1904, 1, 1) if epoch_1904 else datetime(1899, 12, 30)
    try:
        moment = start + timedelta(days=float(number))
    except OverflowError:
        return _general(number)
    has_time = number != number.to_integral_value()
    return moment.isoformat(sep=" ", timespec="minutes") if has_time else moment.date().isoformat()
