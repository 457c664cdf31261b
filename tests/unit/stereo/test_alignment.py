"""The best way of laying one structure on another, against trying every way by brute force."""

from __future__ import annotations

import random

import pytest
from rdkit import Chem

from dossiercheck.stereo import alignment as al
from dossiercheck.stereo.alignment import align
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure, geometry
from tests.unit.stereo.forms import laid_out, renumbered

# Cores with equivalent parts; {} takes an arm with a centre or a double bond. No core atom is a
# centre only through its arms: of such a one the alignment says less, see below.
SYMMETRIC = [
    "C({0})({0})(C)C",
    "c1c({0})cc({0})cc1",
    "c1({0})ccc({1})cc1",
    "N({0})({0}){1}",
    "C1C({0})CC({1})CC1",
    "C1({0})C({1})CC1",
    "C(c1ccccc1)(c1ccccc1)O{0}",
    "C(C)(C)(C){0}",
    "B(O{0})(O{0})O{1}",
    "[Si](C)(C)({0}){0}",
    "O=C({0})OC{1}",
    "C1({0})CCC2({1})CC1CC2",
    "c1c({0})c({0})c({1})c({1})c1",
]
ARMS = ["C(C)O", "C(F)Cl", "C(C)CC", "/C=C/C", "CC(N)C(=O)O", "C(O)C(C)O"]


def random_stereoisomer(text: str, dice: random.Random) -> Structure:
    """Every possible centre marked one way, the other, or (seldom) not at all."""
    mol = Chem.Mol(from_smiles(text).mol)
    for kind, atoms, _ in from_smiles(text).possible:
        if kind == "centre":
            tags = [
                Chem.ChiralType.CHI_TETRAHEDRAL_CW,
                Chem.ChiralType.CHI_TETRAHEDRAL_CCW,
                Chem.ChiralType.CHI_UNSPECIFIED,
            ]
            mol.GetAtomWithIdx(atoms[0]).SetChiralTag(dice.choices(tags, [9, 9, 2])[0])
    return Structure(mol, text)


def shuffled(structure: Structure, dice: random.Random) -> Structure:
    order = list(range(structure.mol.GetNumAtoms()))
    dice.shuffle(order)
    return Structure(renumbered(structure.mol, order), structure.text)


def parity(atom: Chem.Atom, order: list[int]) -> int:
    """The mark's sense seen along `order`, where hydrogen or a lone pair is -1 and last."""
    around = [n.GetIdx() for n in atom.GetNeighbors()]
    around += [-1] * (4 - len(around))
    places = [around.index(n) for n in order]
    odd = sum(a > b for i, a in enumerate(places) for b in places[i + 1 :]) % 2
    ccw = atom.GetChiralTag() == Chem.ChiralType.CHI_TETRAHEDRAL_CCW
    return (1 if ccw else -1) * (-1 if odd else 1)


def fewest_by_trying_all(one: Structure, two: Structure) -> int:
    """The fewest units that disagree, over every isomorphism the structure library lists."""
    pattern = Chem.Mol(one.mol)
    Chem.RemoveStereochemistry(pattern)
    target = Chem.Mol(two.mol)
    Chem.RemoveStereochemistry(target)
    maps = target.GetSubstructMatches(pattern, uniquify=False, maxMatches=100_000)
    assert maps
    mine = {tuple(sorted(u.atoms)) for u in one.units}
    theirs = {tuple(sorted(u.atoms)) for u in two.units}
    best = 10**9
    for match in maps:
        wrong = 0
        seen = set()
        for unit in mine:
            image = tuple(sorted(match[a] for a in unit))
            seen.add(image)
            if image not in theirs:
                wrong += 1
            elif len(unit) == 1:
                atom = one.mol.GetAtomWithIdx(unit[0])
                around = [n.GetIdx() for n in atom.GetNeighbors()]
                blank = [-1] * (4 - len(around))
                here = parity(atom, around + blank)
                there = parity(two.mol.GetAtomWithIdx(image[0]), [match[a] for a in around] + blank)
                wrong += here != there
            else:
                wrong += not same_side(one.mol, two.mol, unit, match)
        wrong += len(theirs - seen)
        best = min(best, wrong)
    return best


def same_side(one: Chem.Mol, two: Chem.Mol, unit: tuple[int, ...], match: tuple[int, ...]) -> bool:
    here = geometry(one, unit)
    image = (match[unit[0]], match[unit[1]])
    there = geometry(two, image)
    assert here
    assert there
    sign = here[2]
    for mine, theirs in zip(here[:2], there[:2], strict=True):
        if match[mine] != theirs:
            sign = -sign
    return sign == there[2]


def disagreements(found: al.Alignment) -> int:
    return len(found.verdicts) - found.count(al.SAME)


CASES = [(core, number) for core in SYMMETRIC for number in range(8)]


@pytest.mark.parametrize(("core", "seed"), CASES)
def test_the_best_of_all_automorphisms_is_found(core: str, seed: int) -> None:
    dice = random.Random(f"{core}{seed}")
    arms = [dice.choice(ARMS) for _ in range(2)]
    text = core.format(*arms)
    one = random_stereoisomer(text, dice)
    two = shuffled(random_stereoisomer(text, dice), dice)
    found = align(one, two)
    assert not found.doubt
    assert disagreements(found) == fewest_by_trying_all(one, two)
    # The two directions, and another order of the atoms, say the same.
    assert disagreements(align(two, one)) == disagreements(found)
    assert disagreements(align(shuffled(one, dice), shuffled(two, dice))) == disagreements(found)


@pytest.mark.parametrize(
    ("one", "two", "opposite"),
    [
        # Meso-tartaric acid from either end is one compound (common practice).
        ("OC(=O)[C@H](O)[C@H](O)C(=O)O", "OC(=O)[C@@H](O)[C@@H](O)C(=O)O", 0),
        ("OC(=O)[C@H](O)[C@H](O)C(=O)O", "OC(=O)[C@H](O)[C@@H](O)C(=O)O", 1),
        ("OC(=O)[C@H](O)[C@@H](O)C(=O)O", "OC(=O)[C@@H](O)[C@H](O)C(=O)O", 2),
        # cis-Cyclohexane-1,2-diol is meso; trans has two forms.
        ("O[C@H]1CCCC[C@H]1O", "O[C@@H]1CCCC[C@@H]1O", 0),
        ("O[C@H]1CCCC[C@@H]1O", "O[C@@H]1CCCC[C@H]1O", 2),
        ("O[C@H]1CCCC[C@H]1O", "O[C@H]1CCCC[C@@H]1O", 1),
        # trans-1,4: marks inverted at both ends are the same compound, at one end the other.
        ("C[C@H]1CC[C@H](C)CC1", "C[C@@H]1CC[C@@H](C)CC1", 0),
        # All-cis inositol is its own mirror image.
        (
            "O[C@H]1[C@H](O)[C@H](O)[C@H](O)[C@H](O)[C@H]1O",
            "O[C@@H]1[C@@H](O)[C@@H](O)[C@@H](O)[C@@H](O)[C@@H]1O",
            0,
        ),
        # Exchangeable ends do not count: phenyl rings, methyl groups, oxygens of a phosphate.
        ("N[C@@H](C)C(c1ccccc1)c1ccccc1", "c1ccc(cc1)C(c1ccccc1)[C@H](C)N", 0),
        ("CC(C)(C)[C@H](N)O", "N[C@H](O)C(C)(C)C", 0),
        ("C[C@H](O)OP(=O)(O)O", "OP(=O)(O)O[C@H](C)O", 0),
        ("C[C@H](O)OP(=O)(O)O", "OP(=O)(O)O[C@@H](C)O", 1),
        # E,Z and Z,E of a symmetric diene are one compound; E,E and Z,Z are others.
        ("C/C=C/C=C\\C", "C/C=C\\C=C\\C", 0),
        ("C/C=C/C=C/C", "C/C=C\\C=C\\C", 1),
        ("C/C=C/C=C\\C", "C/C=C\\C=C/C", 1),
        ("C/C=C/C=C/C", "C/C=C\\C=C/C", 2),
    ],
)
def test_known_pairs(one: str, two: str, opposite: int) -> None:
    found = align(from_smiles(one), from_smiles(two))
    assert found.count(al.OPPOSITE) == opposite
    assert disagreements(found) == opposite


LIBRARY = [
    "C[C@@H](O)[C@H](N)C(=O)O",
    "CC[C@H](C)[C@H](N)C(=O)O",
    "OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O",
    "C[C@@H]1CC[C@@H](C(C)C)[C@H](O)C1",
    "C[C@H](N)C(=O)N[C@@H](CO)C(=O)N[C@@H](CC(C)C)C(=O)O",
    "C[S@](=O)C[C@H](N)C(=O)O",
    "CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2",
]


@pytest.mark.parametrize("smiles", LIBRARY)
def test_one_inverted_centre_is_found_at_its_atom(smiles: str) -> None:
    reference = from_smiles(smiles)
    dice = random.Random(smiles)
    for unit in reference.units:
        mol = Chem.Mol(reference.mol)
        mol.GetAtomWithIdx(unit.atoms[0]).InvertChirality()
        order = list(range(mol.GetNumAtoms()))
        dice.shuffle(order)
        found = align(reference, Structure(renumbered(mol, order), ""))
        (wrong,) = [v for v in found.verdicts if v.state == al.OPPOSITE]
        assert wrong.atoms == unit.atoms
        assert order[wrong.other[0]] == unit.atoms[0]
        assert found.count(al.SAME) == len(reference.units) - 1
        assert not found.mirrored or len(reference.units) == 1


@pytest.mark.parametrize("smiles", LIBRARY)
def test_all_inverted_is_the_mirror_image(smiles: str) -> None:
    reference = from_smiles(smiles)
    found = align(reference, from_smiles(al.mirror_smiles(reference)))
    assert found.mirrored
    assert found.count(al.OPPOSITE) == len(reference.units)


def test_a_double_bond_turned_is_no_mirror_image() -> None:
    found = align(from_smiles("C/C=C/[C@H](O)CC"), from_smiles("C/C=C\\[C@@H](O)CC"))
    assert not found.mirrored
    assert found.count(al.OPPOSITE) == 2


@pytest.mark.parametrize("smiles", LIBRARY)
def test_a_centre_left_open_is_silent_on_its_side(smiles: str) -> None:
    reference = from_smiles(smiles)
    for unit in reference.units:
        mol = Chem.Mol(reference.mol)
        mol.GetAtomWithIdx(unit.atoms[0]).SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
        bare = Structure(mol, "")
        (gone,) = [v for v in align(reference, bare).verdicts if v.state != al.SAME]
        assert (gone.state, gone.atoms) == (al.OTHER_SILENT, unit.atoms)
        (back,) = [v for v in align(bare, reference).verdicts if v.state != al.SAME]
        assert (back.state, back.atoms) == (al.REFERENCE_SILENT, unit.atoms)


def test_drawn_and_implicit_hydrogens_are_the_same() -> None:
    one = from_molblock(Chem.MolToMolBlock(laid_out("C[C@@H](O)[C@H](N)C(=O)O", hydrogens=True)))
    two = from_smiles("C[C@@H](O)[C@H](N)C(=O)O")
    for found in (align(one, two), align(two, one)):
        assert found.count(al.SAME) == len(found.verdicts) == 2


# --- enhanced stereo -----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("one", "two", "disagree"),
    [
        # A racemate may be drawn as either enantiomer.
        ("C[C@H](O)[C@H](N)CC |&1:1,3|", "C[C@@H](O)[C@@H](N)CC |&1:1,3|", 0),
        ("C[C@H](O)[C@H](N)CC |&1:1,3|", "C[C@@H](O)[C@H](N)CC |&1:1,3|", 1),
        ("C[C@H](O)[C@H](N)CC |o1:1,3|", "C[C@@H](O)[C@@H](N)CC |o1:1,3|", 0),
        # Two groups turn each for itself.
        ("C[C@H](O)[C@H](N)CC |&1:1,&2:3|", "C[C@@H](O)[C@H](N)CC |&1:1,&2:3|", 0),
        # Outside the group nothing may turn.
        ("C[C@H](O)[C@H](N)CC |&1:1|", "C[C@@H](O)[C@@H](N)CC |&1:1|", 1),
        # Against an absolute structure the group still settles which way round to compare.
        ("C[C@H](O)[C@H](N)CC |&1:1,3|", "C[C@@H](O)[C@@H](N)CC", 0),
    ],
)
def test_groups_are_compared_as_groups(one: str, two: str, disagree: int) -> None:
    first, second = from_smiles(one), from_smiles(two)
    assert disagreements(align(first, second)) == disagree
    assert disagreements(align(second, first)) == disagree


# --- size ----------------------------------------------------------------------------------


def cucurbituril(units: int) -> str:
    """A ring of glycolurils joined by two methylene bridges each."""
    mol = Chem.RWMol()
    rings = []
    for _ in range(units):
        start = mol.GetNumAtoms()
        mol.InsertMol(Chem.MolFromSmiles("C12NC(=O)NC1NC(=O)N2"))
        pattern = Chem.MolFromSmarts("[NH]")
        nitrogens = [m[0] for m in mol.GetMol().GetSubstructMatches(pattern) if m[0] >= start]
        rings.append(nitrogens)
    for here, there in zip(rings, rings[1:] + rings[:1], strict=True):
        for one, two in ((here[1], there[0]), (here[2], there[3])):
            carbon = mol.AddAtom(Chem.Atom(6))
            mol.AddBond(one, carbon, Chem.BondType.SINGLE)
            mol.AddBond(carbon, two, Chem.BondType.SINGLE)
    whole = mol.GetMol()
    Chem.SanitizeMol(whole)
    return str(Chem.MolToSmiles(whole))


def marked(smiles: str) -> Structure:
    """The first centre that the library holds possible, or else the first carbon, marked."""
    mol = Chem.Mol(from_smiles(smiles).mol)
    for atom in mol.GetAtoms():
        if atom.GetDegree() >= 3 and atom.GetAtomicNum() == 6:
            atom.SetChiralTag(Chem.ChiralType.CHI_TETRAHEDRAL_CW)
    return Structure(mol, smiles)


def peptide(length: int, dice: random.Random) -> str:
    sides = ["C", "CO", "CC(C)C", "Cc1ccccc1", "CCCCN", "CC(=O)O"]
    return "".join(f"N[C@@H]({dice.choice(sides)})C(=O)" for _ in range(length)) + "O"


@pytest.mark.parametrize("smiles", [cucurbituril(6), cucurbituril(8), "C12C3C4C1C5C2C3C45"])
def test_a_cage_ends_within_its_budget_or_says_that_it_is_undetermined(smiles: str) -> None:
    dice = random.Random(1)
    one = marked(smiles)
    two = shuffled(one, dice)
    found = align(one, two)
    assert found.doubt or disagreements(found) == 0


def test_a_long_peptide_is_laid_out_without_running_out_of_depth() -> None:
    dice = random.Random(2)
    reference = from_smiles(peptide(60, dice))
    assert len(reference.units) == 60
    mol = Chem.Mol(reference.mol)
    wrong = reference.units[30].atoms[0]
    mol.GetAtomWithIdx(wrong).InvertChirality()
    found = align(reference, shuffled(Structure(mol, ""), dice))
    assert [v.atoms for v in found.verdicts if v.state == al.OPPOSITE] == [(wrong,)]
    assert found.count(al.SAME) == 59
    assert not found.doubt


def test_a_symmetric_molecule_with_a_difference_is_settled_or_doubted() -> None:
    # Twelve identical arms on a cyclohexane: 12! ways, far more than the budget.
    arm = "C[C@H](F)Cl"
    ring = f"C1({arm})({arm})" + f"C({arm})({arm})" * 4 + f"C1({arm})({arm})"
    reference = from_smiles(ring)
    other = from_smiles(ring.replace("@", "@@", 1))
    found = align(reference, other)
    assert found.doubt or found.count(al.OPPOSITE) == 1


@pytest.mark.parametrize(
    ("one", "two", "states"),
    [
        # (2R,3r,4S) against (2R,4R): C3 has become no centre, which is no silence of its own.
        ("C[C@@H](O)[C@H](O)[C@@H](O)C", "C[C@@H](O)C(O)[C@H](O)C", [al.OPPOSITE]),
        # Against (2R,4S) with C3 left open: a silence.
        ("C[C@@H](O)[C@H](O)[C@@H](O)C", "C[C@@H](O)C(O)[C@@H](O)C", [al.OTHER_SILENT]),
        # r against s.
        ("C[C@@H](O)[C@H](O)[C@@H](O)C", "C[C@@H](O)[C@@H](O)[C@@H](O)C", [al.OPPOSITE]),
    ],
)
def test_a_centre_that_exists_only_through_others(one: str, two: str, states: list[str]) -> None:
    first, second = from_smiles(one), from_smiles(two)
    assert [v.state for v in align(first, second).verdicts if v.state != al.SAME] == states
    swapped = {al.OTHER_SILENT: al.REFERENCE_SILENT}
    back = [swapped.get(state, state) for state in states]
    assert [v.state for v in align(second, first).verdicts if v.state != al.SAME] == back
