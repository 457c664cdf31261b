"""Ranks and comparisons in the words of a chemist.

Atoms are called by element and number ("C4"), by their locant with a hyphen ("C-4") where a name
gives one that no other atom has. A set of atoms is written in braces in order of rank, a duplicate
atom in brackets and a phantom atom as 0 (IUPAC 2013, P-92.1.4).
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Sequence
from fractions import Fraction
from itertools import zip_longest

from rdkit import Chem

from dossiercheck.stereo.cip.derivation import Comparison, Entry, Rank, Side
from dossiercheck.stereo.structure import Structure

Namer = Callable[[int, str], str]

_ELEMENTS = Chem.GetPeriodicTable()
_GREEK = {"alpha": "α", "beta": "β", "gamma": "γ", "delta": "δ", "epsilon": "ε", "omega": "ω"}
_RAISED = str.maketrans("0123456789", "⁰¹²³⁴⁵⁶⁷⁸⁹")
_SUBJECT = {
    "3": "Z before E before none",
    "4a": "chiral before pseudoasymmetric before none",
    "4b": "like before unlike",
    "4c": "r before s before none",
    "5": "R before S before none",
}
# The two classes of chiral descriptors (IUPAC 2013, P-92.5.2.1; Hanson et al. 2018, Rule 4b).
_CLASS = {**dict.fromkeys("RMz", "R"), **dict.fromkeys("SPe", "S")}


def namer(
    elements: Sequence[str] = (), locants: Sequence[str] = (), positions: Sequence[int] = ()
) -> Namer:
    """What to call an atom, given its number (1-based; 0 for one that is not drawn, which goes by
    the label given). `elements` have the mass number of an isotope before the symbol; `positions`
    are the source's own numbers where they differ."""
    times = Counter(locants)

    def name(atom: int, label: str = "") -> str:
        if not atom:
            return element(label)
        called = element(elements[atom - 1])
        locant = locants[atom - 1] if locants else ""
        if locant and times[locant] == 1:
            return locant if locant[0].isupper() else f"{called}-{_GREEK.get(locant, locant)}"
        return f"{called}{positions[atom - 1] if positions else atom}"

    return name


def namer_for(structure: Structure) -> Namer:
    """What the atoms of a structure are called."""
    atoms = structure.mol.GetAtoms()
    elements = [f"{atom.GetIsotope() or ''}{atom.GetSymbol()}" for atom in atoms]
    return namer(elements, structure.locants, structure.positions)


def element(label: str) -> str:
    """An element with its mass number, if any, raised."""
    mass = label[: len(label) - len(label.lstrip("0123456789"))]
    return mass.translate(_RAISED) + label[len(mass) :]


def ranking(ranks: Sequence[Rank], name: Namer) -> tuple[str, ...]:
    """The ranked ligands, a line for each end of the unit."""
    lines = []
    ends = dict.fromkeys(rank.end for rank in ranks)
    for end in ends:
        listed = [rank for rank in ranks if rank.end == end]
        order = " > ".join(f"{rank.rank} {name(rank.ligand, rank.label)}" for rank in listed)
        lines.append(f"Ranks at {name(end, '')}: {order}.")
    return tuple(lines)


def comparing(comparison: Comparison, name: Namer) -> str:
    """Why one ligand ranks above the next, in one or two sentences."""
    high, low = (name(side.ligand, "H") for side in (comparison.higher, comparison.lower))
    if comparison.sphere == 1:
        told = f"{_directly(comparison)} (Rule {comparison.rule}), sphere 1"
    else:
        told = f"in sphere {comparison.sphere}, {_compared(comparison, name)}"
    return f"{high} > {low}: {told}.{_along(comparison, name)}"


def _directly(comparison: Comparison) -> str:
    """The difference of the two ligands themselves."""
    above, below = comparison.higher.entries[0], comparison.lower.entries[0]
    if comparison.rule == "1a":
        return f"atomic number {_figure(above.value)} against {_figure(below.value)}"
    if comparison.rule == "2":
        return f"mass {_mass(above)} against {_mass(below)}"
    if comparison.rule == "6":
        return "it is taken as the favoured one of the ligands that tie"
    if comparison.rule == "1b":
        return "a duplicate atom nearer to the root ranks higher"
    one, two = above.descriptor or "none", below.descriptor or "none"
    return f"auxiliary descriptor {one} against {two}, {_SUBJECT[comparison.rule]}"


def _compared(comparison: Comparison, name: Namer) -> str:
    """The two sets of the deciding sphere, and the rule."""
    higher, lower = comparison.higher.entries, comparison.lower.entries
    rule = comparison.rule
    if rule == "1a":
        return _by_number(higher, lower)
    if rule == "1b":
        return (
            f"duplicate atoms at root distance {_distances(higher)} > {_distances(lower)} "
            "(Rule 1b: the nearer one ranks higher)"
        )
    if rule == "2":
        one, two = _padded([_text(e) for e in higher], [_text(e) for e in lower])
        above, below = _first(higher, lower)
        return f"{one} > {two} (Rule 2: mass {_mass(above)} against {_mass(below)})"
    above, below = _first(higher, lower)
    if rule == "4b":
        return _likeness(comparison, above, below, name)
    if rule == "6":
        return (
            f"{_called(above, name)} is the favoured ligand and {_called(below, name)} is not "
            "(Rule 6: the favoured ligand, met again, ranks higher)"
        )
    return (
        f"auxiliary descriptor {above.descriptor or 'none'} at {_called(above, name)} against "
        f"{below.descriptor or 'none'} at {_called(below, name)} (Rule {rule}: {_SUBJECT[rule]})"
    )


def _by_number(higher: Sequence[Entry], lower: Sequence[Entry]) -> str:
    # Members of one number stand in any order; a duplicate is looked for behind its atom.
    sides = (sorted(e, key=lambda one: (-one.value, one.duplicate)) for e in (higher, lower))
    one, two = _padded(*([_numbered(entry) for entry in side] for side in sides))
    notes = []
    if any(entry.duplicate for entry in (*higher, *lower)):
        notes.append("a duplicate atom in brackets")
    if any(_is_mean(entry) for entry in (*higher, *lower)):
        notes.append("a number in brackets is the mean atomic number of a duplicate")
    if "0" in f"{one}{two}".replace("{", ",").replace("}", ",").split(","):
        notes.append("0 is a phantom atom")
    return f"{one} > {two} (Rule 1a{''.join(f'; {note}' for note in notes)})"


def _padded(one: list[str], two: list[str]) -> tuple[str, str]:
    """Both sets with phantom atoms up to the same number of members."""
    pairs = list(zip_longest(one, two, fillvalue="0"))
    first, second = (",".join(pair[side] for pair in pairs) for side in (0, 1))
    return f"{{{first}}}", f"{{{second}}}"


def _text(entry: Entry) -> str:
    """An atom in a set, without its number."""
    return f"({element(entry.label)})" if entry.duplicate else element(entry.label)


def _numbered(entry: Entry) -> str:
    """The same where numbers are compared, which for some duplicates are means."""
    return f"({_figure(entry.value)})" if _is_mean(entry) else _text(entry)


def _is_mean(entry: Entry) -> bool:
    """Whether a duplicate stands for a mean of several atoms (IUPAC 2013, P-92.1.4.4)."""
    own = _ELEMENTS.GetAtomicNumber(entry.label.lstrip("0123456789"))
    return entry.duplicate and entry.value != own


def _figure(value: float) -> str:
    if value == int(value):
        return str(int(value))
    part = Fraction(value).limit_denominator(60)
    return f"{value:g}" if part.denominator in (2, 4, 5) else str(part)


def _mass(entry: Entry) -> str:
    return f"{entry.value:.3f}".rstrip("0").rstrip(".")


def _distances(entries: Sequence[Entry]) -> str:
    found = [_figure(-e.value) for e in entries if e.duplicate]
    return f"{{{','.join(found)}}}" if found else "{none}"


def _first(higher: Sequence[Entry], lower: Sequence[Entry]) -> tuple[Entry, Entry]:
    """The first pair of a set's members that the rule tells apart."""
    nothing = Entry(0, "", 0.0)
    pairs = zip_longest(higher, lower, fillvalue=nothing)
    return next(pair for pair in pairs if pair[0].value != pair[1].value)


def _called(entry: Entry, name: Namer) -> str:
    if not entry.label:
        return "a phantom atom"
    called = name(entry.atom, entry.label)
    return f"the duplicate of {called}" if entry.duplicate else called


def _likeness(comparison: Comparison, above: Entry, below: Entry, name: Namer) -> str:
    """Rule 4b, each side against the reference descriptor of its own branch."""
    parts = []
    for side, entry in ((comparison.higher, above), (comparison.lower, below)):
        said = {1: "like", -1: "unlike"}.get(int(entry.value))
        called = _called(entry, name)
        if said is None:
            parts.append(f"{called} has none")
            continue
        reference = _reference(side) or comparison.reference
        parts.append(f"{called} ({entry.descriptor}) is {said} the reference {reference}")
    return f"{parts[0]} and {parts[1]} (Rule 4b: like before unlike)"


def _reference(side: Side) -> str:
    """The reference descriptor, as the values of a set's members tell it."""
    for entry in side.entries:
        own = _CLASS.get(entry.descriptor)
        if own and entry.value:
            return own if entry.value > 0 else "S" if own == "R" else "R"
    return ""


def _along(comparison: Comparison, name: Namer) -> str:
    """The way to the deciding sphere, where it is not the ligand's own."""
    if comparison.sphere < 3:
        return ""
    high, low = (
        "–".join(name(atom, "H") for atom in side.path)
        for side in (comparison.higher, comparison.lower)
    )
    return f" The sets are those along {high} and along {low}."
