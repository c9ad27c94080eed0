"""Seeded mutations of witnesses: one small change at any place, the group's text and digest made to fit half of the time.

A place is a list, an integer, a string, null or an object anywhere in the witness. Places are drawn by kind of content first (group, table,
lemmas, ...), so that long parts do not drown short ones.
"""

from __future__ import annotations

from collections.abc import Iterator
from copy import deepcopy
from random import Random
from typing import Any

from tests.checker.witnesses import Object, sealed

Path = tuple[str | int, ...]


def mutants(witness: Object, count: int, seed: int) -> Iterator[tuple[str, Object]]:
    """`count` different mutants, each with a line that says what was changed; none equals the witness."""
    random = Random(seed)
    by_part: dict[tuple[str | int, ...], list[Path]] = {}
    for path in _paths(witness, ()):
        if path:
            by_part.setdefault(_part(path), []).append(path)
    parts = sorted(by_part, key=str)
    seen = {repr(witness)}
    tries = 0
    while len(seen) <= count:
        tries += 1
        if tries > 200 * count:
            raise ValueError(f"only {len(seen) - 1} different mutants found")
        path = random.choice(by_part[random.choice(parts)])
        mutant = deepcopy(witness)
        what = _mutate(mutant, path, random)
        if path[0] == "group" and random.random() < 0.5:
            try:
                mutant = sealed(mutant)
                what += ", text and digest made to fit"
            except (ValueError, TypeError, LookupError):
                pass
        if repr(mutant) not in seen:
            seen.add(repr(mutant))
            yield what, mutant


def _paths(value: Any, path: Path) -> Iterator[Path]:
    yield path
    if isinstance(value, dict):
        for key, item in value.items():
            yield from _paths(item, (*path, key))
    elif isinstance(value, list):
        for k, item in enumerate(value):
            yield from _paths(item, (*path, k))


def _part(path: Path) -> tuple[str | int, ...]:
    """Key, second key where there is one, depth."""
    return (*(key for key in path[:2] if isinstance(key, str)), len(path))


def _mutate(mutant: Object, path: Path, random: Random) -> str:
    parent: Any = mutant
    for key in path[:-1]:
        parent = parent[key]
    key = path[-1]
    value = parent[key]
    choices = _CHOICES[type(value)] + (_WITHIN_LISTS if isinstance(parent, list) else _WITHIN_OBJECTS)
    change = random.choice(choices)
    before = repr(value)
    if change in _WITHIN_LISTS or change in _WITHIN_OBJECTS:
        change(parent, key, random)
        return f"{_shown(path)}: {change.__name__[1:]}"
    parent[key] = change(value, random)
    return f"{_shown(path)}: {change.__name__[1:]}: {before[:40]} -> {repr(parent[key])[:40]}"


def _shown(path: Path) -> str:
    return "".join(f"[{key}]" if isinstance(key, int) else f".{key}" for key in path)[1:]


def _negated(value: int, random: Random) -> int:
    return -value


def _shifted(value: int, random: Random) -> int:
    return value + random.choice((-2, -1, 1, 2))


def _redrawn(value: int, random: Random) -> int:
    return random.randint(-7, 7)


def _enlarged(value: int, random: Random) -> int:
    return value + 10 ** random.choice((3, 9, 20, 39))


def _retyped(value: Any, random: Random) -> Any:
    return random.choice((None, True, False, str(value), [value], 0.5, {}))


def _reversed(value: list[Any], random: Random) -> list[Any]:
    return value[::-1]


def _emptied(value: list[Any], random: Random) -> list[Any]:
    return []


def _prolonged(value: list[Any], random: Random) -> list[Any]:
    return [*value, deepcopy(value[-1]) if value else 0]


def _letters_prolonged(value: list[Any], random: Random) -> list[Any]:
    return [*value, random.choice((-3, -2, -1, 1, 2, 3))]


def _renamed(value: str, random: Random) -> str:
    return random.choice((value + "x", value[:-1], value.upper(), value + "\n", "b", ""))


def _numbered(value: None, random: Random) -> int:
    return random.randint(-1, 3)


def _dropped(parent: Any, key: Any, random: Random) -> None:
    del parent[key]


def _doubled(parent: list[Any], key: int, random: Random) -> None:
    parent.insert(key, deepcopy(parent[key]))


def _swapped(parent: list[Any], key: int, random: Random) -> None:
    other = random.randrange(len(parent))
    parent[key], parent[other] = parent[other], parent[key]


def _replaced(parent: list[Any], key: int, random: Random) -> None:
    parent[key] = deepcopy(random.choice(parent))


def _misspelled(parent: dict[str, Any], key: str, random: Random) -> None:
    parent[key + "s"] = parent.pop(key)


_WITHIN_LISTS = (_dropped, _doubled, _swapped, _replaced)
_WITHIN_OBJECTS = (_dropped, _misspelled)
_CHOICES: dict[type, tuple[Any, ...]] = {
    int: (_negated, _shifted, _redrawn, _enlarged, _retyped),
    list: (_reversed, _emptied, _prolonged, _letters_prolonged, _retyped),
    str: (_renamed, _retyped),
    dict: (_retyped,),
    type(None): (_numbered, _retyped),
}
