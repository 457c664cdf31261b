"""The parser's answers read as text, held against a chemistry library's reading."""

import random

import pytest
from rdkit import Chem

from dossiercheck.names.notation import NotationError, read_extended, read_notation

SMILES = [
    r"C\C=C\C",
    r"C/C=C\C",
    r"C(\C)=C/C",
    r"F/C(Cl)=C(/Br)I",
    r"C\C=C\C=C/C(O)=C/C",
    r"C1CCCCC/C=C/1",
    r"C1=CCCCCC\C=C/1",
    r"O=C1/C(=C\c2ccccc2)CCN1",
    r"C[C@H](O)/C=C/[C@@H](C)N",
    r"N(\O)=C(/C)CC",
]


def library_double_bonds(smiles: str) -> dict[tuple[int, int], str]:
    """Cis or trans of the lowest-numbered neighbours, by RDKit."""
    molecule = Chem.MolFromSmiles(smiles, sanitize=False)
    Chem.SetBondStereoFromDirections(molecule)
    found = {}
    for bond in molecule.GetBonds():
        if bond.GetStereo() not in (Chem.BondStereo.STEREOCIS, Chem.BondStereo.STEREOTRANS):
            continue
        begin, end = bond.GetBeginAtom(), bond.GetEndAtom()
        same = bond.GetStereo() == Chem.BondStereo.STEREOCIS
        for atom, other, given in zip(
            (begin, end), (end, begin), bond.GetStereoAtoms(), strict=True
        ):
            lowest = min(n.GetIdx() for n in atom.GetNeighbors() if n.GetIdx() != other.GetIdx())
            same ^= lowest != given
        key = (min(begin.GetIdx(), end.GetIdx()), max(begin.GetIdx(), end.GetIdx()))
        found[key] = "cis" if same else "trans"
    return found


@pytest.mark.parametrize("smiles", SMILES)
def test_double_bonds_are_read_as_the_library_reads_them(smiles: str) -> None:
    assert read_notation(smiles).double_bonds == library_double_bonds(smiles)
    assert read_notation(smiles).double_bonds


@pytest.mark.parametrize("smiles", SMILES)
def test_so_are_random_writings_of_the_same_molecules(smiles: str) -> None:
    molecule = Chem.MolFromSmiles(smiles)
    Chem.Kekulize(molecule, clearAromaticFlags=True)
    for seed in range(20):
        order = list(range(molecule.GetNumAtoms()))
        random.Random(seed).shuffle(order)
        shuffled = Chem.RenumberAtoms(molecule, order)
        written = Chem.MolToSmiles(shuffled, canonical=False, kekuleSmiles=True)
        assert read_notation(written).double_bonds == library_double_bonds(written), written


def test_the_constitution_is_free_of_marks() -> None:
    marked = read_notation(r"C[C@@H](O)/C=C/[C@H]1[S@](=O)C[15N@]1C[N@@H+](C)C")
    assert marked.constitution == "CC(O)C=CC1S(=O)C[15N]1C[NH+](C)C"
    assert marked.marks.count("@@") == 2


def test_locants_and_groups() -> None:
    one = read_extended(r"C[C@@H]([C@@H](C)O)CC |$_AV:1;3;2;1;O;4;5$,&1:2|")
    assert one.labels == ("1", "3", "2", "1", "O", "4", "5")
    assert [(g.kind, g.number, g.atoms) for g in one.groups] == [("and", 1, (2,))]
    assert one.labelled("1") == (0, 3)
    assert one.labelled("") == ()
    whole = read_extended("C[C@H](CC)O |$_AV:1;2;3;4;O$,r|")
    assert [(g.kind, g.atoms) for g in whole.groups] == [("rac", (1,))]


def test_locants_missing_at_the_end_are_empty() -> None:
    # As the parser answers for L-threonine: the acid's oxygens have no locant.
    structure = read_extended("N[C@@H]([C@H](O)C)C(=O)O |$_AV:N;2;3;O;4;1$|")
    assert structure.labels == ("N", "2", "3", "O", "4", "1", "", "")


@pytest.mark.parametrize("wrong", ["C1CC", "C(C", "CC)C", "C!C", "C |$_AV:1;2;3$|", "C |$_AV:1$"])
def test_what_does_not_add_up_is_refused(wrong: str) -> None:
    with pytest.raises(NotationError):
        structure = read_extended(wrong)
        read_notation(structure.smiles)
