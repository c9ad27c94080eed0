"""The central chain: a proof that a finitely presented group H is nilpotent, and what it says.

H comes as generators and relators (of a subgroup: Schreier generators and rewritten relators). The relators are simplified, the
nilpotent quotient N of what is left says what to prove (mathematically: that H -> N is injective), and completion proves it:

    s = NF(image of s)          every generator s of H, as a normal form in the chain a_1..a_q
    a_j^(a_i) = NF              for every i of weight 1 and every j > i
    a_j^(e_j) = NF              for every finite relative order e_j

With the definitions a_k = [a_j, a_i] of the elements of weight >= 2 these make H nilpotent and isomorphic to N.
C. C. Sims, Verifying nilpotence, J. Symbolic Computation 3 (1987) 231-247.
"""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterator, Sequence
from dataclasses import dataclass
from typing import NamedTuple

from lowindex.budget import Budget
from lowindex.nilpotent.collection import NilpotentPresentation, Vector
from lowindex.nilpotent.enumerated import finite_replay
from lowindex.nilpotent.lattice import close_conjugations, largest_clique
from lowindex.nilpotent.quotient import NilpotentQuotient, nilpotent_quotient
from lowindex.rewriting import (
    Completion,
    Derivation,
    Factor,
    Order,
    Proof,
    RecursivePath,
    RelatorSet,
    Shortlex,
    Unfinished,
    WeightedShortlex,
    abbreviate,
    eliminate_short,
    encoded,
    letter_of,
    propagate,
    simplify,
    solved,
    substituted,
)
from lowindex.words import Word, commutator, inverse, product

Goal = tuple[str, int, int]
"""("generator", s, 0), ("conjugate", j, i) or ("power", j, 0)."""

MANY = 80
"""With more generators than this left, a presentation is cut down further before its nilpotent quotient is computed."""

LARGEST_ENUMERATED = 5000
"""Up to this order a coset enumeration over the trivial subgroup may serve as proof."""

FIRST_SHARE = 60_000
"""Work of one attempt at a proof in the first round; later rounds have four times as much each."""


class _Prepared(NamedTuple):
    """Relators made ready for proofs, the words named on the way (symbols behind the generators), and the generators in the order of a
    collection in which the chain is rewritten in terms of them (empty: they are rewritten in terms of the chain)."""

    relators: RelatorSet
    named: tuple[Word, ...] = ()
    collected: tuple[int, ...] = ()


@dataclass(frozen=True)
class ChainProof:
    """H is isomorphic to `group`. `symbols[k]` is the number of a_k among the symbols: generators 1..rank, then one for every word in
    `definitions`; `images[s-1]` is the normal form of generator s; `proof.goals` prove `goals` in order."""

    quotient: NilpotentQuotient
    symbols: tuple[int, ...]
    definitions: tuple[Word, ...]
    images: tuple[Vector, ...]
    goals: tuple[Goal, ...]
    proof: Proof

    @property
    def group(self) -> NilpotentPresentation:
        """The nilpotent group that H is."""
        return self.quotient.group


def prove_nilpotent(rank: int, relators: Sequence[Word], *, max_class: int, budget: Budget) -> ChainProof | None:
    """A proof that the group is its own largest nilpotent quotient; None where none was found within the budget.

    `rank`: number of generators; `relators`: words in them, numbered as the equations of the proof are. Several ways to prepare the
    relators and several orderings take turns with growing shares of the budget.
    """
    attempts: list[_Attempt] = []
    for prepare in (_guided, _collected, _eliminated, _abbreviated, _as_given):
        if budget.exhausted:
            return None
        attempt = _Attempt.made(rank, relators, prepare, max_class, budget)
        if attempt is None:
            continue
        attempts.append(attempt)
        if proof := attempt.try_all(budget, FIRST_SHARE):
            return proof
    share = 4 * FIRST_SHARE
    while attempts and not budget.exhausted:
        for attempt in attempts:
            if proof := attempt.try_all(budget, share):
                return proof
        share *= 4
    return None


def simplified_relators(rank: int, relators: Sequence[Word], *, budget: Budget) -> RelatorSet:
    """The relators after Tietze moves; equation k of the log is relators[k]."""
    reduced = _merged(rank, relators, budget)
    simplify(reduced)
    return reduced


def quotient_of(
    reduced: RelatorSet, *, max_class: int, budget: Budget, prefer: Sequence[int] = ()
) -> NilpotentQuotient:
    """The nilpotent quotient of simplified relators; input generators are the living ones in increasing order."""
    place = {g: k for k, g in enumerate(sorted(reduced.alive), 1)}
    words = reduced.renumbered_words()
    first = [place[g] for g in prefer if g in place]
    return nilpotent_quotient(len(place), words, max_class=max_class, budget=budget, prefer=first)


def _merged(rank: int, relators: Sequence[Word], budget: Budget) -> RelatorSet:
    """Only generators that are trivial or equal to others are eliminated; long lists are cut down further. All relators are on the
    queue."""
    generators = range(1, rank + 1)
    reduced = RelatorSet(Derivation(relators), Shortlex(generators), generators, budget=budget)
    for number in {word: n for n, word in enumerate(relators) if word}.values():
        reduced.insert(number)
    eliminate_short(reduced, most=2)
    if len(reduced.alive) > MANY:
        eliminate_short(reduced, most=3)
    return reduced


def _as_given(rank: int, relators: Sequence[Word], max_class: int, budget: Budget) -> _Prepared:
    """As `_merged`, and relators are shortened by each other."""
    reduced = _merged(rank, relators, budget)
    reduced.settle()
    return _Prepared(reduced)


def _collected(rank: int, relators: Sequence[Word], max_class: int, budget: Budget) -> _Prepared:
    """For extensions of an abelian group by a few more generators: others are solved in terms of a largest commuting set, what the rest
    does to it is closed by linear algebra, and words are collected with the commuting generators last: proofs are exponent arithmetic."""
    reduced = _merged(rank, relators, budget)
    if len(reduced.alive) > MANY:
        simplify(reduced)
    reduced.settle()
    commuting = largest_clique(reduced, reduced.alive)
    propagate(reduced, commuting, dict.fromkeys(reduced.alive, 1))
    simplify(reduced, commuting)
    _close(reduced, budget)
    commuting = largest_clique(reduced, reduced.alive)
    others = sorted(reduced.alive.difference(commuting))
    return _Prepared(reduced, collected=(*commuting, *others))


def _eliminated(rank: int, relators: Sequence[Word], max_class: int, budget: Budget) -> _Prepared:
    """Tietze moves without a plan."""
    return _Prepared(simplified_relators(rank, relators, budget=budget))


def _guided(rank: int, relators: Sequence[Word], max_class: int, budget: Budget) -> _Prepared:
    """The nilpotent quotient says which generators to keep and how heavy the others are; the others are solved in terms of them."""
    reduced = _merged(rank, relators, budget)
    if len(reduced.alive) > MANY:
        simplify(reduced)
    _solve(reduced, max_class, budget)
    return _Prepared(reduced)


def _abbreviated(rank: int, relators: Sequence[Word], max_class: int, budget: Budget) -> _Prepared:
    """As `_guided`, with names for pairs of letters that occur often."""
    reduced = _merged(rank, relators, budget)
    if len(reduced.alive) > MANY:
        simplify(reduced)
    named = abbreviate(reduced, rank + 1)
    for number in reduced.derivation.given[len(relators) :]:
        reduced.insert(number)
    _solve(reduced, max_class, budget)
    return _Prepared(reduced, tuple(named))


def _solve(reduced: RelatorSet, max_class: int, budget: Budget) -> None:
    living = sorted(reduced.alive)
    quotient = quotient_of(reduced, max_class=max_class, budget=budget, prefer=living)
    group = quotient.group
    weight = {
        g: sum(w * abs(x) for w, x in zip(group.weights, image, strict=True))
        for g, image in zip(living, quotient.images, strict=True)
    }
    basis = [living[definition[1] - 1] for definition in group.definitions if definition[0] == "generator"]
    for k in range(len(basis), group.size):
        unit = group.generator(k)
        basis += [g for g, image in zip(living, quotient.images, strict=True) if image == unit][:1]
    propagate(reduced, basis, weight)
    reduced.settle()
    simplify(reduced, basis, weight=weight)
    _close(reduced, budget)


def _close(reduced: RelatorSet, budget: Budget) -> None:
    while close_conjugations(reduced, reduced.alive) and not budget.exhausted:
        pass


class _Attempt:
    """What to prove for one prepared presentation and its nilpotent quotient, and the portfolio of orderings to prove it by."""

    @classmethod
    def made(
        cls,
        rank: int,
        relators: Sequence[Word],
        prepare: Callable[[int, Sequence[Word], int, Budget], _Prepared],
        max_class: int,
        budget: Budget,
    ) -> _Attempt | None:
        """Prepare the relators; None when that grows too much, or does not suit the nilpotent quotient, or that does not become stable."""
        try:
            prepared = prepare(rank, relators, max_class, budget)
            living = sorted(prepared.relators.alive)
            quotient = quotient_of(prepared.relators, max_class=max_class, budget=budget, prefer=living[::-1])
        except Unfinished:
            return None
        if not quotient.stable or (prepared.collected and quotient.nilpotency_class < 2):
            return None
        return cls(rank, prepared, quotient)

    def __init__(self, rank: int, prepared: _Prepared, quotient: NilpotentQuotient) -> None:
        self.rank = rank
        self.reduced, named, self.collected = prepared
        reduced = self.reduced
        self.living = living = sorted(reduced.alive)
        self.quotient = quotient
        self.group = group = quotient.group
        first = rank + len(named)
        self.symbols, commutators = _symbols(first, living, group)
        self.given = [reduced.derivation.give(encoded(product((-(first + k),), word))) for k, word in enumerate(commutators, 1)]
        self.definitions = named + commutators
        self.images = self._images()
        self.goals = self._goals()

    def _images(self) -> tuple[Vector, ...]:
        """The image in N of every generator: from the quotient for the living, by their solutions for the eliminated."""
        images = [self.group.identity] * (self.rank + len(self.definitions))
        for generator, image in zip(self.living, self.quotient.images, strict=True):
            images[generator - 1] = image
        for generator, word in self.reduced.solutions():
            images[generator - 1] = self.group.evaluate(word, images)
        return tuple(images[: self.rank])

    def normal_form(self, vector: Vector) -> Word:
        """a_1^v_1 a_2^v_2 ... spelled in symbols."""
        return tuple(x for symbol, n in zip(self.symbols, vector, strict=True) for x in ((symbol if n > 0 else -symbol),) * abs(n))

    def _goals(self) -> dict[Goal, Word]:
        """Goal -> the word to prove trivial, in the order of the witness; what is trivial as it stands is left out."""
        group, symbols = self.group, self.symbols
        goals: dict[Goal, Word] = {
            ("generator", s, 0): product((-s,), self.normal_form(self.images[s - 1])) for s in range(1, self.rank + 1)
        }
        for j, i in conjugate_pairs(group):
            target = inverse(self.normal_form(group.conjugate_image(j, i)))
            goals["conjugate", j, i] = product((-symbols[i], symbols[j], symbols[i]), target)
        for j, order in enumerate(group.orders):
            if order:
                target = inverse(self.normal_form(group.power_image(j)))
                goals["power", j, 0] = product((symbols[j],) * order, target)
        return {goal: word for goal, word in goals.items() if word}

    def orders(self) -> Iterator[tuple[Order, int, set[int]]]:
        """The portfolio: orderings, each with the length up to which a relator solves a generator, and the generators never solved."""
        chain = list(self.symbols)
        if self.collected:
            yield RecursivePath([*self.collected, *(x for x in chain if x not in self.reduced.alive)]), 60, set(self.collected)
            return
        others = [g for g in self.living if g not in set(chain)]
        weight = dict(zip(chain, self.group.weights, strict=True)) | dict.fromkeys(others, 1)
        if self.quotient.nilpotency_class > 1:
            yield RecursivePath(chain[::-1] + others), 60, set(chain)
        yield Shortlex(chain + others), 12, set(chain)
        if self.quotient.nilpotency_class > 2:
            yield WeightedShortlex(chain + others, weight), 12, set(chain)

    def try_all(self, budget: Budget, share: int) -> ChainProof | None:
        """As `_try_all`; None, too, when words grew too long."""
        try:
            return self._try_all(budget, share)
        except Unfinished:
            return None

    def _try_all(self, budget: Budget, share: int) -> ChainProof | None:
        """Each ordering once, with this share of the budget; the shorter of the proof found and of one that starts from the relators it
        used."""
        seeds = [*self.reduced.active, *self.given]
        for order, longest, keep in self.orders():
            part = budget.part(share)
            known = len(self.reduced.derivation.words)
            goals = self.run(order, longest, keep, seeds, part)
            if goals is None:
                self.reduced.derivation.forget_from(known)
                continue
            proof = self.reduced.derivation.cut(goals)
            used = self.reduced.derivation.used(goals)
            again = self.run(order, longest, keep, [n for n in seeds if n in used], budget.part(2 * part.spent + 1000))
            if again is not None:
                proof = min(proof, self.reduced.derivation.cut(again), key=lambda found: found.symbols)
            return self._proof(proof)
        if self.quotient.order is not None and self.quotient.order <= LARGEST_ENUMERATED:
            known = len(self.reduced.derivation.words)
            goals = self.by_enumeration(share, budget.part(2 * share))
            if goals is not None:
                return self._proof(self.reduced.derivation.cut(goals))
            self.reduced.derivation.forget_from(known)
        return None

    def _proof(self, proof: Proof) -> ChainProof:
        return ChainProof(self.quotient, self.symbols, self.definitions, self.images, tuple(self.goals), proof)

    def by_enumeration(self, max_cosets: int, budget: Budget) -> list[int] | None:
        """For a finite quotient: a coset enumeration over 1 that closes with its order proves every goal."""
        reduced = self.reduced
        assert self.quotient.order is not None
        replay = finite_replay(reduced, self.quotient.order, max_cosets=max_cosets, budget=budget)
        if replay is None:
            return None
        words = reduced.derivation.words
        rules = dict(reduced.single)
        last = self.rank + len(self.definitions)
        for number, symbol in zip(self.given, range(last - len(self.given) + 1, last + 1), strict=True):
            for letter in (letter_of(symbol), letter_of(-symbol)):
                rules[letter] = solved(words[number], number, letter)
        numbers: list[int] = []
        for word in self.goals.values():
            factors: list[Factor] = []
            goal = encoded(word)
            plain = substituted(goal, rules, reduced.rules, factors)
            proved = replay.prove(plain)
            if proved is None:
                return None
            if plain:
                factors.append(Factor("", proved, 1))
            numbers.append(reduced.derivation.derive(goal, factors))
        return numbers

    def run(self, order: Order, longest: int, keep: set[int], seeds: Sequence[int], budget: Budget) -> list[int] | None:
        """One completion: first what concerns living generators and the chain, then the eliminated generators. The numbers of the
        equations that prove the goals, None when some stayed open."""
        reduced = self.reduced
        system = Completion(reduced.derivation, order, {*self.living, *self.symbols}, budget=budget)
        system.single = dict(reduced.single)
        system.keep = keep
        system.longest_solution = longest
        for number in seeds:
            system.insert(number, priority=len(reduced.derivation.words[number]) // 2)
        eliminated = [g for g, _ in reduced.solutions() if g <= self.rank]
        late = {goal: g for g in eliminated if (goal := ("generator", g, 0)) in self.goals}
        system.set_goals({goal: word for goal, word in self.goals.items() if goal not in late}, {})
        if not system.run(work=budget.left):
            return None
        system.set_goals({goal: self.goals[goal] for goal in late}, dict[Hashable, int]((*late.items(),)))
        if not system.run(work=budget.left):
            return None
        return [system.proved[goal] for goal in self.goals]


def conjugate_pairs(group: NilpotentPresentation) -> list[tuple[int, int]]:
    """(j, i), i of weight 1 and j > i: the conjugates a_j^(a_i) that a central chain has to prove."""
    size = len(group.weights)
    return [(j, i) for j in range(size) for i in range(j) if group.weights[i] == 1]


def _symbols(rank: int, living: Sequence[int], group: NilpotentPresentation) -> tuple[tuple[int, ...], tuple[Word, ...]]:
    """The numbers of a_1..a_q among the symbols, and the words of those defined as commutators (numbered from rank + 1)."""
    symbols: list[int] = []
    definitions: list[Word] = []
    for _, *places in group.definitions:
        if len(places) == 1:
            symbols.append(living[places[0] - 1])
        else:
            j, i = places
            definitions.append(commutator((symbols[j],), (symbols[i],)))
            symbols.append(rank + len(definitions))
    return tuple(symbols), tuple(definitions)
