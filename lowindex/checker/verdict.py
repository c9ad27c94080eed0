"""Check a witness: one entry for text, one report."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from .parse import fields, integer, listing, parse, string, word
from .refused import Refused, require
from .table import Table
from .virtually_nilpotent import check_virtually_nilpotent
from .words import Word, digest, group_text, reduced

FORMAT = "lowindex witness 1"

POSITIVE = "virtually nilpotent"

MARKS = " \t\n,|<>⟨⟩()[]{}^*·=#:"


@dataclass(frozen=True)
class Report:
    """An accepted witness: what it proves about which group."""

    claim: str
    group: str
    summary: dict[str, Any]

    def __str__(self) -> str:
        facts = ", ".join(f"{key.replace('_', ' ')} {value}" for key, value in self.summary.items() if value is not None)
        return f"{self.group} is {self.claim}: {facts}"


def check(text: str, *, presentation: tuple[list[str], list[Word]] | None = None) -> Report:
    """Accept or refuse (Refused) a witness. `presentation`: (names, relators) that the reader has in mind; a witness about another one
    is refused."""
    value = parse(text)
    require(value.get("format") == FORMAT, f"the format is not {FORMAT!r}")
    claim = value.get("claim")
    require(claim == POSITIVE, f"unknown claim {str(claim)[:60]!r}")
    keys = ("format", "claim", "group", "table", "symbols", "lemmas", "chain", "goals", "summary", "made by")
    fields(value, keys, "the witness")
    names, relators, printed = _group(value["group"])
    if presentation is not None:
        given = [tuple(w) for w in (reduced(w) for w in presentation[1]) if w]
        require((names, relators) == (list(presentation[0]), given), "the witness is about another presentation")
    _provenance(value["made by"], printed)
    table = Table(value["table"], len(names), relators)
    try:
        summary = check_virtually_nilpotent(value, table, relators)
    except RecursionError:
        raise Refused("the chain is nested too deeply to be multiplied out") from None
    _same_summary(value["summary"], summary)
    return Report(POSITIVE, printed, summary)


def _group(value: Any) -> tuple[list[str], list[Word], str]:
    names, relators, text = fields(value, ("names", "relators", "text"), "group")
    names = [string(name, "a generator's name") for name in listing(names, "group.names")]
    require(len(set(names)) == len(names), "two generators have the same name")
    require(all(name and not set(name) & set(MARKS) for name in names), "a generator's name is empty or has a mark in it")
    words = [word(item, f"relator {k}", len(names)) for k, item in enumerate(listing(relators, "group.relators"))]
    for k, item in enumerate(words):
        require(item and item == reduced(item), f"relator {k} is empty or not freely reduced")
    printed = group_text(names, words)
    require(text == printed, "group.text is not the text of group.relators")
    return names, words, printed


def _provenance(value: Any, printed: str) -> None:
    version, effort, stamp = fields(value, ("version", "effort", "digest"), "made by")
    string(version, "made by: version")
    integer(effort, "made by: effort", 0, 1000)
    require(stamp == digest(printed), "made by: the digest is not that of group.text")


def _same_summary(value: Any, computed: dict[str, Any]) -> None:
    fields(value, tuple(computed), "summary")
    for key, right in computed.items():
        require(_same(value[key], right), f"summary: {key} is {str(right)[:60]}, not {str(value[key])[:60]}")


def _same(left: Any, right: Any) -> bool:
    """Equality that keeps true apart from 1."""
    if type(left) is not type(right):
        return False
    if type(left) is list:
        return len(left) == len(right) and all(map(_same, left, right))
    return bool(left == right)
