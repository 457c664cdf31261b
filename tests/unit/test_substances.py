"""Evidence to substances: firmly by label, otherwise only where exactly one thing is said."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import pytest

from dossiercheck.attribution import attribute
from dossiercheck.calling import key_of
from dossiercheck.interpretation import Reading
from dossiercheck.language.glossary import Term
from dossiercheck.model import Evidence, Place, Role
from dossiercheck.settings import RegisterEntry
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.substances import Identity, Substance, identities

THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"
ALLO = "C[C@H](O)[C@H](N)C(=O)O"


def say(number: int, text: str, *, group: str = "", label: str = "") -> Evidence:
    return Evidence(f"e{number}", Role.SMILES, text, Place("a.txt", line=number), group, label)


def survey(substances: Sequence[Substance]) -> list[frozenset[Identity]]:
    return [
        identities([Reading(said, from_smiles(said.text)) for said in one.evidence])
        for one in substances
    ]


def nobody(_: Sequence[Substance]) -> list[frozenset[Identity]]:
    raise AssertionError("everything has a label; nothing is to be surveyed")


@pytest.mark.parametrize(
    ("one", "two", "same"),
    [
        ("Impurity B", "impurity-b", True),
        ("Impurity B", "IMPURITY\u00a0B", True),
        ("ABC-123", "ABC 123", True),
        ("ABC‑123", "abc123", True),
        ("Impurity B", "Impurity C", False),
        ("β-form", "α-form", False),
        ("Lavorin, (+)-", "Lavorin, (-)-", False),
        ("(±)-Lavorin", "(+)-Lavorin", False),
        ("(−)-Lavorin", "( - )-lavorin", True),
        ("(+/-)-Lavorin", "(±)-Lavorin", True),
        ("Lavorin (B)", "Lavorin-B", True),
        ("Imp. B", "Impurity B", True),
        ("specified impurity B", "Impurity B", True),
        ("Int-3", "Intermediate 3", True),
        ("Imperator B", "Impurity B", False),
    ],
)
def test_what_makes_two_labels_the_same(one: str, two: str, same: bool) -> None:
    assert (key_of(one) == key_of(two)) is same


def test_the_same_label_is_one_substance_however_it_is_written() -> None:
    said = [
        say(1, THREONINE, group="a", label="Impurity B"),
        say(2, ALLO, group="b", label="impurity-B"),
        say(3, THREONINE, group="c", label="Impurity C"),
    ]
    substances, unread = attribute(said, (), nobody)
    assert [(s.id, s.label, [e.id for e in s.evidence]) for s in substances] == [
        ("s1", "Impurity B", ["e1", "e2"]),
        ("s2", "Impurity C", ["e3"]),
    ]
    assert unread == []
    assert substances[0].attribution["e1"] == "firm: called “Impurity B”"


def test_a_label_speaks_for_its_whole_group() -> None:
    said = [say(1, THREONINE, group="a"), say(2, THREONINE, group="a", label="X")]
    (substance,), _ = attribute(said, (), nobody)
    assert "stands together with" in substance.attribution["e1"]


def test_the_register_makes_aliases_one_substance() -> None:
    register = (RegisterEntry("Drug", aliases=("DRG-1", "drug substance"), role="drug substance"),)
    said = [
        say(1, THREONINE, group="a", label="DRG 1"),
        say(2, THREONINE, group="b", label="Drug Substance"),
    ]
    (substance,), _ = attribute(said, register, nobody)
    assert (substance.label, substance.role) == ("Drug", "drug substance")
    assert "in the register “Drug”" in substance.attribution["e1"]


def test_a_lone_structure_joins_the_one_substance_that_it_is() -> None:
    said = [
        say(1, THREONINE, group="a", label="X"),
        say(2, ALLO, group="b", label="Y"),
        say(3, "OC(=O)[C@@H](N)[C@@H](C)O"),
    ]
    substances, unread = attribute(said, (), survey)
    assert [[e.id for e in s.evidence] for s in substances] == [["e1", "e3"], ["e2"]]
    assert unread == []


def test_a_lone_structure_that_contradicts_is_nobodys() -> None:
    # It may be a misprint of X or the name of something else: no alarm, but listed.
    said = [say(1, THREONINE, group="a", label="X"), say(2, ALLO)]
    (substance,), (unread,) = attribute(said, (), survey)
    assert [e.id for e in substance.evidence] == ["e1"]
    assert unread.reason == "not-attributed"
    assert unread.text == ALLO
    assert unread.place.line == 2
    assert "“X”" in unread.detail


def test_a_lone_structure_of_another_constitution_stands_for_itself() -> None:
    said = [say(1, THREONINE, group="a", label="X"), say(2, "CCO")]
    substances, unread = attribute(said, (), survey)
    assert [s.label for s in substances] == ["X", "CCO"]
    assert unread == []


def test_a_record_without_a_label_is_a_substance_of_its_own() -> None:
    # In a record the pieces stand together, so that they can be held against each other.
    said = [
        say(1, THREONINE, group="a", label="X"),
        say(2, THREONINE, group="b"),
        say(3, ALLO, group="b"),
    ]
    substances, unread = attribute(said, (), survey)
    assert [[e.id for e in s.evidence] for s in substances] == [["e1"], ["e2", "e3"]]
    assert unread == []


def test_nothing_is_lost_and_the_order_is_the_dossiers() -> None:
    said = [
        say(1, "CCO"),
        say(2, THREONINE, group="a", label="X"),
        say(3, "CCO", group="b", label="Y"),
        say(4, ALLO),
        say(5, THREONINE),
    ]
    substances, unread = attribute(said, (), survey)
    kept = [e.id for s in substances for e in s.evidence] + [f"e{u.place.line}" for u in unread]
    assert sorted(kept) == ["e1", "e2", "e3", "e4", "e5"]
    assert [s.id for s in substances] == [f"s{n}" for n in range(1, len(substances) + 1)]
    firsts = [int(s.evidence[0].id[1:]) for s in substances]
    assert firsts == sorted(firsts)


# --- where evidence stands ------------------------------------------------------------------


def at(
    number: int,
    text: str,
    section: str,
    *,
    source: str = "a.txt",
    role: Role = Role.SMILES,
    **more: object,
) -> Evidence:
    place = Place(source, section=section, line=number)
    return Evidence(f"e{number}", role, text, place, **more)  # type: ignore[arg-type]


def held(substances: Sequence[Substance]) -> dict[str, list[str]]:
    return {one.label: [said.id for said in one.evidence] for one in substances}


def test_structure_without_a_label_in_the_section_on_structure_is_the_drug_substances() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, ALLO, "3.2.S.1.2", group="b"),
        at(3, ALLO, "3.2.S.3.2", group="c", label="Impurity B"),
    ]
    substances, unread = attribute(said, (), survey)
    # It is exactly Impurity B, and stands where the drug substance is drawn: that has to be said.
    assert held(substances) == {"Dorvaline": ["e1"], "Impurity B": ["e2", "e3"]}
    assert unread == []
    substances, _ = attribute(said[:2], (), survey)
    assert held(substances) == {"Dorvaline": ["e1", "e2"]}
    assert substances[0].attribution["e2"].startswith("firm: without a label; stands in 3.2.S.1")


def test_a_name_in_running_text_there_is_only_weakly_the_drug_substances() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, ALLO, "3.2.S.1.2", role=Role.NAME),
    ]
    (substance,), unread = attribute(said, (), survey)
    assert substance.weak == {"e2"}
    assert substance.attribution["e2"].startswith("weak: ")
    assert unread == []


def test_a_name_that_a_sentence_gives_to_a_relative_is_not_the_drug_substances() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, ALLO, "3.2.S.1.2", role=Role.NAME, apart=True),
    ]
    (substance,), (unread,) = attribute(said, (), survey)
    assert held([substance]) == {"Dorvaline": ["e1"]}
    assert unread.reason == "not-attributed"


def test_another_skeleton_is_another_substance_wherever_it_stands() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, "C[C@@H](O)C(=O)O", "3.2.S.1.2", group="b"),
    ]
    assert len(attribute(said, (), survey)[0]) == 2


def test_a_salt_without_a_label_is_a_form_of_the_drug_substance() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, f"{THREONINE}.Cl", "3.2.S.1.2", group="b"),
    ]
    (substance,), _ = attribute(said, (), survey)
    assert substance.attribution["e2"].endswith("is a form of it")


def test_two_substances_named_in_a_section_leave_it_open() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, "CCO", "3.2.S.1.1", group="b", label="Ramoxane"),
        at(3, "C4H9NO3", "3.2.S.1.3", group="c", role=Role.FORMULA),
    ]

    def surveyed(substances: Sequence[Substance]) -> list[frozenset[Identity]]:
        return [
            identities(
                [Reading(e, from_smiles(e.text)) for e in one.evidence if e.role is Role.SMILES]
            )
            for one in substances
        ]

    assert len(attribute(said, (), surveyed)[0]) == 3
    assert held(attribute([said[0], said[2]], (), surveyed)[0]) == {"Dorvaline": ["e1", "e3"]}


def test_a_salt_and_its_base_are_named_as_one_drug_substance() -> None:
    said = [
        at(1, THREONINE, "3.2.S.1.1", group="a", label="Dorvaline"),
        at(2, f"{THREONINE}.Cl", "3.2.S.1.1", group="b", label="Dorvaline hydrochloride"),
        at(3, "C4H10ClNO3", "3.2.P.1", group="c", role=Role.FORMULA, label="the drug substance"),
    ]
    substances, _ = attribute(said, (), nobody)
    assert held(substances) == {"Dorvaline": ["e1"], "Dorvaline hydrochloride": ["e2", "e3"]}
    assert substances[1].role == "drug substance"
    assert substances[1].inferred == "the only substance named in 3.2.S.1.1 and 3.2.S.1.2"


def test_a_heading_speaks_for_a_name_below_it_but_weakly_where_it_contradicts() -> None:
    said = [
        at(1, THREONINE, "3.2.S.3.2", group="a", label="Impurity A"),
        at(2, ALLO, "3.2.S.3.2", role=Role.NAME, under="Impurity A"),
        at(3, THREONINE, "3.2.S.3.2", role=Role.NAME, under="Impurity A"),
    ]
    (substance,), _ = attribute(said, (), survey)
    assert substance.weak == {"e2"}


# --- definitions ------------------------------------------------------------------------------


def test_a_definition_brings_two_labels_together() -> None:
    said = [
        say(1, THREONINE, group="a", label="Dorvaline"),
        say(2, ALLO, group="b", label="DX-101"),
    ]
    term = Term("Dorvaline", "DX-101", "is defined as", Place("a.txt"))
    (substance,), _ = attribute(said, (), survey, [term])
    assert "which is defined as “Dorvaline”" in substance.attribution["e2"]


def test_a_definition_is_not_followed_to_another_skeleton() -> None:
    said = [
        say(1, THREONINE, group="a", label="Dorvaline"),
        say(2, "CCO", group="b", label="DX-101"),
    ]
    term = Term("Dorvaline", "DX-101", "is defined as", Place("a.txt"))
    substances, (unread,) = attribute(said, (), survey, [term])
    assert len(substances) == 2
    assert unread.reason == "label-not-followed"


def test_a_bracket_does_not_make_two_stereoisomers_one() -> None:
    # "Impurity B (DX-101)" may say that B is an impurity of DX-101.
    said = [
        say(1, THREONINE, group="a", label="DX-101"),
        say(2, ALLO, group="b", label="Impurity B"),
    ]
    term = Term("Impurity B", "DX-101", "stands in brackets behind", Place("a.txt"), plain=False)
    substances, (unread,) = attribute(said, (), survey, [term])
    assert len(substances) == 2
    assert unread.reason == "label-not-followed"


# --- labels of no usual form ------------------------------------------------------------------


def test_words_beside_a_name_are_a_label_where_the_dossier_uses_them_as_one() -> None:
    said = [
        say(1, THREONINE, group="a", label="TA-L"),
        replace(say(2, ALLO), hints=("material TA-L", "TA-L")),
        replace(say(3, THREONINE), hints=("TA-X",)),
    ]
    (substance,), unread = attribute(said, (), survey)
    assert [one.id for one in substance.evidence] == ["e1", "e2", "e3"]
    assert substance.attribution["e2"] == "firm: set beside “TA-L”, which is a label elsewhere"
    assert substance.attribution["e3"].endswith("says exactly what this substance is")
    assert unread == []


def test_a_longer_label_beside_a_name_is_meant_where_the_dossier_uses_it() -> None:
    said = [
        say(1, THREONINE, group="a", label="Impurity A"),
        say(2, ALLO, group="b", label="DS Impurity A"),
        replace(say(3, ALLO, label="Impurity A"), hints=("by DS Impurity A", "DS Impurity A")),
        replace(say(4, THREONINE, label="Impurity A"), hints=("SM Impurity A", "Impurity A")),
    ]
    substances, _ = attribute(said, (), nobody)
    assert held(substances) == {"Impurity A": ["e1", "e4"], "DS Impurity A": ["e2", "e3"]}
    assert substances[1].attribution["e3"] == "firm: called “DS Impurity A”"


@pytest.mark.parametrize(
    ("title", "holder"),
    [
        ("3.2.S.3.1 Optical rotation of dorvaline", "Dorvaline"),
        ("Table 3: Solubility of TA-L in water", "TA-L"),
        ("Dorvaline and TA-L", "Rotation"),
        ("Enantiomer of dorvaline", "Rotation"),
        ("Impurities of dorvaline", "Rotation"),
    ],
)
def test_a_title_with_one_known_label_says_of_whom_a_table_speaks(title: str, holder: str) -> None:
    rotation = Evidence("e3", Role.ROTATION, "−21°", Place("a.md", row=2), "row", under=title)
    said = [
        say(1, THREONINE, group="a", label="Dorvaline"),
        say(2, ALLO, group="b", label="TA-L"),
        rotation,
    ]

    def surveyed(substances: Sequence[Substance]) -> list[frozenset[Identity]]:
        return [
            survey([one])[0] if one.evidence[0] is not rotation else frozenset()
            for one in substances
        ]

    substances, _ = attribute(said, (), surveyed)
    found = next(one for one in substances if any(e.id == "e3" for e in one.evidence))
    assert (found.label if len(found.evidence) > 1 else "Rotation") == holder
