"""The command `derive`: what it takes, what it says, and how it refuses."""

from __future__ import annotations

import io
import json
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import jsonschema
import pytest
from lxml import html

from dossiercheck import cli
from dossiercheck.report.derived import derived_json, sight_of
from tests.unit.report import sample

Write = Callable[[str, str], Path]
Capture = pytest.CaptureFixture[str]
ALANINE = "C[C@H](N)C(=O)O"  # L-alanine is (2S) (common practice)
INCHI = "InChI=1S/C3H7NO2/c1-2(4)3(5)6/h2H,4H2,1H3,(H,5,6)/t2-/m0/s1"
KEYS = {"kind", "atoms", "descriptor", "certain", "ours", "library", "derivation"}


def lines(capfd: Capture, *arguments: str, status: int = 0) -> list[Any]:
    assert cli.run(["derive", *arguments, "--format", "json"]) == status
    return [json.loads(line) for line in capfd.readouterr().out.splitlines()]


def refused(capfd: Capture, given: str) -> str:
    """The one line on stderr, nothing being on stdout."""
    assert cli.run(["derive", given]) == 2
    out, err = capfd.readouterr()
    assert out == ""
    assert err.count("\n") == 1
    assert err.startswith("dossiercheck: ")
    return err


# --- what it takes -------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("given", "read_as"),
    [
        (ALANINE, "SMILES"),
        (f"{ALANINE} |a:1|", "SMILES"),
        (INCHI, "InChI"),
        ("(2S)-2-aminopropanoic acid", "systematic name"),
    ],
)
def test_one_structure_in_each_notation(capfd: Capture, given: str, read_as: str) -> None:
    (record,) = lines(capfd, given)
    assert record["read_as"] == read_as
    (unit,) = record["units"]
    assert unit.keys() >= KEYS
    assert unit["kind"] == "centre"
    assert unit["atoms"] == [2]
    assert (unit["descriptor"], unit["certain"], unit["ours"], unit["library"]) == (
        "S",
        True,
        "S",
        "S",
    )
    ranks, *comparisons, _, last = unit["derivation"]
    assert [one["rank"] for one in ranks["ranks"]] == ["a", "b", "c", "d"]
    assert [one["label"] for one in ranks["ranks"]] == ["N", "C", "C", "H"]
    rules = [one["rule"] for one in comparisons]
    assert rules == ["1a", "1a", "1a"]
    assert [one["sphere"] for one in comparisons] == [1, 2, 1]
    numbers = [entry["value"] for entry in comparisons[1]["higher"]["set"]]
    assert numbers == [8, 8, 8]
    assert [entry["duplicate"] for entry in comparisons[1]["higher"]["set"]].count(True) == 1
    assert last["text"].endswith(": S.")


def test_atoms_are_the_inputs_own(capfd: Capture) -> None:
    """Hydrogens written out count in a SMILES; an InChI has numbers of its own."""
    (record,) = lines(capfd, "[H]OC(=O)[C@]([H])(N)C")
    assert [unit["atoms"] for unit in record["units"]] == [[5]]
    (record,) = lines(capfd, INCHI)
    amine = next(one for one in record["units"][0]["derivation"][0]["ranks"] if one["rank"] == "a")
    assert (amine["label"], amine["ligand"]) == ("N", 4)


def test_each_kind_of_unit(capfd: Capture) -> None:
    (record,) = lines(capfd, "C/C=C\\[C@H](C)O")
    kinds = {unit["kind"]: unit["descriptor"] for unit in record["units"]}
    assert kinds == {"centre": kinds["centre"], "double bond": "Z"}
    assert kinds["centre"] in ("R", "S")
    # An allene: the library gives no letter, so nothing is certain, and both are shown.
    (record,) = lines(capfd, "CC=[C@]=CC")
    (unit,) = record["units"]
    assert (unit["kind"], unit["descriptor"], unit["certain"]) == ("axis", None, False)
    assert unit["ours"] in ("M", "P")
    assert unit["library"] is None
    assert "no descriptor" in unit["note"]
    assert unit["derivation"]


def test_what_has_no_configuration_is_told(capfd: Capture) -> None:
    (record,) = lines(capfd, "CC(N)C(=O)O")
    assert record["units"] == []
    assert record["unspecified"] == [{"kind": "centre", "atoms": [2]}]
    cli.run(["derive", "CC(N)C(=O)O"])
    assert "Stereogenic, but without a configuration: centre C2." in capfd.readouterr().out


def test_a_configuration_that_nobody_stated_is_not_certain(capfd: Capture) -> None:
    (record,) = lines(capfd, "phenylalanine")
    (unit,) = record["units"]
    assert (unit["descriptor"], unit["certain"]) == (None, False)
    assert "states no configuration" in unit["note"]


def test_a_racemate_is_called_one(capfd: Capture) -> None:
    (record,) = lines(capfd, "rac-(2R)-2-bromobutane")
    assert "racemic" in " ".join(record["notes"])


# --- files ---------------------------------------------------------------------------------


def test_a_file_of_tables_gives_a_line_a_record(write: Write, capfd: Capture) -> None:
    one = sample.molfile(sample.CARBINOL, "first")
    path = write("a.sdf", f"{one}\n$$$$\nbroken\n\n\n  9  9\nM  END\n$$$$\n{one}\n$$$$\n")
    first, second, third = lines(capfd, str(path), status=3)
    assert (first["record"], first["input"], first["read_as"]) == (1, "first", "connection table")
    (unit,) = first["units"]
    assert unit["atoms"] == [2]
    assert unit["descriptor"] == "S"
    assert second["record"] == 2
    assert second["units"] is None
    assert second["unread"]
    assert third["units"] == first["units"]


def test_a_single_molfile(write: Write, capfd: Capture) -> None:
    path = write("a.mol", sample.molfile(sample.BASE, "base"))
    (record,) = lines(capfd, str(path))
    letters = {tuple(unit["atoms"]): unit["descriptor"] for unit in record["units"]}
    assert letters == {(5,): "S", (16,): "S", (18,): "R", (26,): "R", (24, 25): "E"}


def test_lines_of_a_file(write: Write, capfd: Capture) -> None:
    path = write("a.smi", f"{ALANINE} one\n\nC[C@@H](N)C(=O)O\ttwo\n")
    assert [(r["input"], r["units"][0]["descriptor"]) for r in lines(capfd, str(path))] == [
        ("one", "S"),
        ("two", "R"),
    ]
    path = write("a.txt", f"(2R)-butan-2-ol\r\n{ALANINE} with a title\r\nno such compound\r\n")
    first, second, third = lines(capfd, str(path), status=3)
    assert first["units"][0]["descriptor"] == "R"
    assert (second["read_as"], second["input"]) == ("SMILES", "with a title")
    assert third["units"] is None
    assert cli.run(["derive", str(path)]) == 3
    out, err = capfd.readouterr()
    assert "Not read: neither a SMILES" in out
    assert err == "dossiercheck: 1 of 3 records could not be read\n"


def test_stdin(write: Write, capfd: Capture, monkeypatch: pytest.MonkeyPatch) -> None:
    for text in (f"{ALANINE}\n", sample.molfile(sample.CARBINOL, "x")):
        stand_in = io.TextIOWrapper(io.BytesIO(text.encode()))
        monkeypatch.setattr(sys, "stdin", stand_in)
        (record,) = lines(capfd, "-")
        assert record["units"][0]["descriptor"] == "S"


# --- what it says --------------------------------------------------------------------------


def test_text_fits_a_terminal(capfd: Capture) -> None:
    assert cli.run(["derive", sample.NAME]) == 0
    out = capfd.readouterr().out
    assert all(len(line) <= 80 for line in out.splitlines())
    assert "Rule 1a" in out
    assert "the descriptor is certain" in out
    assert "drawing shown" not in out  # there is none
    assert out.count("centre at".capitalize()) == 4


def test_the_example_in_the_readme_is_what_is_printed(capfd: Capture) -> None:
    readme = (Path(__file__).parents[2] / "README.md").read_text(encoding="utf-8")
    given, shown = readme.split('$ dossiercheck derive "', 1)[1].split('"\n', 1)
    assert cli.run(["derive", given]) == 0
    assert capfd.readouterr().out == shown.split("```", 1)[0]


def test_the_page_stands_alone(capfd: Capture) -> None:
    assert cli.run(["derive", sample.SMILES, "--format", "html"]) == 0
    made = html.fromstring(capfd.readouterr().out.encode())
    assert len(made.findall(".//svg")) == 5
    assert made.findall(".//script") == []
    assert made.xpath("//*[@src or starts-with(@href, 'http')]") == []
    policy = made.xpath("//meta[@http-equiv='Content-Security-Policy']/@content")
    assert "default-src 'none'" in policy[0]
    assert "In the drawing shown," in made.text_content()


def test_hostile_text_stays_text(capfd: Capture) -> None:
    assert cli.run(["derive", f"{ALANINE} |$<script>;;;;;$|", "--format", "html"]) == 0
    made = html.fromstring(capfd.readouterr().out.encode())
    assert made.findall(".//script") == []


def test_the_same_input_gives_the_same_bytes(capfd: Capture) -> None:
    for form in ("text", "json", "html"):
        cli.run(["derive", sample.SMILES, "--format", form])
        first = capfd.readouterr().out
        cli.run(["derive", sample.SMILES, "--format", form])
        assert capfd.readouterr().out == first


def test_derivations_of_a_finding_keep_to_the_schema() -> None:
    path = Path(__file__).parents[2] / "templates" / "findings.schema.json"
    schema = json.loads(path.read_text())
    made = derived_json(sample.derived(17))
    part = {"$ref": "#/$defs/derivation", "$defs": schema["$defs"]}
    jsonschema.validate(made, part)
    with pytest.raises(jsonschema.ValidationError):
        jsonschema.validate({**made, "steps": None}, part)
    assert sight_of(json.loads(json.dumps(made["sight"]))) == sample.derived(17).sight


# --- refusals ------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("given", "says"),
    [
        ("no such compound", "neither a SMILES (it has spaces) nor a systematic name"),
        ("C[C@H](N", "neither a SMILES ("),
        ("QNAYBMKLOCPYGJ-REOHGIALSA-N", "InChIKey is a hash"),
        ("InChI=1S/nothing", "(InChI) cannot be read"),
        ("C*", "more than one molecule"),
        ("{tmp}/none.sdf", "no such file"),
        ("{tmp}", "is a folder"),
        ("{tmp}/a.pdf", "files that are read end in .mol, .sdf"),
        ("{tmp}/empty.smi", "there is nothing in it"),
        ("{tmp}/binary.smi", "NUL bytes"),
        ("{tmp}/bad.mol", "cannot be read"),
    ],
)
def test_what_cannot_be_read_says_why(
    tmp_path: Path, capfd: Capture, given: str, says: str
) -> None:
    (tmp_path / "a.pdf").write_bytes(b"%PDF-1.7\n")
    (tmp_path / "empty.smi").write_text("\n \n")
    (tmp_path / "binary.smi").write_bytes(b"C\0C\0\0\0N")
    (tmp_path / "bad.mol").write_text("bad\n\n\n  2  1  0  0  0  0\nM  END\n")
    assert says in refused(capfd, given.format(tmp=tmp_path))


def test_a_mistyped_format_is_answered(capfd: Capture) -> None:
    assert cli.run(["derive", ALANINE, "--format", "jsn"]) == 2
    assert "did you mean 'json'?" in capfd.readouterr().err
