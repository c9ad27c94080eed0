"""Entries read from the catalog's TOML files: groups and families, what is known of them, how it was verified, and the sources.

    mark   L  seen in print (the source, or a statement of it in print)
           M  cited from memory
           C  computed for the catalog
"""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

from lowindex.errors import InputError
from lowindex.words import Family, Presentation

MARKS = {"L": "seen in print", "M": "from memory", "C": "computed"}

_PACKAGE = Path(__file__).resolve().parents[1]
_PLACES = (_PACKAGE / "catalog", _PACKAGE.parent / "catalog")
"""In an installed package, and in a clone."""


@dataclass(frozen=True)
class Source:
    """Where a fact comes from; `key` is its name in the catalog."""

    key: str
    authors: str
    title: str
    place: str
    year: int
    mark: str

    def __str__(self) -> str:
        parts = [part for part in (self.authors, self.title, self.place, str(self.year) if self.year else "") if part]
        return f"{', '.join(parts)} ({MARKS[self.mark]})"


@dataclass(frozen=True)
class Fact:
    """One thing that is known: `what` ("verdict", "index", "subgroups", ...), its value, mark and source."""

    what: str
    value: Any
    mark: str
    source: Source


@dataclass(frozen=True)
class Entry:
    """A group, or a family (then `text` has parameters)."""

    name: str
    title: str
    kind: str
    text: str
    source: Source
    facts: tuple[Fact, ...] = ()
    note: str = ""
    is_family: bool = False

    @property
    def presentation(self) -> Presentation:
        """The group. InputError for a family."""
        if self.is_family:
            raise InputError(f"{self.name!r} is a family of the catalog; use lowindex scan with --set for its parameters")
        found = Presentation.parse(self.text)
        return Presentation(found.names, found.relators, self.name)

    @property
    def family(self) -> Family:
        """The family."""
        return Family(self.text)


def folder() -> Path:
    """Where the files are. InputError when they are not there."""
    for place in _PLACES:
        if (place / "sources.toml").is_file():
            return place
    raise InputError("the catalog is not installed beside the program; install lowindex again")


def _loaded(path: Path) -> dict[str, Any]:
    try:
        return tomllib.loads(path.read_text(encoding="utf-8"))
    except (OSError, UnicodeDecodeError, tomllib.TOMLDecodeError) as error:
        raise InputError(f"the catalog file {path.name} cannot be read: {str(error).splitlines()[0]}") from None


@cache
def sources() -> dict[str, Source]:
    """All sources by key."""
    return {key: Source(key=key, **row) for key, row in _loaded(folder() / "sources.toml").items()}


@cache
def entries() -> dict[str, Entry]:
    """All entries by name, in the order of the files."""
    known = sources()
    found: dict[str, Entry] = {}
    for path in sorted(folder().glob("*.toml")):
        if path.name == "sources.toml":
            continue
        content = _loaded(path)
        for kind in ("group", "family"):
            for row in content.get(kind, []):
                try:
                    made = _entry(row, kind == "family", known)
                except (KeyError, TypeError) as error:
                    raise InputError(f"the catalog file {path.name} has an entry that lacks or misnames {error}") from None
                if made.name in found:
                    raise InputError(f"the catalog has two entries named {made.name!r}")
                found[made.name] = made
    return found


def _entry(row: dict[str, Any], is_family: bool, known: dict[str, Source]) -> Entry:
    facts = tuple(Fact(item["what"], item["value"], item["mark"], known[item["source"]]) for item in row.get("facts", []))
    text = row["text"] if is_family else row["presentation"]
    return Entry(row["name"], row["title"], row["kind"], text, known[row["source"]], facts, row.get("note", ""), is_family)


def entry(name: str) -> Entry | None:
    """The entry of this name, or None."""
    return entries().get(name)
