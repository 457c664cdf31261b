"""Characters of the Symbol font, which keeps Greek letters and signs at the places of Latin ones.

The places are those of the Adobe Symbol encoding as the Unicode Consortium publishes it
(MAPPINGS/VENDORS/ADOBE/symbol.txt), given from memory; office documents use them as they are or
in the private area from F000 on (ECMA-376 part 1, 17.3.3.30).
"""

from __future__ import annotations

UNKNOWN = "\ufffd"
FONTS = frozenset({"symbol"})

_CAPITALS = "ΑΒΧΔΕΦΓΗΙϑΚΛΜΝΟΠΘΡΣΤΥςΩΞΨΖ"
_SMALL = "αβχδεφγηιϕκλμνοπθρστυϖωξψζ"
_SAME = " !#%&()+,./0123456789:;<=>?[]_{|}"
_SYMBOL = {
    **{ord(sign): sign for sign in _SAME},
    **dict(zip(range(0x41, 0x5B), _CAPITALS, strict=True)),
    **dict(zip(range(0x61, 0x7B), _SMALL, strict=True)),
    0x2A: "∗",
    0x2D: "−",
    0x7E: "∼",
    0xA2: "′",
    0xA3: "≤",
    0xA5: "∞",
    0xAB: "↔",
    0xAC: "←",
    0xAE: "→",
    0xB0: "°",
    0xB1: "±",
    0xB2: "″",
    0xB3: "≥",
    0xB4: "×",
    0xB7: "•",
    0xB8: "÷",
    0xB9: "≠",
    0xBA: "≡",
    0xBB: "≈",
    0xBE: "⎯",
    0xD7: "⋅",
}


def is_private(code: int) -> bool:
    """True for a character of the private area, which has a shape in one font only."""
    return 0xE000 <= code <= 0xF8FF


def symbol(code: int, font: str) -> str:
    """The character that `code` shows in `font`; `UNKNOWN` where that is not known.

    In a font that is none of the symbol fonts, a code outside the private area is Unicode's.
    """
    if font.strip().lower() in FONTS:
        low = code - 0xF000 if 0xF000 <= code <= 0xF0FF else code
        if low in _SYMBOL:
            return _SYMBOL[low]
        return (
            chr(code)
            if low > 0xFF and not is_private(code) and not 0xD800 <= code < 0xE000
            else UNKNOWN
        )
    if is_private(code) or code < 0x20 or 0xD800 <= code < 0xE000:
        return UNKNOWN
    return chr(code)
