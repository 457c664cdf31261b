"""The guarded reading of JSON text.

Numbers stay the digits that were printed: a mass of 913.030 has three decimals. What programs
read in different ways (a name that comes twice in one object, NaN, half of a surrogate pair) is
`Refused`.
"""

from __future__ import annotations

import json
from typing import Any, NoReturn

from dossiercheck.limits import Refused

# Far beyond any real export; the decoder's own stack gives out later.
_DEPTH = 100


def parse_json(text: str) -> Any:
    """The value of a JSON text (RFC 8259), numbers as strings of their own digits.

    Raises `Refused`: "damaged-json", "duplicate-key", "too-deep", "encoding", "binary".
    """
    try:
        value = json.loads(
            text,
            object_pairs_hook=_object,
            parse_float=str,
            parse_int=str,
            parse_constant=_constant,
        )
    except RecursionError:
        raise Refused("too-deep", "The JSON is nested too deep.") from None
    except json.JSONDecodeError as error:
        detail = f"The JSON does not parse: {error.msg}, line {error.lineno}."
        raise Refused("damaged-json", detail) from error
    _vet(value, 0)
    return value


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) != len(pairs):
        names = [name for name, _ in pairs]
        twice = next(name for name in names if names.count(name) > 1)
        raise Refused("duplicate-key", f"An object of the JSON has {twice!a} more than once.")
    return found


def _constant(name: str) -> NoReturn:
    raise Refused("damaged-json", f"The JSON does not parse: {name} is no JSON number.")


def _vet(value: Any, depth: int) -> None:
    if depth > _DEPTH:
        raise Refused("too-deep", f"The JSON is nested more than {_DEPTH} deep.")
    if isinstance(value, str):
        if "\0" in value:
            raise Refused("binary", "A string of the JSON has a NUL character.")
        if not value.isascii() and any("\ud800" <= c <= "\udfff" for c in value):
            raise Refused("encoding", "A string of the JSON has half of a surrogate pair.")
    elif isinstance(value, dict):
        for name, inner in value.items():
            _vet(name, depth + 1)
            _vet(inner, depth + 1)
    elif isinstance(value, list):
        for inner in value:
            _vet(inner, depth + 1)
