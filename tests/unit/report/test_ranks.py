"""What a derivation marks in a drawing, held against the letter that it explains.

The sense of rotation is IUPAC's (2013, P-92.1.2.1.1): with d behind, a, b, c clockwise is R. The
geometry is measured on the SVG itself, and the letter is the one of both computations.
"""

import math
import re
from dataclasses import replace

import pytest
from lxml import etree

from dossiercheck.model import Drawing, RankPlace, Sight
from dossiercheck.report.depict import svg
from dossiercheck.report.ranks import Arc, arcs, part
from dossiercheck.stereo.descriptors import Descriptor, confirmed, descriptors
from dossiercheck.stereo.drawing import drawing_of
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.showing import shown
from dossiercheck.stereo.structure import Structure
from tests.unit.report import sample

SVG = "{http://www.w3.org/2000/svg}"

# Four ligands about a centre: where they stand, and which of them has a wedge or a hash.
PLACES = [(-1.3, -0.75), (1.3, -0.75), (-0.6, 1.3), (0.8, 1.2)]
ELEMENTS = ["C", "F", "O", "Cl"]


def molblock(elements: list[str], raised: int, style: int) -> str:
    """A centre with ligands of these elements in `PLACES`, one of them raised."""
    lines = [
        "",
        "",
        "",
        f"{len(elements) + 1:3d}{len(elements):3d}  0  0  1  0  0  0  0  0999 V2000",
    ]
    for x, y, element in [(0.0, 0.0, "C"), *((*PLACES[n], e) for n, e in enumerate(elements))]:
        lines.append(f"{x:10.4f}{y:10.4f}{0:10.4f} {element:<3} 0  0")
    for number in range(len(elements)):
        lines += [f"  1{number + 2:3d}  1{style if number == raised else 0:3d}"]
    return "\n".join([*lines, "M  END\n"])


def seen(structure: Structure, found: Descriptor | None) -> tuple[etree._Element, Sight]:
    assert found is not None
    drawing = drawing_of(structure)
    derived = shown(structure, found, drawing)
    assert derived.sight is not None
    return etree.fromstring(svg(drawing, "a unit", derived.sight).encode()), derived.sight


def turns(root: etree._Element) -> list[int]:
    """For each arc of the picture 1 where it runs counter-clockwise to the eye, -1 clockwise; from
    its sweep flag (SVG 2, section 9.3.8: 1 is the direction of growing angle, clockwise)."""
    paths = [one.get("d") for one in root.iter(f"{SVG}path") if one.get("class") == "turn"]
    flags = [re.search(r"A\S+ \S+ 0 [01] ([01]) ", path) for path in paths]
    return [-1 if flag and flag[1] == "1" else 1 for flag in flags]


@pytest.mark.parametrize("style", [1, 6], ids=["wedge", "hash"])
@pytest.mark.parametrize("turned", range(4))
@pytest.mark.parametrize(
    ("count", "raised"), [(count, raised) for count in (3, 4) for raised in range(count)]
)
def test_the_arc_agrees_with_the_letter(count: int, turned: int, raised: int, style: int) -> None:
    """Every ligand in every place, on a wedge and on a hash: the sense drawn is that of the letter
    where d, or what stands for it after the two exchanges, is away, and the reverse where not."""
    elements = (ELEMENTS[turned:] + ELEMENTS[:turned])[:count]
    structure = from_molblock(molblock(elements, raised, style))
    found = confirmed(structure, [0])
    root, sight = seen(structure, found)
    assert found is not None
    assert found.certain
    drawn = turns(root)
    assert len(drawn) == 2
    assert drawn == [sight.turn] * 2
    lowest = next(one for one in sight.ranks if (one.held or one.rank) == "d")
    up = style == 1
    # d itself raised points with its bond; a hydrogen that is not drawn points the other way.
    away = not up if lowest.atom == raised + 1 else up
    clockwise = found.descriptor == "R"
    assert sight.turn == (-1 if clockwise == away else 1)


def test_arcs_pass_from_a_over_b_to_c() -> None:
    structure = from_molblock(molblock(ELEMENTS, 2, 1))
    _, sight = seen(structure, confirmed(structure, [0]))
    points = [(0.0, 0.0), *((x * 20, -y * 20) for x, y in PLACES)]
    first, second = arcs(sight, points)
    held = {one.held or one.rank: points[one.atom] for one in sight.ranks}

    def degrees(rank: str) -> float:
        return math.degrees(math.atan2(-held[rank][1], held[rank][0]))

    def between(one: float, two: float) -> float:
        return abs((one - two + 180) % 360 - 180)

    assert between(math.degrees(first.start), degrees("a")) < 12
    assert between(math.degrees(first.stop), degrees("b")) < 12
    assert between(math.degrees(second.start), degrees("b")) < 12
    assert between(math.degrees(second.stop), degrees("c")) < 12
    # The way round never passes the place of d: together less than a full turn.
    assert math.degrees(first.sweep + second.sweep) < 360


def test_an_arc_knows_how_far_it_runs() -> None:
    assert Arc(0.0, math.pi / 2, 1).sweep == pytest.approx(math.pi / 2)
    assert Arc(0.0, math.pi / 2, -1).sweep == pytest.approx(3 * math.pi / 2)
    assert arcs(Sight("centre", (0,), ()), [(0.0, 0.0)]) == ()


def texts(root: etree._Element, kind: str) -> list[str]:
    return [one.text for one in root.iter(f"{SVG}text") if one.get("class") == kind]


def test_a_centre_has_its_ranks_and_numbers() -> None:
    structure = from_smiles("C[C@H](N)C(=O)O")
    root, _ = seen(structure, confirmed(structure, [1]))
    assert texts(root, "rank") == ["a", "b", "c", "d H"]
    assert texts(root, "cite") == ["C1", "C2", "N3", "C4"]
    told = root.findtext(f"{SVG}desc")
    assert "Ranks: a N, b C, c C, d H (not drawn)." in told
    assert "As drawn a, b and c run clockwise." in told
    assert root.findtext(f"{SVG}title") == "a unit"
    assert root.get("role") == "img"


def test_exchanged_ranks_stand_in_brackets() -> None:
    structure = from_molblock(molblock(ELEMENTS, 2, 1))  # d, a methyl, lies in the plane
    root, _ = seen(structure, confirmed(structure, [0]))
    assert sorted(texts(root, "rank")) == ["a[b]", "b[a]", "c[d]", "d[c]"]
    assert "after two exchanges" in root.findtext(f"{SVG}desc")


def test_a_double_bond_has_its_two_a_ringed() -> None:
    structure = from_smiles("C/C(F)=C(Cl)/Br")
    root, _ = seen(structure, confirmed(structure, [1, 3]))
    assert sorted(texts(root, "rank")) == ["a", "a", "b", "b"]
    rings = [one for one in root.iter(f"{SVG}circle") if one.get("class") == "mark"]
    assert len(rings) == 2
    assert turns(root) == []


def test_an_axis_has_a_near_and_a_far_end() -> None:
    structure = from_smiles("CC=[C@]=CC")
    (found,) = descriptors(structure)
    root, _ = seen(structure, found)
    assert sorted(texts(root, "rank")) == ["a", "a", "b H", "b H", "far", "near"]


def test_a_salt_shows_the_part_with_the_unit() -> None:
    sight = Sight("centre", (31,), (RankPlace("a", 32, "O", 31),), 0, ((32, "O33"),))
    drawing, own = part(sample.SALT, sight)
    assert len(drawing.atoms) == 10
    assert own.ranks[0].atom == own.numbers[0][0]
    assert drawing.atoms[own.atoms[0]].highlight
    assert drawing.atoms[own.ranks[0].atom].element == "O"


def test_a_large_structure_is_cut_to_its_unit() -> None:
    chain = "C" * 60
    structure = from_smiles(f"{chain}[C@H](F)Cl")
    root, _ = seen(structure, confirmed(structure, [60]))
    _, _, width, height = (float(one) for one in root.get("viewBox").split())
    assert float(root.get("width")) / width == pytest.approx(
        float(root.get("height")) / height, rel=0.05
    )
    assert float(root.get("width")) / width > 0.8
    assert "Cut to the surroundings of the unit." in root.findtext(f"{SVG}desc")


def test_a_drawing_that_cannot_be_shown_says_so() -> None:
    bare = Drawing(tuple(replace(one, x=float("nan")) for one in sample.CARBINOL.atoms), ())
    root = etree.fromstring(svg(bare, "t", Sight("centre", (1,), ())).encode())
    assert "has no usable coordinates" in root.findtext(f"{SVG}desc")
