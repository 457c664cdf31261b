"""Characters that hide or act are shown as code points; all others stay as they are."""

import unicodedata

from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.report.visible import one_line, runs, visible


def test_bidirectional_controls_are_shown() -> None:
    # Unicode Standard Annex 9, table of explicit directional formatting characters (section 2).
    for code in [0x061C, 0x200E, 0x200F, *range(0x202A, 0x202F), *range(0x2066, 0x206A)]:
        assert visible(f"a{chr(code)}b") == f"a\u2039U+{code:04X}\u203ab"


@given(st.text(st.characters(categories=["Cc", "Cf", "Cs", "Zl", "Zp"]), min_size=1))
def test_no_control_format_or_surrogate_character_passes(text: str) -> None:
    left = {unicodedata.category(one) for one in visible(text).replace("\n", "").replace("\t", "")}
    allowed = {one for one in text if unicodedata.category(one) == "Cf" and one in visible(text)}
    # Format characters with a width of their own (Arabic number signs and the like) may stay.
    assert left <= {"Lu", "Nd", "Sm", "Pi", "Pf", "Cf"}
    assert not [
        one
        for one in allowed
        if unicodedata.bidirectional(one) in {"BN", "RLO", "LRO"} and ord(one) < 0x110BD
    ]


@given(st.text(), st.lists(st.tuples(st.integers(-3, 30), st.integers(-3, 30))))
def test_runs_join_to_the_visible_text(text: str, spans: list[tuple[int, int]]) -> None:
    pieces = runs(text, [list(one) for one in spans])
    assert "".join(piece for piece, _, _ in pieces) == visible(text)


def test_runs_mark_exactly_the_given_characters() -> None:
    assert runs("(2S,4R)", [[1, 3], [2, 3], [4, 99]]) == [
        ("(", False, False),
        ("2S", True, False),
        (",", False, False),
        ("4R)", True, False),
    ]
    assert runs("a\u200bb", [[0, 2]]) == [
        ("a", True, False),
        ("\u2039U+200B\u203a", True, True),
        ("b", False, False),
    ]


def test_line_endings_and_plain_chemistry_are_left_alone() -> None:
    assert visible("a\r\nb\tc") == "a\nb\tc"
    assert visible("a\rb") == "a\u2039U+000D\u203ab"
    name = "(2S,3′R)-α,β-di\u2010tert‑butyl″ 5β‑H ≠ →"
    assert visible(name) == name
    assert one_line(" a\n\tb  c ") == "a b c"
