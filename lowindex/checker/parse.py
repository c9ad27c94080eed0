"""Strict JSON: objects without repeated keys, integers of bounded size, strings, lists, null. Nothing else."""

from __future__ import annotations

import json
import re
from typing import Any, NoReturn

from .refused import Refused, require

MOST_CHARACTERS = 32_000_000
MOST_BRACKETS = 3_000_000
LONGEST_INTEGER = 40
DEEPEST = 8

_BESIDE_BRACKETS = re.compile(r'(?:"(?:[^"\\]|\\.)*+"?|[^\[{\]}"]+)+')


def parse(text: str) -> dict[str, Any]:
    """The object that the text spells."""
    require(len(text) <= MOST_CHARACTERS, f"the text has more than {MOST_CHARACTERS} characters")
    _count_brackets(text)
    try:
        value = json.loads(
            text, object_pairs_hook=_object, parse_int=_integer, parse_float=_no_integer, parse_constant=_no_integer
        )
    except (ValueError, RecursionError) as error:
        raise Refused(f"not JSON: {error}") from None
    require(type(value) is dict, "the witness is not an object")
    return value  # type: ignore[no-any-return]


def _count_brackets(text: str) -> None:
    brackets = _BESIDE_BRACKETS.sub("", text)
    count = brackets.count("[") + brackets.count("{")
    require(count <= MOST_BRACKETS, f"the text has more than {MOST_BRACKETS} lists and objects")
    depth = 0
    for bracket in brackets:
        if bracket in "[{":
            depth += 1
            if depth > DEEPEST:
                raise Refused(f"brackets are nested more than {DEEPEST} deep")
        else:
            depth -= 1


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    require(len(found) == len(pairs), "an object has the same key twice")
    return found


def _integer(digits: str) -> int:
    require(len(digits) <= LONGEST_INTEGER, f"an integer has more than {LONGEST_INTEGER} digits")
    return int(digits)


def _no_integer(text: str) -> NoReturn:
    raise Refused(f"{text[:20]} is not an integer")


def fields(value: Any, names: tuple[str, ...], where: str) -> tuple[Any, ...]:
    """The values of exactly these keys."""
    require(type(value) is dict, f"{where} is not an object")
    for name in names:
        require(name in value, f"{where} lacks {name!r}")
    for name in value:
        require(name in names, f"{where} has the unknown key {name[:40]!r}")
    return tuple(value[name] for name in names)


def integer(value: Any, where: str, low: int, high: int) -> int:
    """An integer in a range."""
    require(type(value) is int, f"{where} is not an integer")
    require(low <= value <= high, f"{where} is {value}, outside {low}..{high}")
    return value  # type: ignore[no-any-return]


def integers(value: Any, where: str, low: int, high: int) -> list[int]:
    """A list of integers in a range."""
    return [integer(item, f"entry {k} of {where}", low, high) for k, item in enumerate(listing(value, where))]


def listing(value: Any, where: str, length: int | None = None) -> list[Any]:
    """A list, of this length if one is given."""
    require(type(value) is list, f"{where} is not a list")
    require(length is None or len(value) == length, f"{where} has length {len(value)}, not {length}")
    return value  # type: ignore[no-any-return]


def string(value: Any, where: str) -> str:
    """A string."""
    require(type(value) is str, f"{where} is not a string")
    return value  # type: ignore[no-any-return]


def word(value: Any, where: str, rank: int) -> tuple[int, ...]:
    """A word: nonzero integers between -rank and rank."""
    letters = tuple(listing(value, where))
    for letter in letters:
        if type(letter) is not int or not -rank <= letter <= rank or letter == 0:
            raise Refused(f"{where} has a letter that is not one of ±1..±{rank}")
    return letters
