"""The two heavy stages, in this process or spread over several.

Work is cut into pieces of fixed size and the results are put back in order, so that the outcome
does not depend on the number of processes.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from multiprocessing import get_context
from types import TracebackType
from typing import Any, Self, TypeVar

from pebble import ProcessExpired, ProcessFuture, ProcessPool

from dossiercheck import certainty
from dossiercheck.checks.uncompared import uncompared
from dossiercheck.concordance import build_case, reference_of, table
from dossiercheck.derivations import with_derivations
from dossiercheck.interpretation import Reading, interpret
from dossiercheck.model import Evidence, Finding, Grade, Role, SubstanceEntry, Unread
from dossiercheck.names.joining import choose
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import read_names
from dossiercheck.relatives import Relatives
from dossiercheck.rulebook import Rulebook
from dossiercheck.stereo.alignment import mirror_smiles
from dossiercheck.stereo.drawing import drawing_of
from dossiercheck.stereo.structure import Structure
from dossiercheck.substances import Identity, Substance, identities

PIECE = 100

_In = TypeVar("_In")
_Out = TypeVar("_Out")


@dataclass(frozen=True, slots=True)
class Judged:
    """One substance, judged: plain data, fit to travel between processes. What its structures
    are, and which evidence is the reference, is for the rules on the dossier as a whole."""

    entry: SubstanceEntry
    findings: tuple[Finding, ...]
    unread: tuple[Unread, ...]
    identities: frozenset[Identity] = frozenset()
    single: bool = False
    reference: Evidence | None = None


class Workers:
    """Interprets and judges substances; a context manager that ends its processes.

    What a name or a drawing was understood as lives only while its substance is judged: a
    dossier of forty thousand substances needs no more memory for structures than one of a
    hundred.
    """

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

    def settle(self, names: Sequence[Evidence]) -> list[Evidence | Unread]:
        """How far each name goes where a line end leaves that open, in order."""
        return self._spread("settling", _settle, names, _unsettled)

    def survey(self, substances: Sequence[Substance]) -> list[frozenset[Identity]]:
        """What the structures of each substance are, in order."""
        return self._spread("surveying", _survey, substances, lambda _: frozenset())

    def judge(
        self, substances: Sequence[Substance], relatives: Sequence[Relatives] = ()
    ) -> list[Judged]:
        """Interpret each substance, build its concordance and apply the rules, in order.
        `relatives` are the others that the statements of each one name."""
        asked = list(zip(substances, relatives or [{}] * len(substances), strict=True))
        return self._spread("judging", _judge, asked, _lost)

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


def _readings(substances: Sequence[Substance]) -> list[list[Reading]]:
    """The readings of each substance; all names of the piece go to the parser together."""
    assert _State.parser is not None
    together = iter(interpret([said for one in substances for said in one.evidence], _State.parser))
    return [[next(together) for _ in one.evidence] for one in substances]


def _settle(names: Sequence[Evidence]) -> list[Evidence | Unread]:
    assert _State.parser is not None
    extents = [(name, *name.instead) for name in names]
    read = iter(read_names([one.text for some in extents for one in some], _State.parser))
    settled: list[Evidence | Unread] = []
    for some in extents:
        chosen, doubt = choose([one.text for one in some], [next(read) for _ in some])
        name = some[chosen]
        settled.append(
            Unread(name.place, "undetermined-name", doubt.detail, name.text)
            if doubt
            else replace(name, id=some[0].id, instead=())
        )
    return settled


def _unsettled(name: Evidence) -> Unread:
    return Unread(name.place, "worker-died", "the process that read it died on it", name.text)


def _survey(substances: Sequence[Substance]) -> list[frozenset[Identity]]:
    return [identities(readings) for readings in _readings(substances)]


def _judge(asked: Sequence[tuple[Substance, Relatives]]) -> list[Judged]:
    substances = [one for one, _ in asked]
    others = _references([other for _, some in asked for other in some.values()])
    return [
        _judge_safely(substance, readings, {k: others[one.id] for k, one in some.items()})
        for (substance, some), readings in zip(asked, _readings(substances), strict=True)
    ]


def _references(substances: Sequence[Substance]) -> dict[str, Reading | None]:
    """What each substance is, by its id; read once however often it is named."""
    once = list({one.id: one for one in substances}.values())
    return {
        one.id: reference_of(one, readings)
        for one, readings in zip(once, _readings(once), strict=True)
    }


def _judge_safely(
    substance: Substance, readings: list[Reading], others: Mapping[str, Reading | None]
) -> Judged:
    """A substance that the program stumbles over is listed as unread; the others go on."""
    try:
        known = {key: one for key, one in others.items() if one is not None}
        return _judge_one(substance, readings, known)
    except Exception as error:
        said = f"judging stopped with {type(error).__name__}: {error}".splitlines()[0]
        return _not_judged(substance, "judging-failed", said)


def _judge_one(
    substance: Substance, readings: list[Reading], others: Mapping[str, Reading]
) -> Judged:
    assert _State.parser is not None
    assert _State.rulebook is not None
    case = build_case(substance, readings, _State.parser)
    case.others = others
    outcome = _State.rulebook.judge(case, case.kinds)
    graded = certainty.graded(substance, outcome.findings)
    drawn = any(finding.grade is not Grade.REMARK for finding in graded)
    entry = SubstanceEntry(
        substance.id,
        substance.label,
        tuple(substance.evidence),
        substance.attribution,
        certainty.shown(substance, table(case)),
        drawing_of(case.structure) if drawn and case.structure else None,
        substance.role,
        substance.inferred,
        case.structure.smiles if case.structure and not case.structure.groups else "",
    )
    unread = [entry for reading in readings for entry in _not_understood(reading)]
    unread += uncompared(case)
    findings = with_derivations(case, graded)
    # What agrees with the reference in everything is what the reference is: asked once.
    sure = case.reference is not None and case.reference.evidence.id not in substance.weak
    told = sure and case.structure is not None and not case.structure.groups
    same = {id(pair.reading) for pair in case.pairs if told and pair.agrees}
    firm = [
        one for one in readings if one.evidence.id not in substance.weak and id(one) not in same
    ]
    return Judged(
        entry,
        findings,
        (*unread, *outcome.unread),
        identities(firm, parents=False),
        bool(substance.role) and _is_single(case.structure),
        case.reference.evidence if case.reference else None,
    )


def _is_single(structure: Structure | None) -> bool:
    """One enantiomer of a chiral substance, as far as its units tell for certain."""
    if structure is None or structure.doubt or structure.kind != "absolute":
        return False
    return not structure.undefined and mirror_smiles(structure) != structure.smiles


def _not_understood(reading: Reading) -> list[Unread]:
    if reading.unread:
        return [reading.unread]
    if reading.structure is None or not reading.structure.doubt:
        return []
    said = reading.evidence
    detail = f"its descriptors could not be computed: {reading.structure.doubt}"
    text = said.text if said.role is not Role.MOLFILE else ""
    return [Unread(said.place, "descriptors-undetermined", detail, text)]


def _lost(asked: tuple[Substance, Relatives]) -> Judged:
    return _not_judged(asked[0], "worker-died", "the process that judged it died on it")


def _not_judged(substance: Substance, reason: str, detail: str) -> Judged:
    said = tuple(substance.evidence)
    entry = SubstanceEntry(substance.id, substance.label, said, substance.attribution, None)
    return Judged(entry, (), (Unread(said[0].place, reason, f"{substance.label}: {detail}"),))
