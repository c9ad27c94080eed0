"""What a hunt ends with."""

from __future__ import annotations

from dataclasses import dataclass, field
from html import escape
from typing import Any

from lowindex.witness import Witness
from lowindex.words import Presentation, Word

YES = "virtually nilpotent"
NO = "not virtually nilpotent"
UNDECIDED = "undecided"


@dataclass(frozen=True)
class Verdict:
    """`verdict`: one of the three above. For a decided group `witness` is what the checker accepted, and the numbers are the checker's.
    `generators`: words of the group that generate the subgroup of index `index`. `searched`: what was covered, in numbers.
    `open_at`: index of a subgroup whose nilpotent quotient is stable but whose proof stayed open."""

    presentation: Presentation
    verdict: str
    reason: str
    searched: dict[str, Any]
    effort: int
    seconds: float
    version: str
    index: int | None = None
    nilpotency_class: int | None = None
    hirsch_length: int | None = None
    growth_degree: int | None = None
    finite_order: int | None = None
    factors: tuple[tuple[int, tuple[int, ...]], ...] | None = None
    generators: tuple[Word, ...] = ()
    witness: Witness | None = field(default=None, repr=False)
    open_at: int | None = None

    def _repr_html_(self) -> str:
        """The verdict in a notebook."""
        shown = ("index", "class", "hirsch_length", "growth_degree", "finite_order", "reason", "effort")
        facts = {key.replace("_", " "): value for key, value in self.as_json().items() if key in shown and value is not None}
        rows = "".join(f"<tr><th>{key}</th><td>{escape(str(value))}</td></tr>" for key, value in facts.items())
        return f"<p>{escape(str(self.presentation))}: <strong>{self.verdict}</strong></p><table>{rows}</table>"

    def as_json(self, witness_file: str | None = None) -> dict[str, Any]:
        """The object that `lowindex hunt --json` prints."""
        return {
            "name": self.presentation.name or None,
            "presentation": str(self.presentation),
            "verdict": self.verdict,
            "index": self.index,
            "growth_degree": self.growth_degree,
            "hirsch_length": self.hirsch_length,
            "class": self.nilpotency_class,
            "finite_order": self.finite_order,
            "reason": self.reason,
            "searched": self.searched,
            "effort": self.effort,
            "seconds": round(self.seconds, 3),
            "witness": witness_file,
            "version": self.version,
        }
