"""Bond orders and formal charges of a species whose atoms, hydrogens included, are all there.

With every nucleus in its place, what is open is only where the electrons are. The bonds' lengths
and the usual valences decide it: for each total charge the cheapest assignment is found exactly,
by going through the atoms once and keeping what the atoms still to come have to know.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from itertools import product

from dossiercheck.limits import Refused


@dataclass(frozen=True, slots=True)
class Lewis:
    """`orders` in the order of the bonds, `charges` in that of the atoms; a lower `cost` is a
    more usual arrangement (a bond 0.1 Å from its usual length costs 1, a charge about 8: a length
    decides between arrangements with equally many charges)."""

    orders: tuple[int, ...]
    charges: tuple[int, ...]
    cost: float


Bond = tuple[int, int, float]  # two atoms, 0-based, and their distance in ångström

IONS = {
    **dict.fromkeys(("Li", "Na", "K", "Rb", "Cs"), 1),
    **dict.fromkeys(("Mg", "Ca", "Sr", "Ba"), 2),
}

_CHARGE = 8.0

# Valence, charge, cost over `_CHARGE`. Usual valences and charges: common practice; the costs are
# our own.
_CHALCOGEN = ((2, 0, 0.0), (1, -1, 1.0), (4, 0, 0.5), (6, 0, 0.5), (3, 1, 1.5))
_PNICTOGEN = ((3, 0, 0.0), (5, 0, 0.2), (4, 1, 1.5), (6, -1, 0.5))
_HALOGEN = ((1, 0, 0.0), (0, -1, 0.5), (7, 0, 0.5), (5, 0, 0.5), (2, -1, 0.5))
_STATES: Mapping[str, tuple[tuple[int, int, float], ...]] = {
    "H": ((1, 0, 0.0),),
    "D": ((1, 0, 0.0),),
    "B": ((3, 0, 0.0), (4, -1, 0.5)),
    "C": ((4, 0, 0.0), (3, -1, 4.0)),
    "N": ((3, 0, 0.0), (4, 1, 1.0), (2, -1, 2.0)),
    "O": ((2, 0, 0.0), (1, -1, 1.0), (3, 1, 4.0)),
    "F": ((1, 0, 0.0), (0, -1, 0.5)),
    "Si": ((4, 0, 0.0),),
    "Ge": ((4, 0, 0.0),),
    "P": _PNICTOGEN,
    "As": _PNICTOGEN,
    "S": _CHALCOGEN,
    "Se": _CHALCOGEN,
    "Cl": _HALOGEN,
    "Br": _HALOGEN,
    "I": _HALOGEN,
    **{metal: ((0, charge, 0.0),) for metal, charge in IONS.items()},
}
ELEMENTS = frozenset(_STATES)
HYDROGENS = frozenset({"H", "D"})

# The numbers of ligands with which an expanded valence is met (common practice).
_LIGANDS: Mapping[tuple[str, int], tuple[int, ...]] = {
    **{(element, 4): (2, 3) for element in ("S", "Se")},
    **{(element, 6): (4,) for element in ("S", "Se")},
    **{(element, 3): (3,) for element in ("S", "Se")},
    **{(element, 5): (4, 5) for element in ("P", "As")},
    **{(element, 4): (4,) for element in ("P", "As")},
    **{(element, 6): (6,) for element in ("P", "As")},
    **{(element, 7): (4,) for element in ("Cl", "Br", "I")},
    **{(element, 5): (3,) for element in ("Cl", "Br", "I")},
    **{(element, 2): (2,) for element in ("Cl", "Br", "I")},
}

# Covalent radii for single, double and triple bonds in ångström, after P. Pyykkö and M. Atsumi,
# Chem. Eur. J. 2009, 15, 186 and 12770; written from memory.
_RADII: Mapping[str, tuple[float, ...]] = {
    "H": (0.32,),
    "D": (0.32,),
    "B": (0.85, 0.78, 0.73),
    "C": (0.75, 0.67, 0.60),
    "N": (0.71, 0.60, 0.54),
    "O": (0.63, 0.57, 0.53),
    "F": (0.64,),
    "Si": (1.16, 1.07),
    "P": (1.11, 1.02, 0.94),
    "S": (1.03, 0.94, 0.95),
    "Cl": (0.99, 0.95),
    "Ge": (1.21, 1.11),
    "As": (1.21, 1.14),
    "Se": (1.16, 1.07),
    "Br": (1.14, 1.09),
    "I": (1.33, 1.29),
}
# Pairs of which the sum of radii is far from what crystals show (common practice).
_CORRECTED: Mapping[str, tuple[float, ...]] = {
    "NO": (1.40, 1.21),
    "OP": (1.58, 1.48),
    "OS": (1.58, 1.44),
    "NP": (1.68, 1.57),
    "ClO": (1.46, 1.42),
    "FP": (1.60,),
}
# The longest double bond believed, in ångström: a pair that is longer has a hydrogen missing.
# Set so that delocalised bonds pass (common practice).
_LONGEST = {"CC": 1.46, "CN": 1.41, "CO": 1.32, "CS": 1.77, "NN": 1.36, "NO": 1.32, "OS": 1.54}
_LONGEST_TRIPLE = {"CC": 1.27, "CN": 1.22, "NN": 1.17}
_MOST_STATES = 60_000


def lewis(elements: Sequence[str], bonds: Sequence[Bond]) -> dict[int, Lewis]:
    """The cheapest arrangement for each total charge; none where the valences do not come out.

    An oxygen that is bonded to nothing stands for water, its hydrogens not located; whether they
    are in the substance's formula is for the caller to see. Raises `Refused` ("bonds-ambiguous")
    where there are too many arrangements to be gone through.
    """
    degree = [0] * len(elements)
    for begin, end, _ in bonds:
        degree[begin] += 1
        degree[end] += 1
    states = [_states(e, d) for e, d in zip(elements, degree, strict=True)]
    if not all(states):
        return {}
    room = [
        max(valence for valence, _, _ in own) - d for own, d in zip(states, degree, strict=True)
    ]
    active = [n for n, (begin, end, _) in enumerate(bonds) if room[begin] and room[end]]
    orders = [1] * len(bonds)
    charges = [0] * len(elements)
    total: dict[int, tuple[float, _Choice | None]] = {0: (0.0, None)}
    for piece in _pieces(len(elements), bonds, active):
        found = _solve(piece, elements, bonds, degree, states, set(active))
        joined: dict[int, tuple[float, _Choice | None]] = {}
        for (one, (cost, made)), (two, (more, choice)) in product(total.items(), found.items()):
            if one + two not in joined or cost + more < joined[one + two][0]:
                joined[one + two] = (cost + more, _Choice(made, also=choice))
        total = joined
    result = {}
    for charge, (cost, made) in total.items():
        for choice in _unrolled(made):
            charges[choice.atom] = choice.charge
            for bond, order in choice.orders:
                orders[bond] = order
        result[charge] = Lewis(tuple(orders), tuple(charges), cost)
    return result


def strained(elements: Sequence[str], bonds: Sequence[Bond], found: Lewis) -> Bond | None:
    """A bond whose length does not fit its order, None where all fit."""
    for bond, order in zip(bonds, found.orders, strict=True):
        pair = "".join(sorted((elements[bond[0]], elements[bond[1]])))
        if order == 2 and bond[2] > _LONGEST.get(pair, _usual(pair_of(elements, bond), 2) + 0.14):
            return bond
        if order == 3 and bond[2] > _LONGEST_TRIPLE.get(pair, 1.22):
            return bond
        if order == 1 and bond[2] < _usual(pair_of(elements, bond), 1) - 0.24:
            return bond
    return None


def pair_of(elements: Sequence[str], bond: Bond) -> tuple[str, str]:
    """The two elements of a bond."""
    return elements[bond[0]], elements[bond[1]]


@cache
def _states(element: str, degree: int) -> tuple[tuple[int, int, float], ...]:
    if element == "O" and not degree:
        return ((0, 0, 0.0),)  # water whose hydrogens were not placed
    return tuple(
        (valence, charge, _CHARGE * cost)
        for valence, charge, cost in _STATES.get(element, ())
        if valence >= degree
        and degree in _LIGANDS.get((element, valence), (degree,))
        and not (element == "C" and charge and degree > 1)
    )


@cache
def _usual(pair: tuple[str, str], order: int) -> float:
    corrected = _CORRECTED.get("".join(sorted(pair)), ())
    if order <= len(corrected):
        return corrected[order - 1]
    one, two = (_RADII.get(element, (1.5,)) for element in pair)
    if len(one) < order or len(two) < order:
        return 0.0 if order > 1 else one[0] + two[0]
    return one[order - 1] + two[order - 1]


@cache
def _misfit(pair: tuple[str, str], order: int, thousandths: int) -> float:
    return min(((thousandths / 1000 - _usual(pair, order)) / 0.1) ** 2, 9.0)


@dataclass(frozen=True, slots=True, eq=False)
class _Choice:
    """A step of an assignment, linked to the step before it; `also` is another chain."""

    before: _Choice | None
    atom: int = -1
    charge: int = 0
    orders: tuple[tuple[int, int], ...] = ()
    also: _Choice | None = None


def _unrolled(last: _Choice | None) -> Iterator[_Choice]:
    waiting = [last]
    while waiting:
        choice = waiting.pop()
        if choice is None:
            continue
        if choice.atom >= 0:
            yield choice
        waiting += [choice.before, choice.also]


def _pieces(size: int, bonds: Sequence[Bond], active: Sequence[int]) -> list[list[int]]:
    """Atoms joined by bonds whose order is open, each piece in depth-first order, which keeps
    the number of open bonds between the atoms behind and ahead low."""
    near: list[list[int]] = [[] for _ in range(size)]
    for number in active:
        begin, end, _ = bonds[number]
        near[begin].append(end)
        near[end].append(begin)
    seen: set[int] = set()
    pieces = []
    for start in sorted(range(size), key=lambda atom: len(near[atom])):
        if start in seen:
            continue
        piece: list[int] = []
        waiting = [start]
        while waiting:
            atom = waiting.pop()
            if atom in seen:
                continue
            seen.add(atom)
            piece.append(atom)
            waiting += sorted(near[atom], key=lambda other: -len(near[other]))
        pieces.append(piece)
    return pieces


# What was added to the single bonds of the atoms still to come, and the charge so far.
_Open = tuple[tuple[tuple[int, int], ...], int]


def _solve(
    piece: Sequence[int],
    elements: Sequence[str],
    bonds: Sequence[Bond],
    degree: Sequence[int],
    states: Sequence[tuple[tuple[int, int, float], ...]],
    active: set[int],
) -> dict[int, tuple[float, _Choice | None]]:
    position = {atom: number for number, atom in enumerate(piece)}
    ahead: dict[int, list[tuple[int, int]]] = {atom: [] for atom in piece}
    for number in active:
        begin, end, _ = bonds[number]
        if begin in position:
            first, second = sorted((begin, end), key=position.__getitem__)
            ahead[first].append((second, number))
    reached: dict[_Open, tuple[float, _Choice | None]] = {((), 0): (0.0, None)}
    for atom in piece:
        later: dict[_Open, tuple[float, _Choice | None]] = {}
        highest = max(valence for valence, _, _ in states[atom])
        ways = [
            (
                orders,
                sum(orders) - len(orders),
                sum(
                    _misfit(pair_of(elements, bonds[n]), o, round(bonds[n][2] * 1000))
                    for (_, n), o in zip(ahead[atom], orders, strict=True)
                ),
                tuple((n, o) for (_, n), o in zip(ahead[atom], orders, strict=True)),
            )
            for orders in product((1, 2, 3), repeat=len(ahead[atom]))
            if sum(orders) - len(orders) <= highest - degree[atom]
        ]
        for (pending, charge), (cost, made) in reached.items():
            extra = dict(pending)
            own = degree[atom] + extra.pop(atom, 0)
            for orders, added, misfit, chosen in ways:
                for valence, own_charge, own_cost in states[atom]:
                    if valence != own + added:
                        continue
                    onward = dict(extra)
                    for (other, _), order in zip(ahead[atom], orders, strict=True):
                        if order > 1:
                            onward[other] = onward.get(other, 0) + order - 1
                    key = (tuple(sorted(onward.items())), charge + own_charge)
                    price = cost + misfit + own_cost
                    if key not in later or price < later[key][0]:
                        later[key] = (price, _Choice(made, atom, own_charge, chosen))
        if len(later) > _MOST_STATES:
            raise Refused("bonds-ambiguous", "There are too many ways to place the double bonds.")
        reached = later
    return {charge: value for (_, charge), value in reached.items()}
