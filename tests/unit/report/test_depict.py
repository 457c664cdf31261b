"""Structures as SVG: well formed whatever the input, and drawn as a chemist expects.

What a chemist expects is common practice; the wedge's narrow end at the stereocentre is also
IUPAC's (Graphical representation of stereochemical configuration, 2006, ST-1.1; from memory).
"""

import math
import re

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from lxml import etree

from dossiercheck.model import Drawing, DrawnAtom, DrawnBond
from dossiercheck.report.depict import svg
from tests.unit.report import sample

SVG = "{http://www.w3.org/2000/svg}"
HEXAGON = [(math.cos(n * math.pi / 3), math.sin(n * math.pi / 3)) for n in range(6)]


def drawn(drawing: Drawing, title: str = "a structure") -> etree._Element:
    root = etree.fromstring(svg(drawing, title).encode("utf-8"))
    assert root.tag == f"{SVG}svg"
    return root


def one(element: str, hydrogens: int = 0, charge: int = 0, isotope: int = 0) -> Drawing:
    return Drawing((DrawnAtom(0.0, 0.0, element, charge, hydrogens, isotope),), ())


def label(drawing: Drawing) -> str:
    """The text runs from left to right."""
    texts = [(float(node.get("x")), node.text) for node in drawn(drawing).iter(f"{SVG}text")]
    return " ".join(text for _, text in sorted(texts))


def numbers(text: str) -> list[float]:
    return [float(found) for found in re.findall(r"-?\d+\.?\d*", text)]


def paths(root: etree._Element) -> list[list[float]]:
    return [numbers(node.get("d")) for node in root.iter(f"{SVG}path")]


atoms = st.builds(
    DrawnAtom,
    st.floats(),
    st.floats(),
    st.text(max_size=4) | st.sampled_from(["C", "N", "O", "Cl"]),
    st.integers(-3, 3),
    st.integers(-1, 4),
    st.integers(0, 300),
    st.booleans(),
    st.text(max_size=8),
)
tame = st.builds(
    DrawnAtom,
    st.floats(-9, 9),
    st.floats(-9, 9),
    st.sampled_from(["C", "N", "O", "Cl", "Si"]),
    st.integers(-1, 1),
    st.integers(0, 3),
    highlight=st.booleans(),
    mark=st.sampled_from(["", "3R → 3S"]),
)
bonds = st.builds(
    DrawnBond,
    st.integers(-1, 12),
    st.integers(-1, 12),
    st.integers(0, 9),
    st.sampled_from(["plain", "wedge", "hash", "wavy", "crossed", "aromatic", "else"]),
    st.booleans(),
)


@settings(max_examples=150, deadline=None)
@given(
    st.lists(atoms, max_size=8) | st.lists(tame, max_size=12),
    st.lists(bonds, max_size=14),
    st.text(),
)
def test_any_drawing_gives_well_formed_finite_svg(
    some: list[DrawnAtom], links: list[DrawnBond], title: str
) -> None:
    picture = Drawing(tuple(some), tuple(links))
    text = svg(picture, title)
    assert text == svg(picture, title)
    root = etree.fromstring(text.encode("utf-8"))
    for node in root.iter():
        for name, value in node.attrib.items():
            if name in {"x", "y", "width", "height", "viewBox", "d", "r", "rx"}:
                assert "nan" not in value
                assert "inf" not in value
                assert "e" not in value
    assert float(root.get("width")) > 0
    assert float(root.get("width")) <= 360.05
    assert float(root.get("height")) <= 280.05


def test_everything_lies_within_the_view() -> None:
    for picture in (sample.BASE, sample.SALT, sample.marked(sample.BASE, {17: "R, not S"})):
        root = drawn(picture)
        left, top, width, height = numbers(root.get("viewBox"))
        for found in paths(root):
            for x, y in zip(found[::2], found[1::2], strict=True):
                assert left <= x <= left + width
                assert top <= y <= top + height
        for node in root.iter(f"{SVG}text"):
            assert left <= float(node.get("x")) <= left + width
            assert top <= float(node.get("y")) <= top + height


def test_a_typical_bond_has_28_pixels_whatever_the_source_unit() -> None:
    for unit in (0.7, 1.5, 30.0):
        pair = Drawing(
            (DrawnAtom(0, 0, "C", hydrogens=3), DrawnAtom(unit, 0, "C", hydrogens=3)),
            (DrawnBond(0, 1, 1),),
        )
        (x1, y1, x2, y2) = paths(drawn(pair))[0]
        assert math.hypot(x2 - x1, y2 - y1) == pytest.approx(28, abs=0.1)


def test_the_source_coordinates_are_kept_up_to_scale() -> None:
    root = drawn(sample.CARBINOL)
    plain = [found for found in paths(root) if len(found) == 4]
    # The bond from atom 2 to atom 4 (naphthalene's C2) runs as in the table, y turned.
    a, b = sample.CARBINOL.atoms[1], sample.CARBINOL.atoms[3]
    slope = math.atan2(-(b.y - a.y), b.x - a.x)
    assert any(
        math.atan2(y2 - y1, x2 - x1) == pytest.approx(slope, abs=0.02)
        and math.hypot(x2 - x1, y2 - y1) == pytest.approx(28, abs=0.5)
        for x1, y1, x2, y2 in plain
    )


@pytest.mark.parametrize(
    ("drawing", "expected"),
    [
        (one("C", 4), "C H 4"),
        (one("O", 2), "H 2 O"),
        (one("N", 4, 1), "N H 4 +"),
        (one("Cl", 0, -1), "Cl −"),
        (one("Ca", 0, 2), "Ca 2+"),
        (one("C", 4, 0, 13), "13 C H 4"),
        (one("H", 0, 1), "H +"),
    ],
)
def test_labels_of_single_atoms(drawing: Drawing, expected: str) -> None:
    assert label(drawing) == expected


def test_hydrogens_stand_on_the_free_side() -> None:
    def amine(x: float) -> Drawing:
        return Drawing(
            (DrawnAtom(0, 0, "N", hydrogens=2), DrawnAtom(x, 0, "C", hydrogens=3)),
            (DrawnBond(0, 1, 1),),
        )

    assert label(amine(1.5)) == "H 2 N"
    assert label(amine(-1.5)) == "N H 2"


def test_carbons_in_a_chain_carry_no_label() -> None:
    said = [node.text for node in drawn(sample.CARBINOL).iter(f"{SVG}text")]
    assert sorted(said) == ["H", "O"]


def test_wedge_is_narrow_at_its_beginning() -> None:
    pair = Drawing(
        (DrawnAtom(0, 0, "C"), DrawnAtom(1.5, 0, "C"), DrawnAtom(-1.5, 0, "C")),
        (DrawnBond(0, 1, 1, "wedge"), DrawnBond(0, 2, 1)),
    )
    root = drawn(pair)
    (corners,) = [numbers(node.get("d")) for node in root.iter(f"{SVG}path") if node.get("fill")]
    xs, ys = corners[::2], corners[1::2]
    assert xs[0] < xs[1] == xs[2]
    assert ys[0] == pytest.approx((ys[1] + ys[2]) / 2)
    assert abs(ys[1] - ys[2]) > 4


def test_hash_widens_away_from_its_beginning() -> None:
    pair = Drawing(
        (DrawnAtom(0, 0, "C"), DrawnAtom(0, 1.5, "C"), DrawnAtom(0, -1.5, "C")),
        (DrawnBond(0, 1, 1, "hash"), DrawnBond(0, 2, 1)),
    )
    (found,) = [one for one in paths(drawn(pair)) if len(one) > 12]
    bars = [found[at : at + 4] for at in range(0, len(found), 4)]
    widths = [abs(bar[2] - bar[0]) for bar in bars]
    heights = [bar[1] for bar in bars]
    assert widths == sorted(widths)
    assert heights == sorted(heights, reverse=True)


def test_second_line_runs_inside_the_ring() -> None:
    ring = Drawing(
        tuple(DrawnAtom(x, y, "C", hydrogens=1) for x, y in HEXAGON),
        tuple(DrawnBond(n, (n + 1) % 6, 2 - n % 2) for n in range(6)),
    )
    lines = [one for one in paths(drawn(ring)) if len(one) == 4]
    assert len(lines) == 9
    xs = [x for line in lines for x in line[::2]]
    ys = [y for line in lines for y in line[1::2]]
    centre = ((min(xs) + max(xs)) / 2, (min(ys) + max(ys)) / 2)
    middles = sorted(
        math.hypot((a + c) / 2 - centre[0], (b + d) / 2 - centre[1]) for a, b, c, d in lines
    )
    outer = 28 * math.sqrt(3) / 2
    assert all(one == pytest.approx(outer, abs=0.3) for one in middles[3:])
    assert all(one == pytest.approx(outer - 4.2, abs=0.3) for one in middles[:3])


def test_shared_double_bond_is_drawn_into_the_ring_with_more_double_bonds() -> None:
    # Tetralin with its fusion bond double: the benzene's, not the saturated ring's.
    left = [(x, y) for x, y in HEXAGON]
    right = [(x + 1.5, y + math.sqrt(3) / 2) for x, y in HEXAGON]
    points = left + [p for p in right if min(math.dist(p, q) for q in left) > 0.1]
    atoms_ = tuple(DrawnAtom(x, y, "C") for x, y in points)
    pairs = [
        (a, b)
        for a in range(len(points))
        for b in range(a)
        if math.dist(points[a], points[b]) == pytest.approx(1.0, abs=0.01)
    ]
    assert len(points) == 10
    assert len(pairs) == 11
    fused = next(p for p in pairs if p in {(1, 0)})
    double = {fused, (3, 2), (5, 4)}
    picture = Drawing(
        atoms_, tuple(DrawnBond(a, b, 2 if (a, b) in double else 1) for a, b in pairs)
    )
    root = drawn(picture)
    lines = [one for one in paths(root) if len(one) == 4]
    short = [one for one in lines if math.dist(one[:2], one[2:]) < 25]
    assert len(short) == 3
    xs = [x for line in lines for x in line[::2]]
    centre_x = min(xs) + 28.0  # the left ring's centre is one bond length from its left corner
    ys = [y for line in lines for y in line[1::2]]
    centre_y = max(ys) - 28 * math.sqrt(3) / 2
    for a, b, c, d in short:
        away = math.hypot((a + c) / 2 - centre_x, (b + d) / 2 - centre_y)
        assert away == pytest.approx(28 * math.sqrt(3) / 2 - 4.2, abs=0.5)


def test_styles_look_different() -> None:
    def pair(order: int, style: str) -> str:
        ends = (
            DrawnAtom(0, 0, "C"),
            DrawnAtom(1, 0, "C"),
            DrawnAtom(-1, 1, "C"),
            DrawnAtom(2, 1, "C"),
        )
        links = (DrawnBond(0, 1, order, style), DrawnBond(0, 2, 1), DrawnBond(1, 3, 1))
        return svg(Drawing(ends, links), "x")

    looks = [pair(1, style) for style in ("plain", "wedge", "hash", "wavy")]
    looks += [
        pair(2, "plain"),
        pair(2, "crossed"),
        pair(3, "plain"),
        pair(4, "aromatic"),
        pair(0, "plain"),
    ]
    assert len(set(looks)) == 9
    assert "Q" in pair(1, "wavy")
    assert "dasharray" in pair(4, "aromatic")


def test_several_components_are_all_drawn() -> None:
    root = drawn(sample.SALT)
    said = [node.text for node in root.iter(f"{SVG}text")]
    assert said.count("O") == 11  # five in the cation, six in the tartrate
    assert "−" in said
    assert "+" in said


def test_mark_and_title_are_there_and_safe() -> None:
    picture = sample.marked(sample.BASE, {17: "R, not S"})
    root = drawn(picture, sample.HOSTILE)
    assert "R, not S" in [node.text for node in root.iter(f"{SVG}text")]
    assert len(list(root.iter(f"{SVG}rect"))) == 1
    assert "Marked: C 18 (R, not S)." in root.find(f"{SVG}desc").text
    assert "<script>" in root.find(f"{SVG}title").text
    assert "<script>" not in svg(picture, sample.HOSTILE)


@pytest.mark.parametrize(
    ("picture", "reason"),
    [
        (Drawing((), ()), "has no atoms"),
        (Drawing((DrawnAtom(1, 1, "C"),) * 3, (DrawnBond(0, 1, 1),)), "no usable coordinates"),
        (Drawing((DrawnAtom(math.nan, 0, "C"), DrawnAtom(0, 0, "C")), ()), "no usable coordinates"),
        (Drawing((DrawnAtom(math.inf, 0, "C"),), ()), "no usable coordinates"),
        (Drawing(tuple(DrawnAtom(n, 0, "C") for n in range(1001)), ()), "too large"),
    ],
)
def test_what_cannot_be_shown_is_said_not_invented(picture: Drawing, reason: str) -> None:
    said = " ".join(node.text for node in drawn(picture).iter(f"{SVG}text"))
    assert reason in said
    assert f"Atoms in the source: {len(picture.atoms)}" in said
