"""Check a witness: one entry for text, one report."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any

from . import different, not_virtually_nilpotent, virtually_nilpotent
from . import word as of_words
from .group import read_group
from .parse import fields, integer, parse, string
from .refused import Refused, require
from .table import Table
from .words import digest, reduced

FORMAT = "lowindex witness 1"

CLAIMS: dict[str, tuple[tuple[str, ...], Callable[[dict[str, Any], Table], dict[str, Any]]]] = {
    "virtually nilpotent": (virtually_nilpotent.KEYS, virtually_nilpotent.check),
    "not virtually nilpotent": (not_virtually_nilpotent.KEYS, not_virtually_nilpotent.check),
    "word trivial": (of_words.TRIVIAL_KEYS, of_words.check_trivial),
    "word not trivial": (of_words.NONTRIVIAL_KEYS, of_words.check_nontrivial),
    "different groups": (different.KEYS, different.check),
}
"""For each claim the keys that its witnesses have of their own, and the function that checks them and computes the summary."""

SENTENCES = {
    "word trivial": "in {group} the word of {length} letters is trivial",
    "word not trivial": "in {group} the word of {length} letters is not trivial: it moves one of {degree} points",
    "different groups": "{group} differs from the other group in its subgroups of index {index}, if both lists of classes are complete",
}

LONGEST_VERSION = 100


@dataclass(frozen=True)
class Report:
    """An accepted witness: what it proves about which group."""

    claim: str
    group: str
    summary: dict[str, Any]

    def __str__(self) -> str:
        if self.claim in SENTENCES:
            return SENTENCES[self.claim].format(group=self.group, **self.summary)
        bound = "class at most" if self.summary.get("hirsch_length", 0) is None else "class"
        names = {"class": bound, "hirsch_length": "Hirsch length", "growth_degree": "growth degree", "finite_order": "order"}
        facts = (f"{names.get(key, key)} {value}" for key, value in self.summary.items() if value is not None)
        return f"{self.group} is {self.claim}: {', '.join(facts)}"


def check(text: str, *, presentation: tuple[Sequence[str], Sequence[Sequence[int]]] | None = None) -> Report:
    """Accept or refuse (Refused) a witness. `presentation`: (names, relators) that the reader has in mind; a witness about another one
    is refused. The same one has the same names and, after free reduction, the same nonempty relators in the same order."""
    value = parse(text)
    require(value.get("format") == FORMAT, f"the format is not {FORMAT!r}")
    claim = value.get("claim")
    require(type(claim) is str and claim in CLAIMS, f"unknown claim {str(claim)[:60]!r}")
    keys, check_claim = CLAIMS[str(claim)]
    fields(value, ("format", "claim", "group", "table", *keys, "summary", "made by"), "the witness")
    names, relators, printed = read_group(value["group"], "group")
    if presentation is not None:
        given = [letters for letters in map(reduced, presentation[1]) if letters]
        require((names, relators) == (list(presentation[0]), given), "the witness is about another presentation")
    _check_provenance(value["made by"], printed)
    try:
        summary = check_claim(value, Table(value["table"], len(names), relators))
    except RecursionError:
        raise Refused("the stack of calls has no room left for the chain") from None
    _check_summary(value["summary"], summary)
    return Report(str(claim), printed, summary)


def _check_provenance(value: Any, printed: str) -> None:
    version, effort, stamp = fields(value, ("version", "effort", "digest"), "made by")
    require(len(string(version, "made by: version")) <= LONGEST_VERSION, "made by: the version is too long")
    integer(effort, "made by: effort", 0, 1000)
    require(stamp == digest(printed), "made by: the digest is not that of group.text")


def _check_summary(value: Any, computed: dict[str, Any]) -> None:
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
