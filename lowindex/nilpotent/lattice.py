"""Conjugation on a proven free abelian part: linear algebra turned into lemmas.

Let M be a set of generators that are known to commute pairwise, and t another generator. A relator of the shape

    t^-1 v t u,        v, u words in M,

says what t does to v. What it does to sums of such v follows, one lemma a sum, and when the vectors v span a lattice with unit
vectors, those of M are reached. Completion would find the same by a detour of growing words; here lattice reduction
(A. K. Lenstra, H. W. Lenstra, L. Lovasz, Factoring polynomials with rational coefficients, Math. Ann. 261 (1982)) names the sums.
"""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from dataclasses import dataclass

from flint import fmpz_mat

from lowindex.rewriting import Factor, RelatorSet, RuleSet, Shortlex
from lowindex.rewriting import strings as text

Vector = tuple[int, ...]

LONGEST = 4000
"""Lemmas of more letters are not built."""


@dataclass(frozen=True)
class Action:
    """The equation  t^-1 v t u = 1,  v and u sorted words in M; `vector` is that of v."""

    vector: Vector
    v: str
    u: str
    equation: int


class Lattice:
    """Everything known about conjugation by t on a commuting set M (a sorted tuple of generators) inside a set of relators."""

    def __init__(self, relators: RelatorSet, commuting: Sequence[int], t: int) -> None:
        self.relators = relators
        self.derivation = relators.derivation
        self.commuting = tuple(commuting)
        self.plus, self.minus = text.letter_of(t), text.letter_of(-t)
        self.letters = {text.letter_of(s * g) for g in commuting for s in (1, -1)}
        self.sorter = RuleSet(Shortlex(self.commuting), relators.derivation.words)
        self.sorter.admit(self.commuting)
        for number, word in relators.active.items():
            if len(word) == 4 and self.letters.issuperset(word):
                self.sorter.add(word, number)

    def known(self) -> list[Action]:
        """The relators of the shape t^-1 v t u, sorted and without repeats."""
        found: dict[Vector, Action] = {}
        for number, word in list(self.relators.active.items()):
            rest = word.replace(self.plus, "").replace(self.minus, "")
            if word.count(self.plus) == 1 == word.count(self.minus) and self.letters.issuperset(rest):
                action = self._sorted(self._from_relator(word, number))
                if any(action.vector):
                    found.setdefault(action.vector, action)
        return list(found.values())

    def _from_relator(self, word: str, number: int) -> Action:
        start = word.index(self.minus)
        rotation = word[start:] + word[:start]
        middle = rotation.index(self.plus)
        equation = self.derivation.derive(rotation, [Factor(text.inverted(word[:start]), number, 1)])
        return Action((), rotation[1:middle], rotation[middle + 1 :], equation)

    def _sorted(self, action: Action) -> Action:
        """The action with v and u sorted, as a logged equation."""
        factors: list[Factor] = []
        v = self.sorter.reduce_logged(action.v, self.minus, factors)
        u = self.sorter.reduce_logged(action.u, text.joined(text.joined(self.minus, v), self.plus), factors)
        word = self.minus + v + self.plus + u
        back = [Factor(c, j, -e) for c, j, e in reversed(factors)]
        equation = self.derivation.derive(word, [*back, Factor("", action.equation, 1)])
        vector = tuple(v.count(text.letter_of(g)) - v.count(text.letter_of(-g)) for g in self.commuting)
        return Action(vector, v, u, equation)

    def sum(self, first: Action, second: Action) -> Action:
        """t^-1 (v1 v2) t (u2 u1): the first equation times the second one, conjugated by u1^-1."""
        word = self.minus + first.v + second.v + self.plus + second.u + first.u
        factors = [Factor("", first.equation, 1), Factor(text.inverted(first.u), second.equation, 1)]
        word = text.free_reduced(word)
        middle = word.index(self.plus)
        return self._sorted(Action((), word[1:middle], word[middle + 1 :], self.derivation.derive(word, factors)))

    def negative(self, action: Action) -> Action:
        """t^-1 v^-1 t u^-1: the inverse equation, rotated."""
        word = self.minus + text.inverted(action.v) + self.plus + text.inverted(action.u)
        turn = text.joined(self.minus + text.inverted(action.v) + self.plus, "")
        equation = self.derivation.derive(word, [Factor(turn, action.equation, -1)])
        return Action(tuple(-n for n in action.vector), text.inverted(action.v), text.inverted(action.u), equation)

    def multiple(self, action: Action, times: int) -> Action:
        """The action on v^times, times != 0, by doubling."""
        if times < 0:
            return self.multiple(self.negative(action), -times)
        if times == 1:
            return action
        half = self.multiple(action, times // 2)
        double = self.sum(half, half)
        return self.sum(double, action) if times % 2 else double

    def combination(self, actions: Sequence[Action], coefficients: Iterable[int]) -> Action | None:
        """The action on the sum of multiples; None when it is empty or too long."""
        total: Action | None = None
        for action, n in zip(actions, coefficients, strict=True):
            if n:
                if abs(n) * len(action.v) > LONGEST:
                    return None
                term = self.multiple(action, n)
                total = term if total is None else self.sum(total, term)
        return total

    def units(self) -> list[Action]:
        """Actions on a reduced basis of the lattice that the known vectors span: unit vectors when it is everything."""
        actions = self.known()
        if not actions:
            return []
        rows = fmpz_mat([[*map(int, action.vector)] for action in actions])
        reduced, transform = rows.lll(True)
        result: list[Action] = []
        for row in range(rows.nrows()):
            if any(int(reduced[row, k]) for k in range(rows.ncols())):
                action = self.combination(actions, [int(transform[row, k]) for k in range(rows.nrows())])
                if action is not None and sum(map(abs, action.vector)) == 1:
                    result.append(action)
        return result


def largest_clique(relators: RelatorSet, generators: Collection[int]) -> list[int]:
    """A maximal set of generators whose commutators are relators in force, grown greedily from the best connected."""
    neighbours: dict[int, set[int]] = {g: set() for g in generators}
    for word in relators.active.values():
        if len(word) == 4:
            g, h = text.generator_of(word[0]), text.generator_of(word[1])
            if g in neighbours and h in neighbours and word[2:] == text.INVERSE_LETTER[word[0]] + text.INVERSE_LETTER[word[1]]:
                neighbours[g].add(h)
                neighbours[h].add(g)
    clique: list[int] = []
    candidates = set(generators)
    while candidates:
        best = max(candidates, key=lambda g: (len(neighbours[g] & candidates), len(neighbours[g]), -g))
        clique.append(best)
        candidates = neighbours[best] & candidates
    return sorted(clique)


def close_conjugations(relators: RelatorSet, generators: Collection[int]) -> bool:
    """Add what lattice reduction finds about conjugation on the largest commuting part; whether something new was found."""
    commuting = largest_clique(relators, generators)
    found = False
    for t in sorted(set(generators).difference(commuting)):
        for action in Lattice(relators, commuting, t).units():
            number = relators.reduced_equation(action.equation)
            if relators.derivation.words[number]:
                relators.insert(number)
                found = True
        relators.settle()
    return found
