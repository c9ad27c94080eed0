"""The kinds of claim that a witness makes: only data, in the words of the checker's grammar (lowindex/checker/FORMAT.md).

`content()` of a claim is the JSON object, its keys in the order of the grammar. Words are tuples of letters; vectors are dense tuples of
exponents over the chain and are written sparsely.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Protocol

from lowindex.words import Presentation, Word

FORMAT = "lowindex witness 1"

Vector = tuple[int, ...]
Factor = tuple[Word, int, int]
"""Conjugator, number of an earlier equation, +1 or -1."""

Permutations = tuple[tuple[int, ...], ...]
"""The images of the points under every generator."""

Rational = tuple[int, int]
"""Numerator and denominator >= 1."""

Coefficients = tuple[int, ...]
"""Of a polynomial, degree 0 first, the last one not 0; () is 0."""


class Claim(Protocol):
    """Whatever can be written as a witness."""

    def content(self) -> dict[str, Any]:
        """The JSON object."""


@dataclass(frozen=True)
class Subject:
    """What every claim is about: the group, the stabiliser H of point 0 of a table (images of the points under each generator), and the
    program that says so."""

    presentation: Presentation
    table: tuple[tuple[int, ...], ...]
    version: str
    effort: int

    def framed(self, claim: str, body: dict[str, Any], summary: dict[str, Any]) -> dict[str, Any]:
        """The whole object around the keys of one kind of claim."""
        presentation = self.presentation
        head = {"format": FORMAT, "claim": claim, "group": _group(presentation), "table": [list(images) for images in self.table]}
        made_by = {"version": self.version, "effort": self.effort, "digest": presentation.digest}
        return head | body | {"summary": summary, "made by": made_by}


@dataclass(frozen=True)
class Chain:
    """Symbols a_0, a_1, ... with weights and relative orders (0: infinite); powers[j] = a_j^orders[j], conjugates[j, i] = a_j^(a_i) for
    j > i (absent: trivial), images of the Schreier generators."""

    symbols: tuple[int, ...]
    weights: tuple[int, ...]
    orders: tuple[int, ...]
    powers: Mapping[int, Vector]
    conjugates: Mapping[tuple[int, int], Vector]
    images: tuple[Vector, ...]

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {
            "symbols": list(self.symbols),
            "weights": list(self.weights),
            "orders": list(self.orders),
            "powers": [[j, _sparse(vector)] for j, vector in sorted(self.powers.items())],
            "conjugates": [[j, i, _sparse(vector)] for (j, i), vector in sorted(self.conjugates.items())],
            "images": [_sparse(vector) for vector in self.images],
        }


@dataclass(frozen=True)
class Goals:
    """Numbers of the equations that prove the goals: per Schreier generator (-1: nothing to prove), per (j, i), per finite order (None: not
    proved)."""

    generators: tuple[int, ...]
    conjugates: tuple[tuple[int, int, int], ...]
    powers: tuple[int | None, ...]

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {
            "generators": list(self.generators),
            "conjugates": [list(triple) for triple in self.conjugates],
            "powers": list(self.powers),
        }


@dataclass(frozen=True)
class NilpotentSummary:
    """Invariants of H; `finite_order` is that of the whole group. None where a power is not proved; the class is then a bound."""

    index: int
    nilpotency_class: int
    hirsch_length: int | None
    factors: tuple[tuple[int, tuple[int, ...]], ...] | None
    growth_degree: int | None
    finite_order: int | None

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        factors = self.factors
        return {
            "index": self.index,
            "class": self.nilpotency_class,
            "hirsch_length": self.hirsch_length,
            "factors": None if factors is None else [[rank, list(torsion)] for rank, torsion in factors],
            "growth_degree": self.growth_degree,
            "finite_order": self.finite_order,
        }


@dataclass(frozen=True)
class VirtuallyNilpotent:
    """H is nilpotent: definitions of symbols, lemmas (word, factors), the central chain and which equations prove it."""

    subject: Subject
    definitions: tuple[Word, ...]
    lemmas: tuple[tuple[Word, tuple[Factor, ...]], ...]
    chain: Chain
    goals: Goals
    summary: NilpotentSummary

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        body = {
            "symbols": [list(word) for word in self.definitions],
            "lemmas": [[list(word), [[list(u), j, sign] for u, j, sign in factors]] for word, factors in self.lemmas],
            "chain": self.chain.content(),
            "goals": self.goals.content(),
        }
        return self.subject.framed("virtually nilpotent", body, self.summary.content())


@dataclass(frozen=True)
class Rationals:
    """The field Q; its elements are `Rational`."""

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {"kind": "Q"}


@dataclass(frozen=True)
class NumberField:
    """Q[t]/(f), f squarefree with positive leading coefficient; elements are (coefficients, denominator)."""

    modulus: Coefficients

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {"kind": "Q[t]/(f)", "modulus": list(self.modulus)}


@dataclass(frozen=True)
class RationalFunctions:
    """F_p(t); elements are (coefficients of the numerator, coefficients of the denominator), in 0..p-1."""

    prime: int

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {"kind": "F_p(t)", "prime": self.prime}


Element = Rational | tuple[Coefficients, int] | tuple[Coefficients, Coefficients]


@dataclass(frozen=True)
class Affine:
    """Schreier generator s acts as x -> m x + v; the word `dilation` has a multiplier of infinite order, `translation` is one."""

    field: Rationals | NumberField | RationalFunctions
    multipliers: tuple[Element, ...]
    translations: tuple[Element, ...]
    dilation: Word
    translation: Word

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {
            "kind": "affine",
            "field": self.field.content(),
            "multipliers": [_element(m) for m in self.multipliers],
            "translations": [_element(v) for v in self.translations],
            "dilation": list(self.dilation),
            "translation": list(self.translation),
        }


@dataclass(frozen=True)
class ProP:
    """H has too few relators modulo a prime."""

    prime: int

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {"kind": "pro-p", "prime": self.prime}


@dataclass(frozen=True)
class SmallCancellation:
    """The relators of H satisfy C'(1/6)."""

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return {"kind": "small cancellation"}


@dataclass(frozen=True)
class NotVirtuallyNilpotent:
    """H carries an obstruction; `index` is that of H."""

    subject: Subject
    obstruction: Affine | ProP | SmallCancellation
    index: int

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        body = {"obstruction": self.obstruction.content()}
        return self.subject.framed("not virtually nilpotent", body, {"index": self.index})


@dataclass(frozen=True)
class WordTrivial:
    """The word is 1 in the group: lemmas from the relators, and the number of the equation that says so (-1: freely)."""

    subject: Subject
    word: Word
    lemmas: tuple[tuple[Word, tuple[Factor, ...]], ...]
    goal: int

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        lemmas = [[list(word), [[list(u), j, sign] for u, j, sign in factors]] for word, factors in self.lemmas]
        body = {"word": list(self.word), "lemmas": lemmas, "goal": self.goal}
        return self.subject.framed("word trivial", body, {"length": len(self.word)})


@dataclass(frozen=True)
class WordNotTrivial:
    """The word moves a point of the action of the subject's table."""

    subject: Subject
    word: Word
    point: int

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        summary = {"length": len(self.word), "degree": len(self.subject.table[0])}
        return self.subject.framed("word not trivial", {"word": list(self.word), "point": self.point}, summary)


@dataclass(frozen=True)
class DifferentGroups:
    """The classes of subgroups of one index, as tables, of the subject's group and of another one."""

    subject: Subject
    other: Presentation
    classes: tuple[Permutations, ...]
    other_classes: tuple[Permutations, ...]

    def content(self) -> dict[str, Any]:
        """The JSON object."""
        lists = [[[list(images) for images in table] for table in tables] for tables in (self.classes, self.other_classes)]
        index = max(len(table[0]) for tables in lists for table in tables)
        body = {"other": _group(self.other), "classes": lists[0], "other classes": lists[1]}
        return self.subject.framed("different groups", body, {"index": index, "classes": [len(tables) for tables in lists]})


def _group(presentation: Presentation) -> dict[str, Any]:
    relators = [list(word) for word in presentation.relators]
    return {"names": list(presentation.names), "relators": relators, "text": str(presentation)}


def _sparse(vector: Vector) -> list[list[int]]:
    return [[k, exponent] for k, exponent in enumerate(vector) if exponent]


def _element(element: Element) -> list[Any]:
    return [list(part) if isinstance(part, tuple) else part for part in element]
