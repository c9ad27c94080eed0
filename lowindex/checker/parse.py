"""Strict JSON: objects without repeated keys, integers of bounded size, strings, lists, null. Nothing else."""

from __future__ import annotations

import json
import re
from typing import Any, NoReturn

from .refused import Refused, require

MOST_CHARACTERS = 512_000_000
LONGEST_INTEGER = 40
DEEPEST = 12

_BRACKETS = re.compile(r'"(?:[^"\\]|\\.)*"|[\[{\]}]')


def _pairs(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) != len(pairs):
        raise Refused("an object has the same key twice")
    return found


def _integer(digits: str) -> int:
    if len(digits) > LONGEST_INTEGER:
        raise Refused(f"an integer has more than {LONGEST_INTEGER} digits")
    return int(digits)


def _no_float(text: str) -> NoReturn:
    raise Refused(f"{text[:20]} is not an integer")


def _check_depth(text: str) -> None:
    depth = 0
    for match in _BRACKETS.finditer(text):
        mark = match.group()[0]
        if mark in "[{":
            depth += 1
            require(depth <= DEEPEST, f"brackets are nested more than {DEEPEST} deep")
        elif mark in "]}":
            depth -= 1


def parse(text: str) -> dict[str, Any]:
    """The object that the text spells."""
    require(len(text) <= MOST_CHARACTERS, f"the text has more than {MOST_CHARACTERS} characters")
    _check_depth(text)
    try:
        value = json.loads(
            text, object_pairs_hook=_pairs, parse_int=_integer, parse_float=_no_float, parse_constant=_no_float
        )
    except (ValueError, RecursionError) as error:
        raise Refused(f"not JSON: {error}") from None
    require(type(value) is dict, "the witness is not an object")
    return value  # type: ignore[no-any-return]


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


def listing(value: Any, where: str) -> list[Any]:
    """A list."""
    require(type(value) is list, f"{where} is not a list")
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
