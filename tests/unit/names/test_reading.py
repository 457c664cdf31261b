"""Names read: structures held against published ones, faults, refusals."""

import pytest
from rdkit import Chem

from dossiercheck.names.named import NameReading
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names


def read(name: str, parser: NameParser) -> NameReading:
    return read_names([name], parser)[0]


def faults(reading: NameReading) -> list[tuple[str, str]]:
    return [
        (
            f.slug,
            ""
            if f.descriptor is None
            else reading.descriptors[f.descriptor].locant + reading.descriptors[f.descriptor].text,
        )
        for f in reading.faults
    ]


# IUPAC-IUB 1983, recommendation 3AA-1, and IUPAC 2013, P-103.1.1.1 (table of amino acids): the
# semisystematic name and the systematic one are the same compound.
@pytest.mark.parametrize(
    ("trivial", "systematic"),
    [
        ("L-alanine", "(2S)-2-aminopropanoic acid"),
        ("L-cysteine", "(2R)-2-amino-3-sulfanylpropanoic acid"),
        ("L-threonine", "(2S,3R)-2-amino-3-hydroxybutanoic acid"),
        ("L-allothreonine", "(2S,3S)-2-amino-3-hydroxybutanoic acid"),
        ("L-isoleucine", "(2S,3S)-2-amino-3-methylpentanoic acid"),
        ("D-alloisoleucine", "(2R,3S)-2-amino-3-methylpentanoic acid"),
        ("L-proline", "(2S)-pyrrolidine-2-carboxylic acid"),
        ("D-serine", "(2R)-2-amino-3-hydroxypropanoic acid"),
        ("L-methionine", "(2S)-2-amino-4-(methylsulfanyl)butanoic acid"),
        ("L-tryptophan", "(2S)-2-amino-3-(1H-indol-3-yl)propanoic acid"),
    ],
)
def test_amino_acids(trivial: str, systematic: str, parser: NameParser) -> None:
    one, other = read_names([trivial, systematic], parser)
    assert one.structure and other.structure
    assert Chem.CanonSmiles(one.structure.smiles) == Chem.CanonSmiles(other.structure.smiles)
    assert one.faults == other.faults == ()
    assert one.stereo_kind == "absolute"


# Structures drawn by hand from the names; IUPAC 2013, P-93.5 (chains, rings) and P-31.1.4.3.4 (E, Z).
@pytest.mark.parametrize(
    ("name", "smiles"),
    [
        ("(2R)-butan-2-ol", "CC[C@@H](C)O"),
        ("(R)-bromochlorofluoromethane", "[C@](F)(Cl)(Br)[H]"),
        ("(2E)-but-2-enoic acid", "C/C=C/C(=O)O"),
        ("(2Z)-but-2-enedioic acid", r"OC(=O)/C=C\C(=O)O"),
        ("(2R,3R)-2,3-dihydroxybutanedioic acid", "OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
        ("(S)-(methanesulfinyl)benzene", "C[S@](=O)c1ccccc1"),
    ],
)
def test_structures(name: str, smiles: str, parser: NameParser) -> None:
    reading = read(name, parser)
    assert reading.structure
    assert Chem.CanonSmiles(reading.structure.smiles) == Chem.CanonSmiles(smiles)
    assert reading.skeleton is None and reading.faults == ()


@pytest.mark.parametrize(
    ("name", "kind"),
    [
        ("(2R)-butan-2-ol", "absolute"),
        ("butan-2-ol", "silent"),
        ("(2xi)-butan-2-ol", "silent"),
        ("rac-(2R)-butan-2-ol", "racemic"),
        ("(2RS)-butan-2-ol", "racemic"),
        ("(±)-butan-2-ol", "racemic"),
        ("DL-alanine", "racemic"),
        ("rel-(2R,3R)-3-phenylbutan-2-ol", "relative"),
        ("(2R*,3R*)-3-phenylbutan-2-ol", "relative"),
    ],
)
def test_absolute_relative_racemic(name: str, kind: str, parser: NameParser) -> None:
    assert read(name, parser).stereo_kind == kind


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("(7R)-butan-2-ol", [("no-such-locant", "7R")]),
        ("(2R,2'R)-butan-2-ol", [("no-such-locant", "2'R")]),
        ("(3S,4R)-2-chloro-4-methylhexane", [("locant-not-stereogenic", "3S")]),
        ("(1E)-but-2-ene", [("locant-not-stereogenic", "1E")]),
        ("(2R,2R)-butan-2-ol", [("duplicate-descriptor", "2R")]),
        ("(2R,2S)-butan-2-ol", [("contradictory-descriptors", "2S")]),
        ("(2R)-L-alanine", [("overrides-implied", "2R")]),
        ("(2S,3S)-L-threonine", [("overrides-implied", "3S")]),
        ("(2S)-L-alanine", []),
        ("(2R)-L-cysteine", []),
        ("(2S,3S)-L-allothreonine", []),
        ("(R)-alanine", []),
        ("ethyl(2S)-2-hydroxypropanoate", [("lost-space", "")]),
        ("methyl2-aminobenzoate", [("lost-space", "")]),
        ("tert-butyl[(3S)-pyrrolidin-3-yl]carbamate", [("lost-space", "")]),
        ("methyl(phenyl)carbamate", []),
        ("ethyl (2S)-2-hydroxypropanoate", []),
        ("sodium methyl(phenyl)carbamate", []),
        ("(2s)-butan-2-ol", [("lower-case-descriptor", "2s")]),
        (
            "(1r,4r)-4-methylcyclohexan-1-ol",
            [("descriptor-stripped", "1r"), ("descriptor-stripped", "4r")],
        ),
        ("(2R,3s,4S)-pentane-2,3,4-triol", [("descriptor-stripped", "3s")]),
        ("cis-(1R,2S)-2-methylcyclohexan-1-ol", [("descriptor-stripped", "cis")]),
        ("meso-2,3-dibromobutane", [("descriptor-stripped", "meso")]),
        ("(M)-hexahelicene", [("descriptor-stripped", "M")]),
        ("(+)-butan-2-ol", [("stereo-ignored", "+")]),
        ("(S)-(-)-butan-2-ol", [("stereo-ignored", "-")]),
    ],
)
def test_faults(name: str, expected: list[tuple[str, str]], parser: NameParser) -> None:
    reading = read(name, parser)
    assert reading.structure, reading.refusal
    assert faults(reading) == expected


def test_the_rest_of_a_refused_name_keeps_its_configurations(parser: NameParser) -> None:
    reading = read("(3S)-2-chloro-N-[(2S)-butan-2-yl]butanamide", parser)
    sound = read("2-chloro-N-[(2S)-butan-2-yl]butanamide", parser)
    assert reading.structure == sound.structure
    assert reading.skeleton and "@" not in reading.skeleton.smiles
    (fault,) = reading.faults
    assert (fault.slug, fault.descriptor) == ("locant-not-stereogenic", 0)
    assert set(fault.atoms) == set(reading.skeleton.labelled("3"))
    assert len(fault.atoms) == 2


def test_candidates_are_those_of_the_parent_that_the_bracket_speaks_of(parser: NameParser) -> None:
    # 6 is a locant of both chains; the bracket's other letter stands on the nonane.
    reading = read("(2S,6R)-5-ethyl-N-[(4R)-4-methyloctan-3-yl]nonan-2-amine", parser)
    (fault,) = reading.faults
    assert (fault.slug, len(fault.atoms)) == ("locant-not-stereogenic", 1)
    assert reading.skeleton
    molecule = Chem.MolFromSmiles(reading.skeleton.smiles)
    chain = Chem.MolFromSmarts("NC(C)CCC(CC)[CH2]")
    sixths = {match[-1] for match in molecule.GetSubstructMatches(chain)}
    assert fault.atoms[0] in sixths


def test_a_wrong_outer_locant_does_not_cost_a_sound_inner_one(parser: NameParser) -> None:
    # The parser lets the outer 3S take the inner atom 3 and then blames the inner 3S.
    reading = read("(3S)-2-chloro-N-[(3S)-3-methylpentan-2-yl]propanamide", parser)
    assert faults(reading)[0][0] in ("locant-not-stereogenic", "no-such-locant")
    assert reading.faults[0].descriptor == 0


def test_a_letter_for_phosphorus_is_not_put_on_a_leucine(parser: NameParser) -> None:
    # Shape of a phosphinic peptide; the parser turns the L-leucine into D without a message.
    name = "2-[(R)-{1-[(N-acetyl-L-leucyl)amino]ethyl}(hydroxy)phosphoryl]acetic acid"
    reading = read(name, parser)
    sound = read(name.replace("(R)-", ""), parser)
    assert reading.structure and sound.structure
    assert reading.structure.smiles == sound.structure.smiles
    assert faults(reading) == [("descriptor-stripped", "R")]


def test_a_letter_for_phosphorus_that_can_be_placed_is(parser: NameParser) -> None:
    reading = read("methyl (S)-ethyl(phenyl)phosphinate", parser)
    assert reading.structure and "[P@" in reading.structure.smiles
    assert reading.faults == ()


def test_a_carbon_before_a_phosphonate_keeps_its_letter(parser: NameParser) -> None:
    reading = read("diethyl (S)-(1-hydroxyethyl)phosphonate", parser)
    assert reading.structure and "[C@" in reading.structure.smiles
    assert reading.faults == ()


@pytest.mark.parametrize(
    ("text", "reason", "part"),
    [
        ("", "empty", None),
        ("   ", "empty", None),
        ("etha\0nol", "control-character", "\0"),
        ("etha\tnol", "control-character", "\t"),
        ("2-пропанол", "foreign-character", "п"),
        ("(R)-qqqvaptan", "not-interpretable", "qqqvaptan"),
        ("2−{3−qqq−phenyl}ethanol", "not-interpretable", "qqq−phenyl}ethanol"),
        ("(S)-butan-2-ol qqq", "not-interpretable", "qqq"),
        ("x" * 10_000, "too-long", None),
    ],
)
def test_refusals(text: str, reason: str, part: str | None, parser: NameParser) -> None:
    reading = read(text, parser)
    assert reading.structure is None
    assert reading.refusal and reading.refusal.reason == reason
    assert reading.refusal.detail
    span = reading.refusal.span
    assert (text[slice(*span)] if span else None) == part


def test_readings_come_in_the_order_of_the_texts(parser: NameParser) -> None:
    texts = ["(2R)-butan-2-ol", "etha\0nol", "(7R)-butan-2-ol", "qqq", "(2R)-L-alanine", "ethanol"]
    readings = read_names(texts, parser)
    assert [r.text for r in readings] == texts
    assert [r.structure is not None for r in readings] == [True, False, True, False, True, True]


def test_a_sound_name_costs_one_question(
    monkeypatch: pytest.MonkeyPatch, parser: NameParser
) -> None:
    asked: list[str] = []
    parse = parser.parse
    monkeypatch.setattr(parser, "parse", lambda names: (asked.extend(names), parse(names))[1])
    read_names(["(2R)-butan-2-ol", "L-alanine", "ethyl (2S)-2-hydroxypropanoate"], parser)
    assert len(asked) == 3


def test_a_retained_name_without_numbers_does_not_make_a_locant_wrong(parser: NameParser) -> None:
    # The parser numbers no atom of tartaric acid; in butan-2-ol it does, and 7 is none of them.
    reading = read("(2R,3R)-tartaric acid", parser)
    assert faults(reading) == [("descriptor-stripped", "2R"), ("descriptor-stripped", "3R")]
    assert all(len(fault.atoms) == 10 for fault in reading.faults)
    assert faults(read("(7R)-butan-2-ol", parser)) == [("no-such-locant", "7R")]
