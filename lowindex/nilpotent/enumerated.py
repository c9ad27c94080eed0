"""Proofs in a finite group from a coset enumeration over the trivial subgroup.

Replaying the log of the enumeration, every entry  c x = d  of the table carries an equation  t_c x t_d^-1 = 1  (t_c: the word by which
coset c was defined): a definition is one that holds freely, a trace of a relator with one gap gives the missing entry as a product of
the others and the relator, a coincidence gives  t_c t_d^-1 = 1. In the closed table a word that is trivial is the product of the
equations of the entries it passes. (The modified Todd-Coxeter procedure: N. S. Mendelsohn 1970; D. G. Arrell and E. F.
Robertson, A modified Todd-Coxeter algorithm, in Computational Group Theory, 1984.)
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from lowindex.budget import Budget
from lowindex.cosets import EnumerationLog, logged_enumeration
from lowindex.rewriting import Derivation, Factor, RelatorSet
from lowindex.rewriting import strings as text
from lowindex.words import Word

Step = tuple[int, int]
"""An equation and a sign; equation -1 holds freely."""


class Replay:
    """The table of a logged enumeration with its equations. `equations[j]` is the logged equation of the j-th relator."""

    def __init__(self, derivation: Derivation, log: EnumerationLog, equations: Sequence[int], generators: Sequence[int]) -> None:
        self.derivation = derivation
        self.letters = [text.letter_of(s * g) for g in generators for s in (1, -1)]
        self.place = {letter: column for column, letter in enumerate(self.letters)}
        self.rotations = [
            ([2 * abs(x) - 2 + (x < 0) for x in word], equations[number], sign, offset)
            for word, (number, sign, offset) in log.rotations.items()
        ]
        self.rows: list[list[int]] = [[-1] * len(self.letters)]
        self.entry: list[list[Step]] = [[(-1, 1)] * len(self.letters)]
        self.words = [""]
        self.parent = [0]
        self.link: list[Step] = [(-1, 1)]
        for kind, coset, number in log.steps:
            if kind == 0:
                self._define(coset, number)
            else:
                self._trace(coset, number)

    def _define(self, coset: int, column: int) -> None:
        new = len(self.rows)
        self.rows.append([-1] * len(self.letters))
        self.entry.append([(-1, 1)] * len(self.letters))
        self.words.append(text.joined(self.words[coset], self.letters[column]))
        self.parent.append(new)
        self.link.append((-1, 1))
        self._set(coset, column, new, (-1, 1))

    def _set(self, coset: int, column: int, image: int, step: Step) -> None:
        self.rows[coset][column] = image
        self.entry[coset][column] = step
        if self.rows[image][column ^ 1] < 0:
            self.rows[image][column ^ 1] = coset
            self.entry[image][column ^ 1] = (step[0], -step[1])

    def _derived(self, word: str, steps: Iterable[Step | Factor]) -> Step:
        """The equation with this word as the product of the steps; (-1, 1) when it holds freely."""
        word = text.free_reduced(word)
        if not word:
            return -1, 1
        factors = [step if isinstance(step, Factor) else Factor("", *step) for step in steps if step[0] != -1]
        return self.derivation.derive(word, factors), 1

    def _trace(self, coset: int, number: int) -> None:
        """A rotation of a relator read at a coset has one gap, or closes with different ends."""
        columns, equation, sign, offset = self.rotations[number]
        ahead: list[Step] = []
        front, i, back, j = coset, 0, coset, len(columns) - 1
        while i <= j and self.rows[front][columns[i]] >= 0:
            ahead.append(self.entry[front][columns[i]])
            front = self.rows[front][columns[i]]
            i += 1
        behind: list[Step] = []
        while j >= i and self.rows[back][columns[j] ^ 1] >= 0:
            step = self.entry[back][columns[j] ^ 1]
            behind.append((step[0], -step[1]))
            back = self.rows[back][columns[j] ^ 1]
            j -= 1
        # t (relator) t^-1 = (ahead) gap (behind, last one first)
        relator = self.derivation.words[equation]
        form = relator if sign > 0 else text.inverted(relator)
        turn = text.inverted(form[:offset])
        middle = Factor(text.joined(self.words[coset], turn), equation, sign)
        steps: list[Step | Factor] = [*inverted(ahead), middle, *inverted(behind[::-1])]
        if i == j:
            word = self.words[front] + self.letters[columns[i]] + text.inverted(self.words[back])
            self._set(front, columns[i], back, self._derived(word, steps))
        elif front != back:
            self._coincide(front, back, self._derived(self.words[front] + text.inverted(self.words[back]), steps))

    def _root(self, coset: int) -> tuple[int, list[Step]]:
        """The representative r of a coset, and steps with product t_coset t_r^-1."""
        steps: list[Step] = []
        while self.parent[coset] != coset:
            steps.append(self.link[coset])
            coset = self.parent[coset]
        return coset, steps

    def _coincide(self, left: int, right: int, step: Step) -> None:
        """left = right with t_left t_right^-1 = step, and all that follows."""
        queue: list[int] = []
        self._merge(queue, left, right, [step])
        for dead in queue:
            for column in range(len(self.letters)):
                image = self.rows[dead][column]
                if image < 0:
                    continue
                step = self.entry[dead][column]
                self.rows[dead][column] = -1
                if self.rows[image][column ^ 1] == dead:
                    self.rows[image][column ^ 1] = -1
                source, before = self._root(dead)
                target, after = self._root(image)
                # t_source x t_target^-1
                steps = [*inverted(before), step, *after]
                if self.rows[source][column] >= 0:
                    other = self.rows[source][column]
                    self._merge(queue, target, other, [*inverted(steps), self.entry[source][column]])
                elif self.rows[target][column ^ 1] >= 0:
                    other = self.rows[target][column ^ 1]
                    self._merge(queue, source, other, [*steps, self.entry[target][column ^ 1]])
                else:
                    word = self.words[source] + self.letters[column] + text.inverted(self.words[target])
                    self._set(source, column, target, self._derived(word, steps))

    def _merge(self, queue: list[int], left: int, right: int, steps: list[Step]) -> None:
        """Join the classes of two cosets, t_left t_right^-1 being the product of the steps; the greater representative dies."""
        one, first = self._root(left)
        two, second = self._root(right)
        if one == two:
            return
        # t_one t_two^-1 = (t_left t_one^-1)^-1 (t_left t_right^-1) (t_right t_two^-1)
        steps = [*inverted(first), *steps, *second]
        if one < two:
            one, two, steps = two, one, inverted(steps)
        self.parent[one] = two
        self.link[one] = self._derived(self.words[one] + text.inverted(self.words[two]), steps)
        queue.append(one)

    def prove(self, word: str) -> int | None:
        """The number of the equation word = 1, None when the word is not trivial."""
        coset = 0
        steps: list[Step] = []
        for letter in word:
            column = self.place[letter]
            steps.append(self.entry[coset][column])
            coset = self.rows[coset][column]
        return None if coset else self._derived(word, steps)[0]


def inverted(steps: Sequence[Step]) -> list[Step]:
    """The steps of the inverse."""
    return [(equation, -sign) for equation, sign in reversed(steps)]


def finite_replay(relators: RelatorSet, order: int, *, max_cosets: int, budget: Budget) -> Replay | None:
    """The replay for the living generators and relators of a group of this order, when the enumeration closes."""
    generators = sorted(relators.alive)
    numbers = list(relators.active)
    words: list[Word] = relators.renumbered_words()
    log = logged_enumeration(len(generators), words, max_cosets=max_cosets, budget=budget)
    if log is None or log.order != order:
        return None
    budget.spend(20 * len(log.steps))
    return Replay(relators.derivation, log, numbers, generators)
