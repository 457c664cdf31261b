"""The substances that a statement names are found by label, part and alias, or not at all."""

from __future__ import annotations

from dossiercheck.model import Evidence, Place, Role
from dossiercheck.relatives import other_label, relatives
from dossiercheck.settings import RegisterEntry
from dossiercheck.substances import Substance

PLACE = Place("a.md", line=1)


def said(text: str, other: str = "") -> Evidence:
    return Evidence("e1", Role.STEREO, text, PLACE, other=other)


def substance(number: int, label: str, text: str = "", role: str = "") -> Substance:
    one = Substance(f"s{number}", label, role=role)
    one.add(said(text) if text else Evidence("e9", Role.SMILES, "CCO", PLACE, label=label), "test")
    return one


def test_the_other_label() -> None:
    assert other_label(said("Impurity B is the enantiomer of DX-101")) == "DX-101"
    assert other_label(said("Impurity B is its enantiomer", "DX-101")) == "DX-101"
    assert other_label(said("single enantiomer")) == ""
    assert other_label(Evidence("e1", Role.SMILES, "CCO", PLACE)) == ""


def test_found_by_label_whatever_its_case() -> None:
    one = substance(1, "Velbrasol")
    two = substance(2, "Impurity B", "Impurity B is the enantiomer of velbrasol")
    assert relatives([one, two], ()) == [{}, {"velbrasol": one}]


def test_found_by_alias_and_by_part() -> None:
    entry = RegisterEntry("Velbrasol", ("VB-0017",), "drug substance", "", "")
    one = substance(1, "Velbrasol", role="drug substance")
    by_code = substance(2, "Impurity B", "Impurity B is the enantiomer of VB-0017")
    by_part = substance(3, "Impurity C", "Impurity C is the enantiomer of the drug substance")
    found = relatives([one, by_code, by_part], (entry,))
    assert found == [{}, {"vb0017": one}, {"drugsubstance": one}]


def test_an_unknown_or_doubtful_label_leads_nowhere() -> None:
    two = substance(2, "Impurity B", "Impurity B is the enantiomer of DX-999")
    assert relatives([substance(1, "Velbrasol"), two], ()) == [{}, {}]
    twice = [substance(1, "DX-101"), substance(3, "DX 101")]
    one = substance(2, "Impurity B", "Impurity B is the enantiomer of DX-101")
    assert relatives([*twice, one], ()) == [{}, {}, {}]
