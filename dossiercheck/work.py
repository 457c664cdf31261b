"""The two heavy stages, in this process or spread over several.

Work is cut into pieces of fixed size and the results are put back in order, so that the outcome
does not depend on the number of processes.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from multiprocessing import get_context
from types import TracebackType
from typing import Any, Self, TypeVar

from pebble import ProcessExpired, ProcessFuture, ProcessPool

from dossiercheck.concordance import build_case, table
from dossiercheck.interpretation import Reading, interpret
from dossiercheck.model import Evidence, Finding, Grade, Role, SubstanceEntry, Unread
from dossiercheck.names.parser import NameParser
from dossiercheck.rulebook import Rulebook
from dossiercheck.stereo.drawing import drawing_of
from dossiercheck.substances import Substance

PIECE = 200

_In = TypeVar("_In", Evidence, Substance)
_Out = TypeVar("_Out")


@dataclass(frozen=True, slots=True)
class Judged:
    """One substance, judged: plain data, fit to travel between processes."""

    entry: SubstanceEntry
    findings: tuple[Finding, ...]
    unread: tuple[Unread, ...]


class Workers:
    """Interprets and judges; a context manager that ends its processes."""

    def __init__(
        self,
        jobs: int,
        rulebook: Rulebook,
        progress: Callable[[str, int, int], None] | None = None,
    ) -> None:
        self._progress = progress
        self._pool = (
            ProcessPool(
                max_workers=jobs,
                context=get_context("spawn"),
                initializer=_begin,
                initargs=(rulebook,),
            )
            if jobs > 1
            else None
        )
        if self._pool is None:
            _begin(rulebook)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        if self._pool:
            if error is None:
                self._pool.close()  # type: ignore[no-untyped-call]
            else:
                self._pool.stop()  # type: ignore[no-untyped-call]
            self._pool.join()
        else:
            _end()

    def interpret(self, evidence: Sequence[Evidence]) -> list[Reading]:
        """Understand every evidence, in order."""
        return self._spread("understanding", _interpret, evidence, _lost_evidence)

    def judge(self, substances: Sequence[Substance]) -> list[Judged]:
        """Build each substance's concordance and apply the rules, in order."""
        return self._spread("judging", _judge, substances, _lost_substance)

    def _spread(
        self,
        stage: str,
        function: Callable[[Sequence[_In]], list[_Out]],
        things: Sequence[_In],
        lost: Callable[[_In], _Out],
    ) -> list[_Out]:
        pieces = [things[start : start + PIECE] for start in range(0, len(things), PIECE)]
        results: list[_Out] = []
        waiting = [self._start(function, piece) for piece in pieces] if self._pool else []
        for number, piece in enumerate(pieces):
            if waiting:
                results += self._collect(waiting[number], function, piece, lost)
            else:
                results += function(piece)
            if self._progress:
                self._progress(stage, min((number + 1) * PIECE, len(things)), len(things))
        return results

    def _start(
        self, function: Callable[[Sequence[_In]], list[_Out]], piece: Sequence[_In]
    ) -> ProcessFuture[Any]:
        assert self._pool is not None
        return self._pool.schedule(function, args=(piece,))

    def _collect(
        self,
        future: ProcessFuture[Any],
        function: Callable[[Sequence[_In]], list[_Out]],
        piece: Sequence[_In],
        lost: Callable[[_In], _Out],
    ) -> list[_Out]:
        """A piece's results; where its process died, one thing at a time, so that only the one
        that kills it is lost, and is listed as lost."""
        try:
            return list(future.result())
        except ProcessExpired:
            if len(piece) == 1:
                return [lost(piece[0])]
        alone = [(self._start(function, [thing]), thing) for thing in piece]
        return [
            result
            for started, thing in alone
            for result in self._collect(started, function, [thing], lost)
        ]


class _State:
    """What one process keeps between pieces."""

    parser: NameParser | None = None
    rulebook: Rulebook | None = None


def _begin(rulebook: Rulebook) -> None:
    _State.parser = NameParser()
    _State.rulebook = rulebook


def _end() -> None:
    if _State.parser:
        _State.parser.close()
    _State.parser = _State.rulebook = None


def _interpret(evidence: Sequence[Evidence]) -> list[Reading]:
    assert _State.parser is not None
    return interpret(evidence, _State.parser)


def _judge(substances: Sequence[Substance]) -> list[Judged]:
    return [_judge_safely(substance) for substance in substances]


def _judge_safely(substance: Substance) -> Judged:
    """A substance that the program stumbles over is listed as unread; the others go on."""
    try:
        return _judge_one(substance)
    except Exception as error:
        said = f"judging stopped with {type(error).__name__}: {error}".splitlines()[0]
        return _not_judged(substance, "judging-failed", said)


def _judge_one(substance: Substance) -> Judged:
    assert _State.parser is not None
    assert _State.rulebook is not None
    case = build_case(substance, _State.parser)
    outcome = _State.rulebook.judge(case, case.kinds)
    drawn = any(finding.grade is not Grade.REMARK for finding in outcome.findings)
    entry = SubstanceEntry(
        substance.id,
        substance.label,
        substance.evidence,
        substance.attribution,
        table(case),
        drawing_of(case.structure) if drawn and case.structure else None,
    )
    doubts = tuple(
        Unread(
            reading.evidence.place,
            "descriptors-undetermined",
            f"its descriptors could not be computed: {reading.structure.doubt}",
            reading.evidence.text if reading.evidence.role is not Role.MOLFILE else "",
        )
        for reading in substance.readings
        if reading.structure is not None and reading.structure.doubt
    )
    return Judged(entry, outcome.findings, (*outcome.unread, *doubts))


def _lost_evidence(said: Evidence) -> Reading:
    return Reading(said, reason="worker-died", refusal="the process that read it died on it")


def _lost_substance(substance: Substance) -> Judged:
    return _not_judged(substance, "worker-died", "the process that judged it died on it")


def _not_judged(substance: Substance, reason: str, detail: str) -> Judged:
    said = substance.evidence
    entry = SubstanceEntry(substance.id, substance.label, said, substance.attribution, None)
    return Judged(entry, (), (Unread(said[0].place, reason, f"{substance.label}: {detail}"),))
