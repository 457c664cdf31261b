from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.language.running import HYPHENS, PRIMES, candidates
from dossiercheck.model import Passage, Place
from tests.unit.language.gathering import evidence, lines, not_read


def names(text: str) -> list[str]:
    return [text[one.start : one.end] for one in candidates(text)]


@pytest.mark.parametrize(
    "name",
    [
        "(2S)-butan-2-ol",
        "(R)-1-phenylethan-1-amine",
        "(2R,3S)-3-aminobutan-2-ol hydrochloride",
        "(1R,5S)-3,6-dioxabicyclo[3.1.0]hexane",
        "(3S,4R)-4-{3-[(2S)-butan-2-yloxy]-4-fluorophenyl}-1-methylpyrrolidine-3-carboxylic acid",
        "N,N′-bis[(3R,4S)-4-hydroxyoxolan-3-yl]urea",
        "3-[(2RS)-butan-2-yloxy]-4-fluorobenzaldehyde",
        "ethyl (2E)-but-2-enoate",
        "ethyl rel-(3R,4S)-4-phenylpyrrolidine-3-carboxylate",
        "ethyl(2S)-2-hydroxypropanoate",
        "sodium (2S)-2-hydroxypropanoate",
        "2-methoxyethyl (2S)-2-hydroxypropanoate",
        "(1R,2S,5R)-5-methyl-2-(propan-2-yl)cyclohexyl acetate",
        "(1R,2S,5R)-5-methyl-2-(propan-2-yl)cyclohexyl (2S)-2-hydroxypropanoate",
        "(2S)-1-phenylpropan-2-amine (2R,3R)-2,3-dihydroxybutanedioate (1:1)",
        "ethyl (3S)-pyrrolidine-3-carboxylate (2S)-2-acetamidopropanoic acid (1:1)",
        "(2S)-2-aminopropanoic acid monohydrate",
        "(2~{R},3~{S})-2-amino-3-hydroxybutanoic acid",
        "(2R*,3S*)-3-methylpentan-2-ol",
        "rac-(1R,2S)-2-aminocyclohexan-1-ol",
        "(+)-(2S)-butan-2-ol",
        "(αS)-α-methylbenzenemethanamine",
        "[R-(R*,S*)]-4-(1-hydroxy-2-methylaminopropyl)phenol",
        "(2R, 3S)-3-aminobutan-2-ol",
        "(E)-but-2-enedioic acid",
        "4-[(1E,3Z)-4-chlorobuta-1,3-dien-1-yl]phenol",
        "(S)-proline",
        "(S)-lactic acid",
        "(M)-1,1'-binaphthyl-2,2'-diol",
        "(3aR,7aS)-octahydro-1H-indene",
        "(2'R,3\"S)-x-2'-yl-benzene",
        "[(2R,3S)-3-hydroxyoxolan-2-yl]methyl dihydrogen phosphate",
        "(1R)-1-phenylethyl methyl butanedioate",
        "S-(2-acetamidoethyl) (6S)-6-chlorodecanethioate",
        "(phenylmethyl) N-[(2S)-butan-2-yl]carbamate",
        "(2R)-2,3-dihydroxypropyl beta-D-galactopyranoside",
        "(2R)-butan-2-yl nicotinate",
        "[(2S)-oxiran-2-yl]methyl phosphono hydrogen phosphate",
        "[(1R)-1-phenylethyl] [(2S)-butan-2-yl] hydrogen phosphate",
        "{[(2R)-pyrrolidin-2-yl]methylene}bis(phosphonic acid)",
        "(5S)-5-phenyl-1,2-thiazolidin-3-one 1,1-dioxide",
        "(3~{a}~{R},6~{a}~{S})-hexahydro-1~{H}-pentalene",
        "(2S)-2-(beta-D-glucopyranosyl-(1->4)-oxy)butane",
        "(3R)-1$l^{6}-thiane-1,1-dione".replace("{6}", "6"),
        "N-HYDROXY-2(R)-[(PHENYL)AMINO]-3-METHYLBUTANAMIDE HYDROCHLORIDE",
        "(2S)-2-AMINO-3-PHENYLPROPANOIC ACID",
        "(2E)-BUT-2-ENAL",
        "pyridine-3-carboxylic acid [(1R)-1-phenylethyl]amide",
        "(2S)-pyrrolidine-2-carboxylic acid ((1R)-1-phenylethyl)-amide",
        "(2S)-2-aminobutanethioic S-acid",
        "phosphono [(2S)-butan-2-yl] hydrogen phosphate",
        "rac-1-phenylethan-1-amine",
        "rac-tartaric acid",
        "rel-2-aminocyclohexan-1-ol",
        "(±)-1-phenylethan-1-ol",
        "(+/-)-1-phenylethan-1-amine hydrochloride",
        "rac-methyl 2-amino-3-phenylpropanoate",
        "(3AR,7AS)-OCTAHYDRO-1H-INDENE",
        "2'-deoxy-N-[(2S)-butan-2-yl]adenosine 5'-(dihydrogen phosphate)",
    ],
)
@pytest.mark.parametrize(
    "sentence",
    [
        "{}",
        "The product is {}.",
        "It contains {}, which melts at 80 °C.",
        "Impurity B ({}) was found.",
        "Both “{}” and its isomer; see there.",
    ],
)
def test_names_are_found_whole(name: str, sentence: str) -> None:
    assert names(sentence.format(name)) == [name]


@pytest.mark.parametrize(
    "prose",
    [
        "the (S)-enantiomer and the (R)-form",
        "the (E) isomer and (Z)-isomers are separated",
        "see Section 3(R) and Table 2(S)",
        "(S)-DX-101 and (R)-DX-102",
        "the (S)-intermediate, the (R)-configured alcohol, the (S)-amine",
        "(R) and (S) descriptors, (2R) and (2S), (2R,3S)",
        "an (R)-selective catalyst of (S)-configuration",
        "detected by LC(MS)-detection and GC(E)-mode",
        "items (1)-(3), (a)-(c) and (i)-(iv)",
        "the 2-(S)-centre is of (S)-configuration",
        "(M)-series of (P)-type columns",
        "The ratio (R):(S) was 1:1 (E = 200).",
        "the (2R,3S)-isomer",
        "(S)-acidic",
        "the amide-3(R) of Section-2(S)",
        "rac-DX-101, (±)-DX-101 and the rac-mixture",
        "the rac-form, (±)-enantiomers and (±)-isomer",
        "a deviation of (±)-5 mg or (+/-)-0.5 percent",
        "a rel-value and the rac-alcohol",
    ],
)
def test_prose_is_no_name(prose: str) -> None:
    assert names(prose) == []


def test_names_in_a_list() -> None:
    text = "(2R)-butan-2-ol, (2S)-butan-2-ol; (3R)-hexan-3-ol and (3S)-hexan-3-ol,(4S)-octan-4-ol"
    assert names(text) == [
        "(2R)-butan-2-ol",
        "(2S)-butan-2-ol",
        "(3R)-hexan-3-ol",
        "(3S)-hexan-3-ol",
        "(4S)-octan-4-ol",
    ]


def test_where_the_end_is_in_doubt_the_shorter_ones_are_offered() -> None:
    text = "ethyl (2S)-2-aminopropanoate hydrochloride"
    (one,) = candidates(text)
    assert text[one.start : one.end] == text
    assert [text[start:end] for start, end in one.alternatives] == [
        "(2S)-2-aminopropanoate hydrochloride",
        "ethyl (2S)-2-aminopropanoate",
        "(2S)-2-aminopropanoate",
    ]


@given(
    st.sampled_from(HYPHENS), st.sampled_from(PRIMES), st.sampled_from([" ", "\u00a0", "\u2009"])
)
def test_typography_does_not_matter(hyphen: str, prime: str, space: str) -> None:
    name = "ethyl (2'R,3S)-2'-[(1E)-prop-1-en-1-yl]-3-aminobutanoate"
    printed = name.replace("-", hyphen).replace("'", prime).replace(" ", space)
    text = f"The ester {printed}, a liquid."
    assert names(text) == [printed]


@given(st.text(alphabet="(2R,S3)-[]{}abcylone '′.:; \u00a0", max_size=80))
def test_spans_lie_in_the_text_and_do_not_overlap(text: str) -> None:
    end = 0
    for one in candidates(text):
        assert end <= one.start < one.end <= len(text)
        assert all(one.start <= start < stop <= one.end for start, stop in one.alternatives)
        assert text[one.start : one.end] == text[one.start : one.end].strip()
        end = one.end


@pytest.mark.parametrize("filling", ["(2S)-", "(2S)", "-(2R,3S)-x", "((((", "ethyl ", "(S)-a "])
def test_a_hundred_thousand_characters(filling: str) -> None:
    """Ends at all: a search that went over the text once for each bracket would not."""
    text = (filling * 100_000)[:100_000]
    assert all(one.end <= len(text) for one in candidates(text))


@pytest.mark.parametrize(
    ("sentence", "label"),
    [
        ("Impurity B, {}, is its enantiomer.", "Impurity B"),
        ("The enantiomer, {} (Impurity B), is controlled.", "Impurity B"),
        ("DX-101 ({}) is a salt.", "DX-101"),
        ("Dorvaquelan, {}, was correlated.", "Dorvaquelan"),
        ("are coupled in the presence of Reagent 2 to Dorvaquelan, {}.", "Dorvaquelan"),
        ("Olefination gives Intermediate 2, {}; the isomer is controlled.", "Intermediate 2"),
        ("With Reagent 1 ({}) one of the two crystallises.", "Reagent 1"),
        ("Impurity B is {}.", "Impurity B"),
        ("Impurity B: {}", "Impurity B"),
        ("{} (DX-101) melts.", "DX-101"),
        ("The enantiomer of DX-101, {}, is controlled.", ""),
        ("the enantiomer of DX-101 ({}) is controlled", ""),
        ("From Intermediate 2, {} is obtained.", ""),
        ("Finally, {} is added.", ""),
        ("Subsequently, {} is added.", ""),
        ("{} (Section 3.2.S.1) is described.", ""),
        ("{} (99.8 %) and {} (anhydrous)", ""),
        ("The product {} is a solid.", ""),
        ("Impurity B was not found in {}.", ""),
    ],
)
def test_labels_beside_names(sentence: str, label: str) -> None:
    found = evidence(lines(sentence.replace("{}", "(2S)-butan-2-ol")))
    assert found
    assert {one.label for one in found} == {label}
    assert {one.group for one in found} == {""}


def test_spans_find_the_name_in_its_passage() -> None:
    passage = Passage("The ester\nethyl (2S)-2-hydroxypropanoate, a liquid", Place("a", line=1))
    (found,) = evidence([passage])
    assert found.place.span is not None
    assert passage.text[slice(*found.place.span)] == found.text == "ethyl (2S)-2-hydroxypropanoate"


@pytest.mark.parametrize(
    "text",
    [
        "the amino acid (2S)-2-amino-3-\nphenylpropanoic acid is",
        "the diacid (2S)-2-aminobutane\ndioic acid is",
        "the acid (2S)-2-aminobutanoic\nacid is",
        "the ester ethyl\n(2S)-2-hydroxypropanoate is",
        "the amine (2S)-2-amino-N-[(1R)-1-phenyl\nethyl]propanamide is",
    ],
)
def test_a_name_over_a_line_end_is_not_guessed(text: str) -> None:
    assert "broken-name" in [entry.reason for entry in not_read(lines(text))]


@pytest.mark.parametrize(
    "following", ["\nwas distilled.", ",\nwhich was distilled.", ",\nand water.", ".\n\n3 g of it"]
)
def test_a_name_at_the_end_of_a_line_before_plain_words_is_read(following: str) -> None:
    found = evidence(lines("The product (2S)-butan-2-ol" + following))
    assert [one.text for one in found] == ["(2S)-butan-2-ol"]


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("the (1R)-1-phenylethyl intermediate", "(1R)-1-phenylethyl"),
        ("the (1R)-1-phenylethyl precipitate is", "(1R)-1-phenylethyl"),
        ("a (2S)-butan-2-yl group and", "(2S)-butan-2-yl"),
        ("(1R)-1-phenylethyl separates inside", "(1R)-1-phenylethyl"),
        ("the [(1R)-1-phenylethyl]amide of it", "[(1R)-1-phenylethyl]amide"),
    ],
)
def test_the_name_of_a_group_is_no_substance(text: str, found: str) -> None:
    assert names(text) == [found]
    assert evidence(lines(text)) == []
    assert [(one.reason, one.text) for one in not_read(lines(text))] == [("substituent", found)]


def test_rings_joined_to_their_like_are_compounds() -> None:
    for name in ("(R)-2,2'-dimethyl-1,1'-binaphthyl", "(aR)-2-iodo-6-methylbiphenyl"):
        assert [one.text for one in evidence(lines(f"The ligand {name} was used."))] in ([name], [])


def test_halves_of_an_ester_are_never_read_apart() -> None:
    """Where the joint is not understood, the whole goes to the name parser."""
    text = "gives [[(3R)-oxolan-3-ylidene]amino] [(2S)-butan-2-yl] phosphorofluoridate."
    for one in candidates(text):
        assert text[one.start : one.end] not in ("[(2S)-butan-2-yl] phosphorofluoridate",)
