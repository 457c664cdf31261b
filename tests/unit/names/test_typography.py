"""Whatever the typography, the same plain name; and every span leads back to the print."""

import unicodedata

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.names.typography import clean, foreign

NAMES = [
    "(2R,3S)-3-amino-2-hydroxybutanoic acid",
    "(1R,2R)-N,N'-dimethylcyclohexane-1,2-diamine",
    "(2''S,4'R)-4'-methyl-1,1':4',1''-terphenyl",
    "propan-2-yl (2E)-3-phenylprop-2-enoate",
    "[(8aS)-octahydroindolizin-1-yl]-(4-methylphenyl)methanone",
]
# All of Unicode's dash punctuation (general category Pd, Unicode 15) that is one character wide
# in a name, and the minus and hyphen signs outside it.
DASHES = [chr(c) for c in range(0x10000) if unicodedata.category(chr(c)) == "Pd"] + [
    "\u2212",
    "\u02d7",
    "\u2043",
]
PRIMES = ["'", "\u2032", "\u2019", "\u2018", "\u02b9", "\u02bc", "`", "\u00b4", "\uff07"]
DOUBLE = ["''", "\u2033", "\u02ba", '"', "\u201d", "\u2032\u2032"]
SPACES = [chr(c) for c in range(0x10000) if unicodedata.category(chr(c)) == "Zs"] + [
    "  ",
    " \u200b",
]


@given(st.sampled_from(NAMES), st.data())
def test_any_hyphen_prime_or_space_gives_the_same_name(name: str, data: st.DataObject) -> None:
    printed = []
    place = 0
    while place < len(name):
        if name.startswith("''", place):
            printed.append(data.draw(st.sampled_from(DOUBLE)))
            place += 2
            continue
        choice = {"-": DASHES, "'": PRIMES, " ": SPACES}.get(name[place])
        printed.append(data.draw(st.sampled_from(choice)) if choice else name[place])
        place += 1
    assert clean("".join(printed)).text == name


@given(st.sampled_from(NAMES), st.integers(0, 60), st.sampled_from(["\u200b", "\u2060", "\ufeff"]))
def test_spaces_of_no_width_vanish(name: str, place: int, nothing: str) -> None:
    place = min(place, len(name))
    assert clean(name[:place] + nothing + name[place:]).text == name


@given(st.text(max_size=60))
def test_offsets_lie_in_the_print_and_never_run_back(text: str) -> None:
    cleaned = clean(text)
    assert len(cleaned.offsets) == len(cleaned.text)
    assert list(cleaned.offsets) == sorted(cleaned.offsets)
    assert all(0 <= place < len(text) for place in cleaned.offsets)


@given(st.text(max_size=60))
def test_cleaning_what_is_clean_changes_nothing(text: str) -> None:
    once = clean(text)
    if foreign(once) is None and not set("~^*_<.") & set(text):
        assert clean(once.text).text == once.text


@pytest.mark.parametrize(
    ("printed", "plain"),
    [
        ("α-D-glucopyranose", "alpha-D-glucopyranose"),
        ("𝛼-D-glucopyranose", "alpha-D-glucopyranose"),
        ("(3β,5α)-cholestan-3-ol", "(3beta,5alpha)-cholestan-3-ol"),
        ("1λ⁴-thiophene", "1lambda4-thiophene"),
        (".alpha.-D-glucopyranose", "alpha-D-glucopyranose"),
        ("(ALPHAS,3S)-X", "(alphaS,3S)-X"),
        ("tricyclo[3.3.1.1³,⁷]decane", "tricyclo[3.3.1.1^{3,7}]decane"),
        ("tricyclo[4.2.2.2²,⁵]dodecane", "tricyclo[4.2.2.2^{2,5}]dodecane"),
        ("tricyclo[3.3.1.1~3,7~]decane", "tricyclo[3.3.1.1^{3,7}]decane"),
        ("N²-methyl", "N2-methyl"),
        ("N~2~-methyl", "N2-methyl"),
        ("N^6^-acetyl", "N6-acetyl"),
        ("(2~{R},3~{S})-x", "(2R,3S)-x"),
        ("(2*R*,3*S*)-x", "(2R,3S)-x"),
        ("(2*R**,3*S**)-x", "(2R*,3S*)-x"),
        ("(2R*,3S*)-x", "(2R*,3S*)-x"),
        ("(R*,S*)-x", "(R*,S*)-x"),
        ("(2_R_)-x", "(2R)-x"),
        ("(2<i>R</i>)-<em>N</em>-x", "(2R)-N-x"),
        ("(±)-x", "(+/-)-x"),
        ("ʟ-alanine", "L-alanine"),
        ("Ｌ-alanine", "L-alanine"),
        ("1→4", "1->4"),
        ("ﬂuoro", "fluoro"),
        ("(2R, 3S)-x", "(2R,3S)-x"),
        ("propanoic acid, 2-hydroxy-, (2S)-", "propanoic acid, 2-hydroxy-, (2S)-"),
        ("meth\u00adyl", "methyl"),
        ("2\u00admethyl", "2-methyl"),
        ("(2S)-\u00adbutan-2-\u00adol", "(2S)-butan-2-ol"),
        ("(2R,\u00ad3S)-butane-2,\u00ad3-diol", "(2R,3S)-butane-2,3-diol"),
        ("(2S)-butan-2-ol¹", "(2S)-butan-2-ol"),
        ("(2S)-butan-2-olᵃ,ᵇ ", "(2S)-butan-2-ol"),
        ("1λ⁶-thiane", "1lambda6-thiane"),
        ("  2-x \r\n", "2-x"),
        ("2-\r\nmethylpropane", "2-methylpropane"),
        ("ethanol (non-preferred name)", "ethanol"),
    ],
)
def test_what_is_printed_and_what_is_meant(printed: str, plain: str) -> None:
    assert clean(printed).text == plain


def test_a_span_of_the_plain_name_is_given_in_the_print() -> None:
    cleaned = clean("(2~{R})−α-x")
    assert cleaned.text == "(2R)-alpha-x"
    assert cleaned.original[slice(*cleaned.span(2, 3))] == "R"
    assert cleaned.original[slice(*cleaned.span(5, 10))] == "α"


@pytest.mark.parametrize(
    ("text", "character"),
    [("etha\0nol", "\0"), ("etha\tnol", "\t"), ("methyl\nbenzoate", "\n"), ("2-пропанол", "п")],
)
def test_a_character_that_no_name_has_is_reported_not_dropped(text: str, character: str) -> None:
    found = foreign(clean(text))
    assert found is not None
    assert found[0] == character
    assert text[found[1]] == character
