"""The rule catalogue: what a rule file may say, how a mistake is pointed at, how rules judge."""

from __future__ import annotations

import pickle
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from types import SimpleNamespace
from typing import Any

import pytest

from dossiercheck import assets, rulebook, rulefile, rulepage
from dossiercheck.checks import registry
from dossiercheck.checks.registry import Observation
from dossiercheck.model import Exhibit, Grade, Place
from dossiercheck.rulefile import RuleError
from dossiercheck.settings import RuleOverride, Settings, SettingsError

Write = Callable[[str, str], Path]
PLACE = Place("m3/substance.txt", line=4)

GOOD = """\
title = "Two heads"
grade = "major"
why = \"\"\"
A coin with two heads
is no coin.
\"\"\"
basis = "common practice"
check = "toy_coin"
needs = ["name"]
message = "The coin shows {shows} twice."
remedy = "Take another coin."

[params]
tolerance = 1.5
digits = 2

[[example]]
expect = "finding"
name = "ethanol"

[[example]]
expect = "nothing"
note = "A sound coin."
name = "methanol"
smiles = "CO"
"""


@pytest.fixture(autouse=True)
def toy_checks(own_checks: dict[str, registry.Check]) -> None:
    """A check that sees what the test's case tells it to see, and one that breaks down."""

    @registry.check(
        needs=("name",), fields=("shows", "side"), params={"tolerance": float, "digits": int}
    )
    def toy_coin(case: Any, params: Any) -> Iterator[Observation]:
        for shows in case.shows:
            exhibit = Exhibit("e1", "name", "ethanol", PLACE)
            yield Observation({"shows": shows, "side": "x"}, (exhibit,), "u1", "2", ("sphere 1",))

    @registry.check(needs=("name",), fields=("shows",))
    def toy_broken(case: Any, params: Any) -> Iterator[Observation]:
        yield Observation({"shows": "first"}, ())
        raise ZeroDivisionError("no such coin")


@dataclass
class ToyCase:
    """As much of a case as the rulebook looks at."""

    shows: tuple[str, ...] = ()

    @property
    def substance(self) -> Any:
        return SimpleNamespace(id="s1", evidence=[SimpleNamespace(place=PLACE)])


def read(write: Write, text: str, name: str = "name/two-heads") -> rulefile.Rule:
    path = write(f"rules/{name}.toml", text)
    return rulefile.read(path, path.parents[name.count("/")])


def without(key: str) -> str:
    assert f"\n{key} = " in f"\n{GOOD}"
    lines = GOOD.split("\n")
    return "\n".join(line for line in lines if not line.startswith(f"{key} = "))


# --- one rule file ------------------------------------------------------------------------


def test_a_good_rule(write: Write) -> None:
    rule = read(write, GOOD)
    assert rule.id == "name/two-heads"
    assert rule.grade is Grade.MAJOR
    assert rule.why == "A coin with two heads is no coin."
    assert rule.params == {"tolerance": 1.5, "digits": 2}
    assert [example.finding for example in rule.examples] == [True, False]
    assert rule.examples[1].records == ({"name": "methanol", "smiles": "CO"},)
    assert rule.examples[1].note == "A sound coin."


def test_a_whole_number_will_do_for_a_decimal_one(write: Write) -> None:
    rule = read(write, GOOD.replace("tolerance = 1.5", "tolerance = 1"))
    assert rule.params["tolerance"] == 1.0
    assert isinstance(rule.params["tolerance"], float)


def test_an_example_may_have_evidence_elsewhere(write: Write) -> None:
    more = '\n[[example.elsewhere]]\nlabel = "A"\nsmiles = "C"\n'
    rule = read(write, GOOD + more)
    assert rule.examples[1].records[1] == {"label": "A", "smiles": "C"}


MISTAKES = [
    ("titel", GOOD.replace("title =", "titel ="), 1, "unknown key 'titel'; did you mean 'title'?"),
    ("grade", GOOD.replace('"major"', '"majr"'), 2, "'grade' is 'majr'; did you mean 'major'?"),
    ("grade type", GOOD.replace('"major"', "2"), 2, "'grade' must be text in quotes"),
    ("check", GOOD.replace('"toy_coin"', '"toy_coyn"'), 8, "did you mean 'toy_coin'?"),
    ("needs", GOOD.replace('["name"]', '["nam"]'), 9, "'nam' is no kind of evidence; did you mean"),
    ("needs none", GOOD.replace('["name"]', "[]"), 9, "'needs' names no kind of evidence"),
    ("needs type", GOOD.replace('["name"]', '"name"'), 9, "'needs' must be a list of texts"),
    (
        "field",
        GOOD.replace("{shows}", "{show}"),
        10,
        "uses {show}, which the check 'toy_coin' does not offer; did you mean 'shows'?",
    ),
    ("attribute", GOOD.replace("{shows}", "{shows.__class__}"), 10, "does not offer"),
    ("format", GOOD.replace("{shows}", "{shows:>9}"), 10, "does not offer"),
    ("conversion", GOOD.replace("{shows}", "{shows!r}"), 10, "does not offer"),
    ("nameless", GOOD.replace("{shows}", "{}"), 10, "does not offer"),
    ("brace", GOOD.replace("{shows}", "{shows"), 10, "'message' is no template"),
    ("blank", GOOD.replace('"Take another coin."', '"  "'), 11, "'remedy' is blank"),
    ("param", GOOD.replace("digits", "digit"), 15, "no parameter 'digit'; did you mean 'digits'?"),
    ("param type", GOOD.replace("digits = 2", 'digits = "2"'), 15, "must be of type int"),
    ("param bool", GOOD.replace("digits = 2", "digits = true"), 15, "must be of type int"),
    ("param gone", GOOD.replace("digits = 2\n", ""), 13, "needs the parameter 'digits'"),
    ("example", GOOD[: GOOD.index("[[example]]")], 1, "at least one [[example]]"),
    (
        "one table",
        GOOD[: GOOD.rindex("[[e")].replace("[[example]]", "[example]"),
        17,
        "[[example]]",
    ),
    ("expect", GOOD.replace('expect = "nothing"', ""), 21, "the key 'expect' is missing"),
    ("expect word", GOOD.replace('"nothing"', '"nought"'), 22, "'expect' is 'nought'"),
    ("example key", GOOD.replace("smiles =", "smile ="), 25, "did you mean 'smiles'?"),
    ("example value", GOOD.replace('"CO"', "5"), 25, "'smiles' must be text in quotes"),
    ("no evidence", GOOD.replace('name = "ethanol"', ""), 17, "an example gives evidence"),
    ("toml", GOOD.replace('"Two heads"', '"Two heads'), 1, "not TOML"),
    *[
        (f"no {key}", without(key), 1, f"the key '{key}' is missing")
        for key in ("title", "grade", "basis", "check", "needs", "message", "remedy")
    ],
]


@pytest.mark.parametrize(
    ("text", "line", "says"), [m[1:] for m in MISTAKES], ids=[m[0] for m in MISTAKES]
)
def test_a_mistake_is_refused_at_its_line(write: Write, text: str, line: int, says: str) -> None:
    with pytest.raises(RuleError) as caught:
        read(write, text)
    assert says in str(caught.value)
    assert caught.value.line == line
    assert str(caught.value).startswith(f"{caught.value.path}:{line}: ")
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize(
    ("name", "says"),
    [
        ("nome/two-heads", "did you mean 'name'?"),
        ("two-heads", "a rule stands in the folder of its family"),
        ("name/coins/two-heads", "a rule stands in the folder of its family"),
        ("name/Two_Heads", "small letters and digits joined by hyphens"),
    ],
)
def test_a_rule_in_the_wrong_place(write: Write, name: str, says: str) -> None:
    with pytest.raises(RuleError) as caught:
        read(write, GOOD, name)
    assert says in str(caught.value)


def test_a_folder_without_rules_is_a_mistake(tmp_path: Path) -> None:
    with pytest.raises(RuleError, match="holds no rule"):
        list(rulefile.read_folder(tmp_path))
    with pytest.raises(RuleError, match="is not a folder of rules"):
        list(rulefile.read_folder(tmp_path / "none"))


# --- the catalogue ------------------------------------------------------------------------

CATALOGUE = sorted(assets.rules().rglob("*.toml"))


@pytest.mark.parametrize("path", CATALOGUE, ids=[f"{p.parent.name}/{p.stem}" for p in CATALOGUE])
def test_every_rule_of_the_catalogue_loads(path: Path) -> None:
    rule = rulefile.read(path, assets.rules())
    assert any(not example.finding for example in rule.examples)
    assert rule.check == registry.CHECKS[rule.check].name


def test_the_catalogue_uses_every_check() -> None:
    """A check without a rule would never speak; toy checks apart."""
    used = {rule.check for rule in rulebook.load(Settings()).rules}
    assert used == {name for name in registry.CHECKS if not name.startswith("toy_")}


def test_entries_are_what_the_report_prints() -> None:
    book = rulebook.load(Settings())
    entries = book.entries()
    assert [entry.id for entry in entries] == sorted(entry.id for entry in entries)
    assert {entry.id for entry in entries} == {f"{p.parent.name}/{p.stem}" for p in CATALOGUE}
    assert all(entry.off == "" for entry in entries)


def test_the_rulebook_can_travel_to_a_worker() -> None:
    book = rulebook.load(Settings())
    assert pickle.loads(pickle.dumps(book)) == book


# --- the user's own rules and overrides ---------------------------------------------------


def test_a_users_folder_adds_and_replaces(write: Write) -> None:
    own = write("own/name/two-heads.toml", GOOD)
    write("own/name/lost-space.toml", GOOD)
    book = rulebook.load(Settings(), [own.parents[1]])
    by_id = {rule.id: rule for rule in book.rules}
    assert by_id["name/two-heads"].title == "Two heads"
    assert by_id["name/lost-space"].check == "toy_coin"
    assert len(book.rules) == len(CATALOGUE) + 1


def test_overrides_of_grade_params_and_off(write: Write) -> None:
    own = write("own/name/two-heads.toml", GOOD)
    overrides = {
        "name/two-heads": RuleOverride(grade=Grade.REMARK, params={"digits": 5}),
        "name/lost-space": RuleOverride(off="Names are printed one word a line here."),
    }
    book = rulebook.load(Settings(rules=overrides), [own.parents[1]])
    by_id = {rule.id: rule for rule in book.rules}
    assert by_id["name/two-heads"].grade is Grade.REMARK
    assert by_id["name/two-heads"].params == {"tolerance": 1.5, "digits": 5}
    off = next(entry for entry in book.entries() if entry.id == "name/lost-space")
    assert off.off == "Names are printed one word a line here."


@pytest.mark.parametrize(
    ("name", "override", "says"),
    [
        ("name/lost-spice", RuleOverride(line=7), "did you mean 'name/lost-space'?"),
        ("name/two-heads", RuleOverride(params={"digts": 1}, line=7), "no parameter 'digts'"),
        ("name/two-heads", RuleOverride(params={"digits": 1.5}, line=7), "must be of type int"),
    ],
)
def test_a_bad_override_is_refused_at_its_line(
    write: Write, name: str, override: RuleOverride, says: str
) -> None:
    own = write("own/name/two-heads.toml", GOOD)
    settings = Settings(rules={name: override}, path=Path("dossiercheck.toml"))
    with pytest.raises(SettingsError) as caught:
        rulebook.load(settings, [own.parents[1]])
    assert str(caught.value).startswith("dossiercheck.toml:7: ")
    assert says in str(caught.value)


# --- judging ------------------------------------------------------------------------------


def judge(*rules: rulefile.Rule, shows: tuple[str, ...] = (), **more: Any) -> rulebook.Outcome:
    case: Any = ToyCase(shows)
    return rulebook.Rulebook(rules).judge(case, **more)


def test_an_observation_becomes_a_finding(write: Write) -> None:
    rule = read(write, GOOD)
    outcome = judge(rule, shows=("heads {odd}", "tails"))
    assert outcome.unread == ()
    assert [finding.message for finding in outcome.findings] == [
        "The coin shows heads {odd} twice.",
        "The coin shows tails twice.",
    ]
    first = outcome.findings[0]
    assert (first.id, first.rule, first.grade) == ("", "name/two-heads", Grade.MAJOR)
    assert (first.substance, first.unit, first.locant) == ("s1", "u1", "2")
    assert first.remedy == "Take another coin."
    assert first.derivation == ("sphere 1",)
    assert first.exhibits[0].place == PLACE


def test_a_rule_switched_off_is_not_asked(write: Write) -> None:
    rule = replace(read(write, GOOD), off="not here")
    assert judge(rule, shows=("heads",)) == rulebook.Outcome((), ())


@pytest.mark.parametrize(
    ("needs", "kinds", "asked"),
    [
        (("name",), frozenset({"name", "drawing"}), True),
        (("name",), frozenset({"drawing"}), False),
        (("name",), None, True),
        (("statement", "structure"), frozenset({"statement", "notation"}), True),
        (("statement", "structure"), frozenset({"statement", "property"}), False),
    ],
)
def test_a_rule_is_asked_where_its_evidence_is(
    write: Write, needs: tuple[str, ...], kinds: frozenset[str] | None, asked: bool
) -> None:
    rule = replace(read(write, GOOD), needs=needs)
    outcome = judge(rule, shows=("heads",), case_needs=kinds)
    assert bool(outcome.findings) is asked


def test_a_check_that_breaks_down_is_unread_and_stops_nothing(write: Write) -> None:
    broken = replace(read(write, GOOD), id="name/broken", check="toy_broken")
    sound = read(write, GOOD)
    outcome = judge(broken, sound, shows=("heads",))
    assert [finding.rule for finding in outcome.findings] == ["name/broken", "name/two-heads"]
    (unread,) = outcome.unread
    assert unread.reason == "check-failed"
    assert unread.place == PLACE
    for part in ("name/broken", "s1", "toy_broken", "ZeroDivisionError: no such coin"):
        assert part in unread.detail


def test_a_field_that_the_check_forgot_is_a_breakdown(write: Write) -> None:
    rule = replace(read(write, GOOD), check="toy_broken", message="{side}")
    outcome = judge(rule)
    assert outcome.findings == ()
    assert outcome.unread[0].reason == "check-failed"


# --- the catalogue for a reader -----------------------------------------------------------


def test_the_page_of_a_rule(write: Write) -> None:
    page = rulepage.page(read(write, GOOD))
    for part in (
        "name/two-heads",
        "Two heads",
        "A coin with two heads is no coin.",
        "common practice",
        "Take another coin.",
        "digits = 2",
        "A sound coin.",
        "Example 1: gives this finding",
        "Example 2: gives nothing",
        "name: methanol",
    ):
        assert part in page


def test_the_listing_marks_rules_that_are_off(write: Write) -> None:
    rule = read(write, GOOD)
    text = rulepage.listing([rule, replace(rule, id="name/other", off="not here")])
    assert text.splitlines() == [
        "name/two-heads  major     Two heads",
        "name/other      off       Two heads",
    ]
