"""Seeded single errors over sound records, in equal numbers of each kind."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cache
from itertools import islice
from random import Random

from rdkit import Chem

from tests.benchmarks import molecules
from tests.benchmarks.changes import CHANGES, Change, Pool, Proposal
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.identifiers import check_digit_is_right, records
from tests.benchmarks.truth import Mutant, settle


@dataclass(frozen=True, slots=True)
class Mutations:
    """`changed`: other meaning, to be found. `unchanged`: the same stereoisomer said otherwise,
    nothing may be raised. `unsettled`: nobody knows, counted by reason only."""

    changed: tuple[Mutant, ...]
    unchanged: tuple[Mutant, ...]
    unsettled: Counter[str]


def mutate(sound: Sequence[SoundRecord], size: int, seed: int) -> Mutations:
    """About `size` mutants that change the meaning, each of another record.

    Fewer of a kind where the records do not have enough places for it.
    """
    order = list(range(len(sound)))
    Random(f"{seed} order").shuffle(order)
    pool = _pool(sound)
    used: set[int] = set()
    sources = {
        kind: _proposals(sound, order, used, change, f"{seed} {kind}", pool)
        for kind, change in CHANGES.items()
    }
    missing = dict.fromkeys(CHANGES, -(-size // len(CHANGES)))
    changed: list[Mutant] = []
    unchanged: list[Mutant] = []
    unsettled: Counter[str] = Counter()
    while batch := [
        proposal for kind, count in missing.items() for proposal in islice(sources[kind], count)
    ]:
        for mutant in settle(batch):
            if mutant.meaning_changed:
                changed.append(mutant)
                missing[mutant.kind] -= 1
            elif mutant.meaning_changed is None:
                unsettled[f"{mutant.kind}: {mutant.why}"] += 1
            else:
                unchanged.append(mutant)
    return Mutations(tuple(changed), tuple(unchanged), unsettled)


def _proposals(
    sound: Sequence[SoundRecord],
    order: Sequence[int],
    used: set[int],
    change: Change,
    seed: str,
    pool: Pool,
) -> Iterator[Proposal]:
    """Proposals of one kind; `used` are the records taken by any kind."""
    for number in order:
        if number in used:
            continue
        record = sound[number]
        proposal = change(record, Random(f"{seed} {record.id}"), pool)
        if proposal is not None:
            used.add(number)
            yield proposal


def _pool(sound: Sequence[SoundRecord]) -> Pool:
    return Pool(
        keys=tuple(record.inchikey for record in sound),
        mirror_key=_mirror_key,
        registry=_registry_numbers(),
    )


def _mirror_key(record: SoundRecord) -> str:
    mol = molecules.read_molblock(record.molblock)
    assert mol is not None
    return str(Chem.InchiToInchiKey(molecules.standard_inchi(molecules.mirror_image(mol))))


@cache
def _registry_numbers() -> tuple[str, ...]:
    return tuple(r.registry for r in records() if check_digit_is_right(r.registry))


@cache
def _registry_by_key() -> dict[str, str]:
    return {r.inchikey: r.registry for r in records() if check_digit_is_right(r.registry)}


def with_registry(sound: Sequence[SoundRecord]) -> list[SoundRecord]:
    """The records with their registry number where the public identifier records have it."""
    numbers = _registry_by_key()
    return [replace(record, registry=numbers.get(record.inchikey, "")) for record in sound]
