"""Each printed descriptor tied to its unit; a chemistry library's label at the unit agrees."""

import pytest
from rdkit import Chem
from rdkit.Chem import rdCIPLabeler

from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names
from dossiercheck.names.tying import tie, tie_one


def library_labels(smiles: str) -> dict[tuple[int, ...], str]:
    """CIP labels by RDKit's new labeller, on atoms in SMILES order."""
    params = Chem.SmilesParserParams()
    params.sanitize = False
    params.removeHs = False
    molecule = Chem.MolFromSmiles(smiles, params)
    Chem.SanitizeMol(molecule)
    Chem.SetBondStereoFromDirections(molecule)
    rdCIPLabeler.AssignCIPLabels(molecule, maxRecursiveIterations=100000)
    found: dict[tuple[int, ...], str] = {
        (a.GetIdx(),): a.GetProp("_CIPCode") for a in molecule.GetAtoms() if a.HasProp("_CIPCode")
    }
    for bond in molecule.GetBonds():
        if bond.HasProp("_CIPCode"):
            ends = sorted((bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()))
            found[tuple(ends)] = bond.GetProp("_CIPCode")
    return found


# Names of the shapes that dossiers print; invented but for the common compounds among them. The
# tartaric acids, the first pair, are those of IUPAC 2013, P-65.1.1.2.
@pytest.mark.parametrize(
    "name",
    [
        "(2R,3R)-2,3-dihydroxybutanedioic acid",
        "(2R,3S)-2,3-dihydroxybutanedioic acid",
        "(1R,2S)-cyclohexane-1,2-diol",
        "(R,R)-2,3-dihydroxybutanedioic acid",
        "(2S)-butan-2-yl (2R)-2-chloropropanoate",
        "(2R)-2-chloro-N-[(2S)-butan-2-yl]propanamide",
        "(S)-2-aminopropanoic acid (2R,3R)-2,3-dihydroxybutanedioate",
        "(2S)-2-amino-N-[(2R)-1-{[(2S)-1-hydroxy-3-phenylpropan-2-yl]amino}-1-oxopropan-2-yl]"
        "-3-methylbutanamide",
        "(2S,4R)-4-[(2S)-2-methylpyrrolidin-1-yl]pyrrolidine-2-carboxylic acid",
        "(2E,4Z,6E)-octa-2,4,6-trienoic acid",
        "(E,Z)-hexa-2,4-diene",
        "(3Z)-3-[(4-methylphenyl)methylidene]-1,3-dihydro-2H-indol-2-one",
        "(4S,5E)-4-methyloct-5-en-2-one",
        "(2R)-2-[(S)-methanesulfinyl]butane",
        "(1R,3aS,4R,7aR)-1-[(2R,5E)-6-methyloct-5-en-2-yl]octahydro-1H-inden-4-ol",
        "(4aR,8aS)-1-methyloctahydronaphthalen-4a(2H)-ol",
        "(1S,2S,4R)-bicyclo[2.2.1]heptan-2-ol",
        "(αR)-α-methylbenzenemethanol",
        "propanoic acid, 2-hydroxy-, (2S)-",
        "(1E)-N-hydroxy-1-phenylethan-1-imine",
    ],
)
def test_every_descriptor_is_tied_and_the_library_agrees(name: str, parser: NameParser) -> None:
    reading = read_names([name], parser)[0]
    assert reading.structure and not reading.dropped, reading
    labels = library_labels(reading.structure.smiles)
    ties = tie(reading, parser)
    assert [t.descriptor for t in ties] == list(range(len(reading.descriptors)))
    assert len({t.atoms for t in ties}) == len(ties)
    for tied in ties:
        assert labels.get(tied.atoms) == reading.descriptors[tied.descriptor].text, tied


def test_the_same_locant_in_two_brackets_is_two_atoms(parser: NameParser) -> None:
    reading = read_names(["(2R)-2-chloro-N-[(2R)-butan-2-yl]propanamide"], parser)[0]
    outer, inner = tie(reading, parser)
    assert reading.structure
    atoms = Chem.MolFromSmiles(reading.structure.smiles).GetAtoms()
    assert {a.GetSymbol() for a in atoms[outer.atoms[0]].GetNeighbors()} == {"Cl", "C"}
    assert {a.GetSymbol() for a in atoms[inner.atoms[0]].GetNeighbors()} == {"N", "C"}


def test_one_descriptor_alone(parser: NameParser) -> None:
    reading = read_names(["(2R,3S)-3-phenylbutan-2-ol"], parser)[0]
    assert tie_one(reading, 1, parser) == tie(reading, parser)[1]


def test_a_racemic_or_relative_descriptor_is_tied(parser: NameParser) -> None:
    for name in ("(2RS,3SR)-3-phenylbutan-2-ol", "(2R*,3S*)-3-phenylbutan-2-ol"):
        reading = read_names([name], parser)[0]
        assert reading.structure
        for tied in tie(reading, parser):
            (atom,) = tied.atoms
            assert reading.structure.labels[atom] == reading.descriptors[tied.descriptor].locant


def test_what_has_no_opposite_is_not_tied(parser: NameParser) -> None:
    reading = read_names(["rac-(2R)-butan-2-ol"], parser)[0]
    prefix, centre = tie(reading, parser)
    assert prefix.atoms == ()
    assert centre.atoms == (1,)


def test_D_of_a_sugar_moves_several_units_and_is_not_tied(parser: NameParser) -> None:
    reading = read_names(["alpha-D-glucopyranose"], parser)[0]
    anomer, sugar = tie(reading, parser)
    assert reading.structure and reading.structure.labels[anomer.atoms[0]] == "1"
    assert sugar.atoms == ()
    assert "5 units" in sugar.reason


def test_a_descriptor_that_was_left_out_is_tied_by_its_locant(parser: NameParser) -> None:
    reading = read_names(["(2R,3s,4S)-pentane-2,3,4-triol"], parser)[0]
    ties = tie(reading, parser)
    assert reading.structure
    assert [reading.structure.labels[t.atoms[0]] for t in ties] == ["2", "3", "4"]


def test_an_unread_name_ties_nothing(parser: NameParser) -> None:
    reading = read_names(["(2R)-qqq"], parser)[0]
    assert [t.atoms for t in tie(reading, parser)] == [()]
