"""Descriptors found in names of real shape, and look-alikes left alone."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.names.descriptors import printed
from dossiercheck.names.typography import clean


def found(name: str) -> list[str]:
    return [d.locant + d.text for d in printed(clean(name))]


# The forms are those of IUPAC 2013, P-91.2.1 (brackets and locants), P-93.1.3 (RS, R*, rac, rel),
# P-102.3 (D, L, alpha, beta); the older ones are common practice in dossiers.
@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("(2R)-butan-2-ol", "2R"),
        ("(R)-butan-2-ol", "R"),
        ("R-butan-2-ol", "R"),
        ("(2R,3S)-butane-2,3-diol", "2R 3S"),
        ("(2R, 3S)-butane-2,3-diol", "2R 3S"),
        ("(1R,2S,4aS,8aR)-decahydronaphthalene-1,2-diol", "1R 2S 4aS 8aR"),
        ("(4AS,8AR)-DECAHYDROISOQUINOLINE", "4aS 8aR"),
        ("(1'S,2''R)-x", "1'S 2''R"),
        ("(3'aR,4a'S)-x", "3'aR 4a'S"),
        ("(2E,4Z)-hexa-2,4-diene", "2E 4Z"),
        ("(E)-but-2-ene", "E"),
        ("(Z,2S)-x", "Z 2S"),
        ("(2RS,3SR)-3-phenylbutan-2-ol", "2RS 3SR"),
        ("(R*,R*)-2,3-dihydroxybutanedioic acid", "R* R*"),
        ("(2R*,3S*)-x", "2R* 3S*"),
        ("rac-(2R)-butan-2-ol", "rac 2R"),
        ("(2R,3S)-rel-x", "2R 3S rel"),
        ("(±)-trans-x", "+/- trans"),
        ("(R)-(-)-butan-2-ol", "R -"),
        ("(+)-(1R,2S)-x", "+ 1R 2S"),
        ("(1Ra)-1,1'-binaphthalene", "1Ra"),
        ("(M)-hexahelicene", "M"),
        ("(6M,8S)-x", "6M 8S"),
        ("(1P,2'P)-x", "1P 2'P"),
        ("(aR)-1,1'-binaphthalene", "aR"),
        ("(1r,4r)-4-methylcyclohexan-1-ol", "1r 4r"),
        ("(4ar,8as)-x", "4ar 8as"),
        ("(2R,3s,4S)-pentane-2,3,4-triol", "2R 3s 4S"),
        ("cis-2-methylcyclohexan-1-ol", "cis"),
        ("CIS-(1R,2S)-2-AMINO-1-INDANOL", "cis 1R 2S"),
        ("cis,trans-hexa-2,4-diene", "cis trans"),
        ("2-cis-4-trans-hexadiene", "2cis 4trans"),
        ("2-(trans-4-methylcyclohexyl)ethanol", "trans"),
        ("meso-tartaric acid", "meso"),
        ("DL-alanine", "DL"),
        ("L-alanyl-D-leucine", "L D"),
        ("N-acetyl-L-leucine", "L"),
        ("alpha-D-glucopyranose", "alpha D"),
        ("methyl β-D-galactopyranoside", "beta D"),
        ("(3β)-cholest-5-en-3-ol", "3beta"),
        ("3β-hydroxy-5α-androstan-17-one", "3beta 5alpha"),
        ("(αR)-α-methylbenzenemethanol", "alphaR"),
        ("2-exo-bromobicyclo[2.2.1]heptane", "2exo"),
        ("(2-endo)-bicyclo[2.2.1]heptan-2-ol", "2endo"),
        ("threo-3-bromobutan-2-ol", "threo"),
        ("(2Ξ,3R)-x", "2xi 3R"),
        ("2-[(S)-methylsulfinyl]butane", "S"),
        ("2-({[(2~{S})-oxolan-2-yl]methyl}amino)-x", "2S"),
        ("propan-2-yl (2S)-2-aminopropanoate", "2S"),
        ("ethyl(2S)-2-hydroxypropanoate", "2S"),
        ("propanoic acid, 2-hydroxy-, (S)-", "S"),
        ("hydroxy(2R)-phenyl", "2R"),
        ("(R/S)-x", "R/S"),
        ("(2R)-[(2S)-x]", "2R 2S"),
    ],
)
def test_printed(name: str, expected: str) -> None:
    assert found(name) == expected.split()


@pytest.mark.parametrize(
    "name",
    [
        "1H-indole",
        "3,4-dihydronaphthalen-2(1H)-one",
        "imidazo[1,2-a]pyridine",
        "benzo[e]pyrene",
        "BENZO[E]PYRENE",
        "dibenzo[b,e]oxepine",
        "4H-thieno[3,2-e][1,4]diazepine",
        "benzo[1,2-b:4,5-b']dithiophene",
        "S-methyl ethanethioate",
        "N,S-dimethyl-x",
        "(ethanethiolato-S)mercury",
        "(³⁵S)methionine",
        "(35S)methionine",
        "alpha-methylstyrene",
        "β-alanine",
        "N,N-dimethylformamide",
        "naphtho[2,1-d]thiazole",
        "bicyclo[2.2.2]octane",
        "5lambda4-thianthrene",
        "antimony",
        "transferrin",
    ],
)
def test_look_alikes(name: str) -> None:
    assert found(name) == []


def test_a_sugar_prefix_is_not_a_descriptor_of_its_own() -> None:
    assert found("2-deoxy-D-erythro-pentofuranose") == ["D"]


def test_families_and_brackets() -> None:
    descriptors = printed(clean("rac-(2R,3E)-x-[(Ra)-trans-y]-(+)-L-z"))
    assert [(d.text, d.family, d.bracket) for d in descriptors] == [
        ("rac", "prefix", -1),
        ("R", "centre", 0),
        ("E", "double bond", 0),
        ("Ra", "axis", 1),
        ("trans", "relative", -1),
        ("+", "rotation", -1),
        ("L", "prefix", -1),
    ]


LOCANTS = st.from_regex(r"[1-9][0-9]?[a-d]?'{0,2}", fullmatch=True)
LETTERS = st.sampled_from(["R", "S", "E", "Z", "RS", "R*", "M", "P", "r", "s"])


@given(st.lists(st.tuples(LOCANTS, LETTERS), min_size=1, max_size=12))
def test_any_list_in_a_bracket_is_read_back(items: list[tuple[str, str]]) -> None:
    # One item alone may be an isotope (32P, 35S), which a descriptor's place decides.
    name = "(" + ",".join(a + b for a, b in items) + ")-x"
    descriptors = printed(clean(name))
    assert [d.locant + d.text for d in descriptors] == [a + b for a, b in items]
    for descriptor, (_, letters) in zip(descriptors, items, strict=True):
        assert name[slice(*descriptor.span)] == letters
