"""A drawing as short text, for cases in which wedges have to be seen at a glance."""

from __future__ import annotations

_CHARGES = {"+": 3, "-": 5}  # as the atom block of a V2000 table codes them


def molblock(atoms: str, bonds: str) -> str:
    """A V2000 molfile: atoms "C x y; N+ x y; …", bonds "begin end order [style]; …".

    Style 1 is a wedge, 6 a hash, 4 a wavy bond; the narrow end is at `begin`.
    """
    points = [part.split() for part in atoms.split(";")]
    lines = [[*part.split(), "0"][:4] for part in bonds.split(";")]
    rows = ["", "  drawn", ""]
    rows.append(f"{len(points):3}{len(lines):3}  0  0  0  0  0  0  0  0999 V2000")
    for symbol, x, y in points:
        charge = _CHARGES.get(symbol[-1], 0)
        rows.append(
            f"{float(x):10.4f}{float(y):10.4f}{0.0:10.4f} {symbol.rstrip('+-'):<3} 0{charge:3}"
            + "  0" * 10
        )
    rows += ["".join(f"{int(number):3}" for number in line) for line in lines]
    return "\n".join([*rows, "M  END", ""])
