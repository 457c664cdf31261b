"""One change to one record: the fourteen kinds of seeded error, as edits of text only.

What a change means is settled elsewhere (`truth`); here nothing is parsed as chemistry.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from itertools import combinations, pairwise
from random import Random

from tests.benchmarks import printed
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.identifiers import check_digit_is_right
from tests.benchmarks.printed import Descriptor

_OTHER = {"R": "S", "S": "R", "r": "s", "s": "r", "E": "Z", "Z": "E"}
_CENTRE, _BOND = "RSrs", "EZ"


@dataclass(frozen=True, slots=True)
class Proposal:
    """A record, the same with one change, and what the change touched: descriptors of the name,
    or the 1-based atom at a wedge's narrow end."""

    record: SoundRecord
    changed: SoundRecord
    kind: str
    touched: tuple[Descriptor, ...] = ()
    atom: int = 0
    detail: str = ""


@dataclass(frozen=True, slots=True)
class Pool:
    """What a change may borrow: the InChIKey of another record, of the mirror image, and valid
    registry numbers."""

    keys: Sequence[str]
    mirror_key: Callable[[SoundRecord], str]
    registry: Sequence[str]


Change = Callable[[SoundRecord, Random, Pool], Proposal | None]


def letter_changed(name: str, descriptor: Descriptor) -> str:
    """The name with one descriptor's letter turned into the opposite."""
    at = descriptor.at
    return name[:at] + _OTHER[descriptor.letter] + name[at + 1 :]


def _flip(letters: str, kind: str) -> Change:
    def change(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
        found = [d for d in printed.descriptors(record.name) if d.letter in letters]
        if not found:
            return None
        one = random.choice(found)
        changed = replace(record, name=letter_changed(record.name, one))
        return Proposal(record, changed, kind, (one,))

    return change


def _swap(same_bracket: bool, kind: str) -> Change:
    def change(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
        pairs = [
            (a, b)
            for a, b in combinations(printed.descriptors(record.name), 2)
            if (a.group == b.group) is same_bracket and _OTHER[a.letter] == b.letter
        ]
        if not pairs:
            return None
        one, two = random.choice(pairs)
        name = letter_changed(letter_changed(record.name, one), two)
        return Proposal(record, replace(record, name=name), kind, (one, two))

    return change


def _without(name: str, dropped: Sequence[Descriptor]) -> str:
    """The name without some descriptors; an emptied bracket goes with its hyphen."""
    for descriptor in sorted(dropped, key=lambda d: -d.start):
        start, end = descriptor.start, descriptor.end
        if name[end] == ",":
            end += 1
        elif name[start - 1] == ",":
            start -= 1
        else:
            start, end = start - 1, end + 1
            end += name[end : end + 1] == "-"
        name = name[:start] + name[end:]
    return name


def _drop_one(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    found = printed.descriptors(record.name)
    if len(found) < 2:  # that would be dropping all
        return None
    one = random.choice(found)
    changed = replace(record, name=_without(record.name, [one]))
    return Proposal(record, changed, "drop one", (one,))


def _drop_all(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    found = printed.descriptors(record.name)
    changed = replace(record, name=_without(record.name, found))
    return Proposal(record, changed, "drop all", found)


def _invert_all(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    # A mirror image keeps r, s, E and Z (IUPAC 2013, P-93.5.1.1 and P-91.2.1.1).
    found = tuple(d for d in printed.descriptors(record.name) if d.letter in "RS")
    if not found:
        return None
    name = record.name
    for descriptor in found:
        name = letter_changed(name, descriptor)
    return Proposal(record, replace(record, name=name), "invert all", found)


def _locant(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    found = [d for d in printed.descriptors(record.name) if re.match(r"N?\d", d.locant)]
    if not found:
        return None
    one = random.choice(found)
    digits = re.compile(r"\d+").search(record.name, one.start)
    assert digits is not None
    number = int(digits[0])
    step = random.choice([-1, 1]) if number > 1 else 1
    name = record.name[: digits.start()] + str(number + step) + record.name[digits.end() :]
    detail = re.sub(r"\d+", str(number + step), one.locant, count=1)
    return Proposal(record, replace(record, name=name), "locant ± 1", (one,), detail=detail)


def _wedges(molblock: str) -> list[tuple[int, int]]:
    """Line number and narrow end of each wedged bond of a V2000 molfile."""
    lines = molblock.split("\n")
    atoms, bonds = int(lines[3][0:3]), int(lines[3][3:6])
    return [
        (number, int(lines[number][0:3]))
        for number in range(4 + atoms, 4 + atoms + bonds)
        if lines[number][6:9] == "  1" and lines[number][9:12].strip() in {"1", "6"}
    ]


def _wedge(remove: bool, kind: str) -> Change:
    def change(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
        found = _wedges(record.molblock)
        if not found:
            return None
        number, atom = random.choice(found)
        lines = record.molblock.split("\n")
        line = lines[number]
        other = "0" if remove else {"1": "6", "6": "1"}[line[9:12].strip()]
        lines[number] = f"{line[:9]}{other:>3}{line[12:]}"
        changed = replace(record, molblock="\n".join(lines))
        return Proposal(record, changed, kind, atom=atom)

    return change


def _inchikey(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    detail = random.choice(["another record's", "the mirror image's", "one stereo character"])
    mirror = pool.mirror_key(record)
    if detail == "another record's":
        wrong = random.choice(
            [key for key in random.sample(pool.keys, 3) if key != record.inchikey]
        )
    elif detail == "the mirror image's":
        wrong = mirror
    else:
        # Characters 16 to 23 hash the layers after the skeleton.
        differing = [i for i in range(15, 23) if mirror[i] != record.inchikey[i]]
        at = random.choice(differing or list(range(15, 23)))
        letter = mirror[at] if differing else random.choice("ABCDEFGHIJKLM".replace(mirror[at], ""))
        wrong = record.inchikey[:at] + letter + record.inchikey[at + 1 :]
    if wrong == record.inchikey:  # its own mirror image
        return None
    return Proposal(record, replace(record, inchikey=wrong), "wrong InChIKey", detail=detail)


def _formula(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    found = re.fullmatch(r"C(\d*)H(\d*)((?![a-z]).*)", record.formula)
    if found is None:
        return None
    counts = [int(found[1] or 1), int(found[2] or 1)]
    at = random.randrange(2)
    counts[at] += random.choice([-1, 1]) if counts[at] > 2 else 1
    formula = f"C{_count(counts[0])}H{_count(counts[1])}{found[3]}"
    return Proposal(record, replace(record, formula=formula), "wrong formula")


def _count(number: int) -> str:
    return "" if number == 1 else str(number)


def _mass(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    """Two neighbouring digits changed places, or off by 0.3 to 3."""
    value = float(record.weight)
    digits = [i for i, c in enumerate(record.weight) if c.isdigit()]
    swaps = []
    for a, b in pairwise(digits):
        characters = list(record.weight)
        characters[a], characters[b] = characters[b], characters[a]
        swapped = "".join(characters)
        if swapped[0] != "0" and abs(float(swapped) - value) >= 0.3:
            swaps.append(swapped)
    if swaps and random.random() < 0.5:
        wrong, detail = random.choice(swaps), "digits transposed"
    else:
        off = random.choice([-1, 1]) * random.uniform(0.3, 3.0)
        places = len(record.weight.partition(".")[2])
        wrong, detail = f"{value + off:.{places}f}", "another value"
    return Proposal(record, replace(record, weight=wrong), "wrong mass", detail=detail)


def _check_digit(record: SoundRecord, random: Random, pool: Pool) -> Proposal | None:
    """The record is given a valid number (its own where the public records have it)."""
    number = record.registry or random.choice(pool.registry)
    original = replace(record, registry=number)
    wrong = []
    for at, character in enumerate(number):
        for digit in "0123456789":
            other = number[:at] + digit + number[at + 1 :]
            plain = character.isdigit() and digit != character and (at > 0 or digit != "0")
            if plain and not check_digit_is_right(other):
                wrong.append(other)
    changed = replace(original, registry=random.choice(wrong))
    return Proposal(original, changed, "wrong check digit")


# The rarest first: they choose their records before the others do.
CHANGES: dict[str, Change] = {
    "swap across brackets": _swap(False, "swap across brackets"),
    "flip E/Z": _flip(_BOND, "flip E/Z"),
    "swap in one bracket": _swap(True, "swap in one bracket"),
    "drop one": _drop_one,
    "locant ± 1": _locant,
    "wedge flipped": _wedge(False, "wedge flipped"),
    "wedge removed": _wedge(True, "wedge removed"),
    "flip R/S": _flip(_CENTRE, "flip R/S"),
    "invert all": _invert_all,
    "drop all": _drop_all,
    "wrong InChIKey": _inchikey,
    "wrong formula": _formula,
    "wrong mass": _mass,
    "wrong check digit": _check_digit,
}
NAME_KINDS = frozenset(
    {
        "flip R/S",
        "flip E/Z",
        "swap in one bracket",
        "swap across brackets",
        "drop one",
        "drop all",
        "locant ± 1",
        "invert all",
    }
)
DRAWING_KINDS = frozenset({"wedge flipped", "wedge removed"})
