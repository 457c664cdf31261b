"""The rules in force, and what they say of a case.

The catalogue, the user's own folders of rules and the settings' overrides come together here.
"""

from __future__ import annotations

import posixpath
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

from dossiercheck import assets, rulefile, tomlfile
from dossiercheck.checks import registry
from dossiercheck.model import Finding, Place, RuleEntry, Unread
from dossiercheck.rulefile import Rule
from dossiercheck.sequences import INDEX
from dossiercheck.settings import RuleOverride, Settings, SettingsError

if TYPE_CHECKING:
    from dossiercheck.concordance import Case
    from dossiercheck.dossier import Dossier
    from dossiercheck.lifecycle import Lifecycle


@dataclass(frozen=True, slots=True)
class Outcome:
    """What the rules say of one case. `unread` has an entry for each check that broke down, so
    that a rule which could not be applied never looks like a rule that found nothing."""

    findings: tuple[Finding, ...]
    unread: tuple[Unread, ...]

    def by_substance(self) -> dict[str, list[Finding]]:
        """The findings by the id of their substance."""
        found: dict[str, list[Finding]] = {}
        for finding in self.findings:
            found.setdefault(finding.substance, []).append(finding)
        return found


@dataclass(frozen=True, slots=True)
class Rulebook:
    """The rules in force, in the order of their ids."""

    rules: tuple[Rule, ...]
    # The same few kinds of evidence come again for every substance of a dossier.
    _by_kinds: dict[frozenset[str] | None, tuple[Rule, ...]] = field(
        default_factory=dict, init=False, repr=False, compare=False
    )

    def entries(self) -> tuple[RuleEntry, ...]:
        """The rules as the report prints them."""
        return tuple(
            RuleEntry(rule.id, rule.title, rule.grade, rule.why, rule.basis, rule.remedy, rule.off)
            for rule in self.rules
        )

    def judge(self, case: Case, case_needs: frozenset[str] | None = None) -> Outcome:
        """Apply every rule in force to a case.

        `case_needs` are the kinds of evidence that the case has; a rule that needs others is not
        asked. Findings carry no number yet. Whatever a check raises becomes an unread entry.
        """
        substance = case.substance
        return self._judge(case, case_needs, substance.id, substance.evidence[0].place)

    def judge_submission(self, case: Lifecycle) -> Outcome:
        """Apply the rules that need "sequence"; their findings are of no substance ("")."""
        sequences = case.submission.sequences
        if not sequences:
            return Outcome((), ())
        place = Place(posixpath.join(sequences[0].folder, INDEX))
        return self._judge(case, frozenset({rulefile.SEQUENCE}), "", place)

    def judge_dossier(self, whole: Dossier) -> Outcome:
        """Apply the rules that need "dossier"; each finding is of the substance it names."""
        if not whole.portraits:
            return Outcome((), ())
        place = whole.portraits[0].entry.evidence[0].place
        return self._judge(whole, frozenset({rulefile.DOSSIER}), "", place)

    def _judge(self, case: Any, needs: frozenset[str] | None, about: str, at: Place) -> Outcome:
        findings: list[Finding] = []
        unread: list[Unread] = []
        for rule in self._asked(needs):
            try:
                findings.extend(_findings(rule, case, about))
            except Exception as trouble:
                unread.append(_breakdown(rule, about, at, trouble))
        return Outcome(tuple(findings), tuple(unread))

    def _asked(self, kinds: frozenset[str] | None) -> tuple[Rule, ...]:
        if kinds not in self._by_kinds:
            self._by_kinds[kinds] = tuple(rule for rule in self.rules if rule.applies(kinds))
        return self._by_kinds[kinds]


def load(settings: Settings, folders: Sequence[Path] = ()) -> Rulebook:
    """The catalogue, then the user's folders, then the overrides of the settings.

    A rule in a user's folder replaces the whole rule of the same id. Raises RuleError or, for a
    bad override, SettingsError.
    """
    rules: dict[str, Rule] = {}
    for folder in (assets.rules(), *folders):
        rules |= {rule.id: rule for rule in rulefile.read_folder(folder)}
    for name, override in settings.rules.items():
        where = settings.path or Path("settings")
        if name not in rules:
            hint = tomlfile.suggestion(name, rules)
            raise SettingsError(where, override.line, f"no rule is called '{name}'{hint}")
        rules[name] = _overridden(rules[name], override, where)
    return Rulebook(tuple(rules[name] for name in sorted(rules)))


def _overridden(rule: Rule, override: RuleOverride, where: Path) -> Rule:
    check = registry.CHECKS[rule.check]
    try:
        params = {
            name: rulefile.typed(check, name, given) for name, given in override.params.items()
        }
    except ValueError as trouble:
        raise SettingsError(where, override.line, f"'{rule.id}': {trouble}") from trouble
    return replace(
        rule,
        grade=override.grade or rule.grade,
        params={**rule.params, **params},
        off=override.off,
    )


def _findings(rule: Rule, case: Any, substance: str) -> Iterator[Finding]:
    for seen in registry.CHECKS[rule.check].function(case, rule.params):
        yield Finding(
            id="",
            rule=rule.id,
            grade=rule.grade,
            substance=seen.substance or substance,
            message=rule.message.format(**seen.values),
            remedy=rule.remedy,
            exhibits=seen.exhibits,
            unit=seen.unit,
            locant=seen.locant,
            derivation=seen.derivation,
        )


def _breakdown(rule: Rule, substance: str, place: Place, trouble: Exception) -> Unread:
    about = f"the substance {substance}" if substance else "the dossier as a whole"
    return Unread(
        place=place,
        reason="check-failed",
        detail=(
            f"The rule {rule.id} could not be applied to {about}: its"
            f" check '{rule.check}' stopped with {type(trouble).__name__}: {trouble}"
        ),
    )
