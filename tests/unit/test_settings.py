"""dossiercheck.toml: what it may say, and how a mistake in it is pointed at."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from dossiercheck import settings
from dossiercheck.model import Grade
from dossiercheck.settings import RegisterEntry, SettingsError

Write = Callable[[str, str], Path]

EVERYTHING = """\
fail_on = "major"
jobs = 2
formats = ["json"]

[columns]
"Prod. = code" = "label"
"Bruttoformel" = "formula"

[[substance]]
id = "Compound A"
aliases = ["A", "lot 12"]
role = "drug substance"
smiles = "C[C@H](N)C(=O)O"
name = "(2S)-2-aminopropanoic acid"

[[substance]]
id = "Impurity B"

[rules."name/lost-space"]
grade = "minor"

[rules."drawing/wavy-bond"]
off = true
justification = "Wavy bonds are this house's sign for a racemate."

[rules."identity/mass-differs".params]
digits = 3
"""


def test_every_setting_is_read(write: Write) -> None:
    found = settings.load(write("dossiercheck.toml", EVERYTHING))
    assert found.fail_on is Grade.MAJOR
    assert found.jobs == 2
    assert found.formats == ("json",)
    assert found.columns == {"Prod. = code": "label", "Bruttoformel": "formula"}
    assert found.register == (
        RegisterEntry(
            "Compound A",
            ("A", "lot 12"),
            "drug substance",
            "C[C@H](N)C(=O)O",
            "(2S)-2-aminopropanoic acid",
        ),
        RegisterEntry("Impurity B"),
    )
    assert found.rules["name/lost-space"].grade is Grade.MINOR
    assert found.rules["name/lost-space"].off == ""
    assert found.rules["drawing/wavy-bond"].off.startswith("Wavy bonds")
    assert found.rules["drawing/wavy-bond"].line == 22
    assert found.rules["identity/mass-differs"].params == {"digits": 3}


def test_without_a_file_the_defaults_hold() -> None:
    found = settings.load(None)
    assert found == settings.Settings()
    assert found.fail_on is Grade.MINOR
    assert found.formats == ("html", "json")


def test_an_empty_file_says_nothing(write: Write) -> None:
    path = write("dossiercheck.toml", "")
    assert settings.load(path) == settings.Settings(path=path)


@pytest.mark.parametrize(
    ("text", "line", "says"),
    [
        ('fail_on = "major"\ncolums = 1\n', 2, "unknown key 'colums'; did you mean 'columns'?"),
        ('fail_on = "majr"\n', 1, "'fail_on' is 'majr'; did you mean 'major'?"),
        ("fail_on = 3\n", 1, "'fail_on' must be text in quotes"),
        ("\njobs = 0\n", 2, "'jobs' must be a whole number from 1"),
        ("jobs = true\n", 1, "'jobs' must be a whole number from 1"),
        ('jobs = "two"\n', 1, "'jobs' must be a whole number from 1"),
        ('formats = ["htm"]\n', 1, "unknown format 'htm'; did you mean 'html'?"),
        ('formats = "html"\n', 1, "'formats' must be a list"),
        ("formats = []\n", 1, "'formats' names no format"),
        ("columns = 1\n", 1, "'columns' must be a table"),
        ('[columns]\nA = "name"\nB = "nmae"\n', 3, "'B' is 'nmae'; did you mean 'name'?"),
        ("[columns]\nA = 1\n", 2, "'A' must be text in quotes"),
        ('[substance]\nid = "a"\n', 1, "[[substance]]"),
        ('[[substance]]\nrole = "x"\n', 1, "the key 'id' is missing"),
        ('[[substance]]\nid = "a"\n[[substance]]\nid = " "\n', 4, "'id' is blank"),
        ('[[substance]]\nid = "a"\nalias = ["b"]\n', 3, "did you mean 'aliases'?"),
        ('[[substance]]\nid = "a"\naliases = ["b", 1]\n', 3, "must be a list of texts"),
        ('[[substance]]\nid = "a"\n\n[[substance]]\nid = "a"\n', 5, "declared twice"),
        (
            '[[substance]]\nid = "a"\naliases = ["x"]\n[[substance]]\nid = "b"\naliases = ["x"]\n',
            4,
            "'x' is given to two substances",
        ),
        ('[rules."name/lost-space"]\noff = true\n', 2, "without a 'justification'"),
        ('[rules."name/lost-space"]\njustification = "so"\n', 2, "goes with off = true"),
        ('[rules."name/lost-space"]\noff = "yes"\n', 2, "'off' must be true or false"),
        ('[rules."name/lost-space"]\n\ngrade = "high"\n', 3, "'grade' is 'high'"),
        ('[rules."name/lost-space"]\nparam = 1\n', 2, "did you mean 'params'?"),
        ('[rules."name/lost-space"]\nparams = 1\n', 2, "'params' must be a table"),
        ('rules."name/lost-space" = 1\n', 1, "must be a table"),
        ('[columns]\nA = "name"\nA = "mass"\n', 3, "not TOML"),
        ('fail_on = "major\n', 1, "not TOML"),
    ],
)
def test_a_mistake_is_refused_at_its_line(write: Write, text: str, line: int, says: str) -> None:
    path = write("dossiercheck.toml", text)
    with pytest.raises(SettingsError) as caught:
        settings.load(path)
    assert caught.value.line == line
    assert str(caught.value).startswith(f"{path}:{line}: ")
    assert says in str(caught.value)
    assert "\n" not in str(caught.value)


def test_a_file_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(SettingsError, match=r"none\.toml: cannot be read"):
        settings.load(tmp_path / "none.toml")


def test_a_file_that_is_not_utf8(tmp_path: Path) -> None:
    path = tmp_path / "dossiercheck.toml"
    path.write_bytes(b'fail_on = "major"\n# caf\xe9\n')
    with pytest.raises(SettingsError, match=r":2: is not UTF-8 text"):
        settings.load(path)


def test_lines_inside_a_long_text_are_no_keys(write: Write) -> None:
    text = '[[substance]]\nid = "a"\nname = """\njobs = 1\n[columns]\n"""\nrole = 5\n'
    with pytest.raises(SettingsError, match=r":7: 'role' must be text"):
        settings.load(write("dossiercheck.toml", text))


def test_the_first_folder_given_is_looked_into(write: Write, tmp_path: Path) -> None:
    file = write("loose.sdf", "")
    own = write("one/dossiercheck.toml", "")
    other = write("two/dossiercheck.toml", "")
    empty = tmp_path / "empty"
    empty.mkdir()
    assert settings.find([file, own.parent, other.parent]) == own
    assert settings.find([empty, own.parent]) is None
    assert settings.find([file]) is None
