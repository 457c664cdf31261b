"""Text to structure: what is kept, what is left open, what is refused."""

from __future__ import annotations

import re

import pytest

from dossiercheck.stereo.perception import from_inchi, from_molblock, from_smiles
from dossiercheck.stereo.structure import Unreadable
from tests.unit.stereo.forms import descriptors, open_units, v2000, v3000

BUTANOL = "C[C@H](O)CC"


def block(atoms: str, bonds: str) -> str:
    """A V2000 molfile: atoms "C x y; …", bonds "1 2 order stereo; …"."""
    atom_lines = [part.split() for part in atoms.split(";")]
    bond_lines = [part.split() for part in bonds.split(";")]
    rows = ["", "  drawn", ""]
    rows.append(f"{len(atom_lines):3}{len(bond_lines):3}  0  0  0  0  0  0  0  0999 V2000")
    for symbol, x, y in atom_lines:
        rows.append(
            f"{float(x):10.4f}{float(y):10.4f}{0.0:10.4f} {symbol:<3} 0  0  0  0  0  0  0  0  0  0  0  0"
        )
    rows += ["".join(f"{int(number):3}" for number in row) for row in bond_lines]
    return "\n".join([*rows, "M  END", ""])


def with_symbol(text: str, symbol: str) -> str:
    lines = text.split("\n")
    lines[4] = f"{lines[4][:31]}{symbol:<3}{lines[4][34:]}"
    return "\n".join(lines)


def with_order(text: str, begin: int, end: int, order: int) -> str:
    ends = f"{begin:3}{end:3}"
    return re.sub(rf"^{ends}  1", f"{ends}{order:3}", text, flags=re.MULTILINE)


# --- what a drawing's marks mean -----------------------------------------------------------

SQUARE = "C 0 0; C -1.3 0.75; O 0 -1.5; C 1.3 0.75; C 2.6 0"


@pytest.mark.parametrize(
    ("stereo", "expected"),
    # The wedge to methyl, hydroxy down, ethyl right: from the front O, ethyl, methyl run
    # counter-clockwise; with methyl in front the hydrogen is behind (ST-1.1, IUPAC 2006), so S.
    [(1, {"1S"}), (6, {"1R"}), (0, set()), (4, set())],
)
def test_wedge_hash_plain_and_wavy(stereo: int, expected: set[str]) -> None:
    text = block(SQUARE, f"1 2 1 {stereo}; 1 3 1 0; 1 4 1 0; 4 5 1 0")
    structure = from_molblock(text)
    assert descriptors(structure) == expected
    assert open_units(structure) == (set() if expected else {(0,)})
    assert [mark.style for mark in structure.marks] == {
        1: ["wedge"],
        6: ["hash"],
        0: [],
        4: ["wavy"],
    }[stereo]


def test_the_wide_end_of_a_wedge_says_nothing() -> None:
    text = block(SQUARE, "2 1 1 1; 1 3 1 0; 1 4 1 0; 4 5 1 0")
    structure = from_molblock(text)
    assert structure.units == ()
    assert open_units(structure) == {(0,)}


BUTENE = "C 0 0; C 1.3 0; C -0.75 1.1; C {x} {y}"


@pytest.mark.parametrize(
    ("x", "y", "expected"),
    [
        ("2.05", "1.1", {"1Z", "2Z"}),
        ("2.05", "-1.1", {"1E", "2E"}),
        # 15 degrees off the line still shows a side; 4 degrees do not (the limit is our own).
        ("2.75", "-0.39", {"1E", "2E"}),
        ("2.80", "-0.10", set()),
        ("2.80", "0", set()),
    ],
)
def test_a_double_bond_is_read_where_its_ends_show_a_side(
    x: str, y: str, expected: set[str]
) -> None:
    structure = from_molblock(block(BUTENE.format(x=x, y=y), "1 2 2 0; 1 3 1 0; 2 4 1 0"))
    assert descriptors(structure) == expected
    assert open_units(structure) == (set() if expected else {(0, 1)})


@pytest.mark.parametrize("bonds", ["1 2 2 3; 1 3 1 0; 2 4 1 0", "1 2 2 0; 1 3 1 4; 2 4 1 0"])
def test_a_crossed_or_wavy_bond_leaves_a_double_bond_open(bonds: str) -> None:
    structure = from_molblock(block(BUTENE.format(x="2.05", y="1.1"), bonds))
    assert structure.units == ()
    assert open_units(structure) == {(0, 1)}


def test_a_wavy_bond_and_a_crossed_one_in_v3000() -> None:
    wavy = v3000(BUTANOL).replace(" CFG=3", " CFG=2").replace(" CFG=1", " CFG=2")
    assert open_units(from_molblock(wavy)) == {(1,)}
    assert [mark.style for mark in from_molblock(wavy).marks] == ["wavy"]
    crossed = v3000("CC=CC")
    assert "CFG=2" in crossed
    assert [mark.style for mark in from_molblock(crossed).marks] == ["crossed"]
    assert open_units(from_molblock(crossed)) == {(1, 2)}


def test_marks_of_both_versions_are_the_same() -> None:
    for smiles in (BUTANOL, "OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O"):
        assert from_molblock(v2000(smiles)).marks == from_molblock(v3000(smiles)).marks


def test_a_bond_line_that_goes_on_in_the_next_line() -> None:
    # CTFile formats: a V3000 line ending in a hyphen is continued after the next "M  V30 ".
    plain = v3000(BUTANOL)
    continued = re.sub(r" (CFG=\d)", r" -\nM  V30 \1", plain)
    assert continued != plain
    assert from_molblock(continued).marks == from_molblock(plain).marks
    assert descriptors(from_molblock(continued)) == descriptors(from_molblock(plain))


@pytest.mark.parametrize("make", [v2000, v3000])
def test_line_endings_do_not_matter(make: object) -> None:
    text = make(BUTANOL)  # type: ignore[operator]
    for ending in ("\r\n", "\n"):
        structure = from_molblock(text.replace("\n", ending))
        assert descriptors(structure) == {"2S"}
        assert len(structure.marks) == 1


def test_atoms_keep_the_numbers_of_the_source() -> None:
    # Drawn hydrogens are atoms of their own and stay in their places.
    structure = from_molblock(v2000("[H][C@](C)(O)CC"))
    assert structure.mol.GetNumAtoms() == 6
    assert descriptors(structure) == descriptors(from_smiles("[H][C@](C)(O)CC")) == {"2R"}


# --- what is refused -----------------------------------------------------------------------


def refusal(text: str) -> str:
    with pytest.raises(Unreadable) as caught:
        from_molblock(text)
    return str(caught.value)


@pytest.mark.parametrize(
    "symbol", ["A", "Q", "*", "L", "LP", "X", "M", "AH", "QH", "XH", "MH", "R", "R1", "R#", "Pol"]
)
def test_an_atom_that_stands_for_several_is_refused(symbol: str) -> None:
    assert "more than one molecule" in refusal(with_symbol(v2000(BUTANOL), symbol))


@pytest.mark.parametrize("order", [5, 6, 7, 8])
def test_a_bond_that_stands_for_several_is_refused(order: int) -> None:
    assert "more than one molecule" in refusal(with_order(v2000(BUTANOL), 4, 5, order))


def test_a_bond_of_no_order_and_an_aromatic_bond_in_a_chain_are_refused() -> None:
    assert "without an order" in refusal(with_order(v2000(BUTANOL), 4, 5, 0))
    assert "aromatic" in refusal(with_order(v2000(BUTANOL), 4, 5, 4))


def test_an_aromatic_ring_in_a_drawing_is_read() -> None:
    text = v2000("C[C@H](O)c1ccccc1")
    aromatic = re.sub(r"^(  [4-9]  [4-9])  [12]", r"\1  4", text, flags=re.MULTILINE)
    assert aromatic != text
    assert from_molblock(aromatic).flat == from_molblock(text).flat


@pytest.mark.parametrize("kind", ["SRU", "MON", "COP", "MER", "ANY"])
def test_a_polymer_bracket_is_refused(kind: str) -> None:
    lines = f"M  STY  1   1 {kind}\nM  SAL   1  1   2\nM  SBL   1  2   1   2\nM  END"
    assert "polymer" in refusal(v2000("CCCC").replace("M  END", lines))
    more = f"M  V30 BEGIN SGROUP\nM  V30 1 {kind} 1 ATOMS=(1 2) XBONDS=(2 1 2)\nM  V30 END SGROUP\n"
    text = v3000("CCCC").replace("COUNTS 4 3 0", "COUNTS 4 3 1")
    assert "polymer" in refusal(text.replace("M  V30 END CTAB", more + "M  V30 END CTAB"))


def test_an_abbreviation_is_no_polymer() -> None:
    lines = "M  STY  1   1 SUP\nM  SAL   1  1   4\nM  SMT   1 Et\nM  END"
    assert descriptors(from_molblock(v2000(BUTANOL).replace("M  END", lines))) == {"2S"}


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (with_symbol(v2000(BUTANOL), "Xx"), "Xx"),
        (with_order(v2000("CC(C)(C)C"), 1, 2, 3), "valence"),
        (with_order(v2000("C[N+](C)(C)C"), 1, 2, 2), "valence"),
        ("", ""),
        ("\n\n\n\n", ""),
        ("no molfile at all\nbut text\n", ""),
        ("\n\n\n  0  0  0  0  0  0  0  0  0  0999 V2000\nM  END\n", "no atoms"),
    ],
)
def test_a_damaged_table_is_refused_with_a_sentence(text: str, says: str) -> None:
    said = refusal(text)
    assert says in said
    assert re.search(r"[a-z]{3}", said)
    # A time of day in a reason would make two runs differ.
    assert not re.search(r"\d\d:\d\d:\d\d", said)


@pytest.mark.parametrize("make", [v2000, v3000])
def test_a_table_cut_off_anywhere_is_refused(make: object) -> None:
    text = make(BUTANOL).rstrip()  # type: ignore[operator]
    whole = from_molblock(text)
    assert descriptors(whole) == {"2S"}
    for end in range(len(text)):
        with pytest.raises(Unreadable):
            from_molblock(text[:end])


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", ""),
        ("x", ""),
        ("C(", ""),
        ("C1CC", "ring"),
        ("*C", "more than one molecule"),
        ("[*:1]C", "more than one molecule"),
        ("C~C", "more than one molecule"),
        ("CC |Sg:n:0,1::ht|", "polymer"),
        ("C:C", "aromatic"),
        ("c1cccc1", ""),
        ("C>>C", ""),
        ("C(C)(C)(C)(C)C", "valence"),
        ("CCO ethanol", ""),
        ("CCO\nCCN", "more than one line"),
        ("C[C@H](O)CC |&1:1", ""),
    ],
)
def test_a_notation_that_is_not_one_molecule_is_refused(text: str, says: str) -> None:
    with pytest.raises(Unreadable) as caught:
        from_smiles(text)
    assert says in str(caught.value)
    assert re.search(r"[a-z]{3}", str(caught.value))
    assert not re.search(r"\d\d:\d\d:\d\d", str(caught.value))


@pytest.mark.parametrize("text", ["", "InChI=1S/", "InChI=", "CCO", "InChI=1S/C99/c1"])
def test_an_inchi_that_is_none_is_refused(text: str) -> None:
    with pytest.raises(Unreadable, match=r"[a-z]{3}"):
        from_inchi(text)


def test_a_wavy_mark_in_a_notation_leaves_its_centre_open() -> None:
    assert open_units(from_smiles("C[C@H](O)CC |w:1.0|")) == {(1,)}
