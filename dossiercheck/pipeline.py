"""The line itself: find, read, interpret, attribute, align, judge."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from itertools import chain
from pathlib import Path

from dossiercheck import find
from dossiercheck.attribution import attribute
from dossiercheck.dossier import Portrait, dossier
from dossiercheck.language import gather
from dossiercheck.lifecycle import Lifecycle, lifecycle, not_current, sections
from dossiercheck.limits import DEFAULT, Refused
from dossiercheck.method import CAUTION, method
from dossiercheck.model import Evidence, Finding, Item, Place, Review, Source, Unread
from dossiercheck.notes import Notes
from dossiercheck.readers import reader_for
from dossiercheck.relatives import relatives
from dossiercheck.rulebook import Rulebook
from dossiercheck.sequences import itself_and_above, submission
from dossiercheck.settings import Settings
from dossiercheck.shelf import Shelf
from dossiercheck.substances import registered
from dossiercheck.work import Workers

NO_SUBMISSION = lifecycle(submission(()))

Progress = Callable[[str, int, int], None]


def review(
    paths: Sequence[Path],
    settings: Settings,
    rulebook: Rulebook,
    progress: Progress | None = None,
) -> Review:
    """Check the files and folders given. `progress` is told (stage, done, of)."""
    with Shelf() as shelf:
        found = list(find.find(paths, shelf))
        files = [entry for entry in found if isinstance(entry, find.Found)]
        unopened = [entry.place.source for entry in found if isinstance(entry, Unread)]
        cycle = lifecycle(submission(files, unopened))
        items = chain(cycle.unread, _read(_current(found, cycle), progress))
        sources = tuple(entry.source for entry in files)
        return _review(items, sources, settings, rulebook, progress, cycle)


def review_items(items: Iterable[Item], settings: Settings, rulebook: Rulebook) -> Review:
    """Check what was read already; for rule examples and tests."""
    return _review(items, (), settings, rulebook, None)


def _review(
    items: Iterable[Item],
    sources: tuple[Source, ...],
    settings: Settings,
    rulebook: Rulebook,
    progress: Progress | None,
    cycle: Lifecycle = NO_SUBMISSION,
) -> Review:
    noted = Notes(sections(cycle.submission))
    evidence, unread = _gather(noted.over(items), settings, noted.filed)
    whole = rulebook.judge_submission(cycle)
    with Workers(settings.jobs, rulebook, progress) as workers:
        evidence = _settled(evidence, unread, workers)
        substances, unattributed = attribute(
            evidence, settings.register, workers.survey, noted.terms
        )
        judged = workers.judge(substances, relatives(substances, settings.register))
    unread += [*whole.unread, *unattributed, *(u for one in judged for u in one.unread)]
    unread = list(_in_order(sources, unread))
    portraits = [
        Portrait(substance, one.entry, one.identities, one.single, one.reference)
        for substance, one in zip(substances, judged, strict=True)
    ]
    together = rulebook.judge_dossier(dossier(portraits, noted, unread))
    of_each = together.by_substance()
    findings = [(*one.findings, *of_each.get(one.entry.id, ())) for one in judged]
    return Review(
        sources=sources,
        unread=_in_order(sources, [*unread, *together.unread]),
        substances=tuple(one.entry for one in judged),
        findings=tuple(_numbered([*findings, whole.findings])),
        rules=rulebook.entries(),
        method=method(settings),
        caution=CAUTION,
    )


def _current(
    found: Iterable[find.Found | Unread], cycle: Lifecycle
) -> Iterator[find.Found | Unread]:
    """Without what only orders a submission's files, and what later sequences put an end to."""
    left_out = cycle.submission.structure | not_current(cycle)
    for entry in found:
        if isinstance(entry, Unread) or left_out.isdisjoint(itself_and_above(entry.source.path)):
            yield entry


def _read(found: Iterable[find.Found | Unread], progress: Progress | None) -> Iterator[Item]:
    entries = list(found)
    for number, entry in enumerate(entries, 1):
        if progress:
            progress("reading", number, len(entries))
        if isinstance(entry, Unread):
            yield entry
        elif not entry.archive:
            yield from _read_one(entry)


def _read_one(found: find.Found) -> Iterator[Item]:
    source = found.source
    place = Place(source.path)
    if source.size > DEFAULT.source_bytes:
        yield Unread(place, "too-large", f"{source.size} bytes, more than the budget")
        return
    try:
        data = found.read()
        reader = reader_for(source.path, data[:512])
        if reader is None:
            yield Unread(place, "no-reader", f"no reader for files of the kind “{source.format}”")
            return
        count = 0
        for item in reader(source, data):
            count += 1
            yield item
        if not count:
            yield Unread(place, "empty", "nothing was found in the file")
    except Refused as refused:
        yield Unread(place, refused.reason, refused.detail)
    except OSError as error:
        yield Unread(place, "cannot-open", error.strerror or str(error))
    except Exception as error:
        detail = f"the reader stopped: {type(error).__name__}: {error}"
        yield Unread(place, "reader-failed", detail.splitlines()[0])


def _gather(
    items: Iterable[Item], settings: Settings, filed: Mapping[str, str]
) -> tuple[list[Evidence], list[Unread]]:
    """Number the evidence; a place that names no section has that of its leaf, if any."""
    evidence: list[Evidence] = []
    unread: list[Unread] = []
    for entry in chain(gather(items, settings.columns), registered(settings)):
        if isinstance(entry, Unread):
            unread.append(entry)
        else:
            section = entry.place.section or filed.get(entry.place.source)
            place = replace(entry.place, section=section)
            evidence.append(replace(entry, id=f"e{len(evidence) + 1}", place=place))
    return evidence, unread


def _settled(evidence: list[Evidence], unread: list[Unread], workers: Workers) -> list[Evidence]:
    """The evidence with every name's end settled; a name whose end cannot be told is unread."""
    settled = iter(workers.settle([said for said in evidence if said.instead]))
    kept = []
    for said in evidence:
        one = next(settled) if said.instead else said
        if isinstance(one, Unread):
            unread.append(one)
        else:
            kept.append(one)
    return kept


def _in_order(sources: Sequence[Source], unread: Iterable[Unread]) -> tuple[Unread, ...]:
    """By source as the dossier was walked, within a source as it came."""
    order = {source.path: number for number, source in enumerate(sources)}
    return tuple(sorted(unread, key=lambda entry: order.get(entry.place.source, -1)))


def _numbered(groups: Iterable[Sequence[Finding]]) -> Iterator[Finding]:
    """Number the findings, per substance gravest first."""
    number = 0
    for group in groups:
        for finding in sorted(group, key=lambda f: (f.grade.gravity, f.rule)):
            number += 1
            yield replace(finding, id=f"f{number}")
