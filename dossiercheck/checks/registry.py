"""The seam between rules and code: what a check declares and what it yields."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from typing import Any

from dossiercheck.model import Exhibit

Params = Mapping[str, Any]


@dataclass(frozen=True, slots=True)
class Observation:
    """What a check saw, not yet graded or worded: the rule does that.

    `values` fill the rule's message template; `unit` is the concordance's unit id. `substance` is
    filled by a check that sees the whole dossier: the id of the substance it speaks of.
    """

    values: Mapping[str, str]
    exhibits: tuple[Exhibit, ...]
    unit: str = ""
    locant: str = ""
    derivation: tuple[str, ...] = ()
    substance: str = ""


# What a check is given: a substance's case; for one that needs "sequence" the submission; for one
# that needs "dossier" all substances together.
Function = Callable[[Any, Params], Iterator[Observation]]


@dataclass(frozen=True, slots=True)
class Check:
    """A check with its contract: kinds of evidence it needs, the fields its observations fill,
    the names and types of its parameters."""

    name: str
    function: Function
    needs: tuple[str, ...]
    fields: tuple[str, ...]
    params: Mapping[str, type] = field(default_factory=dict)


CHECKS: dict[str, Check] = {}


def check(
    *, needs: tuple[str, ...], fields: tuple[str, ...], params: Mapping[str, type] | None = None
) -> Callable[[Function], Function]:
    """Register a function as the check of its own name."""

    def register(function: Function) -> Function:
        name = function.__name__
        if name in CHECKS:
            raise ValueError(f"two checks are called {name}")
        CHECKS[name] = Check(name, function, needs, fields, params or {})
        return function

    return register
