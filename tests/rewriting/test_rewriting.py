"""The log: every entry multiplies out; cuts keep goals; orderings are orderings; moves keep the group."""

from __future__ import annotations

import itertools

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.rewriting import Completion, Derivation, RecursivePath, RelatorSet, Shortlex, WeightedShortlex, simplify
from lowindex.rewriting.strings import encoded
from lowindex.words import Word, cyclic_form, inverse, product, reduced

ORDERS = [Shortlex([1, 2]), WeightedShortlex([2, 1], {1: 1, 2: 3}), RecursivePath([1, 2])]


def multiplied_out(given_words: list[Word], proof: object) -> list[Word]:
    """Words of all equations, each lemma checked by free reduction, with tuples and nothing of the library's strings."""
    words = [reduced(word) for word in given_words]
    for lemma in proof.lemmas:  # type: ignore[attr-defined]
        value: list[int] = []
        for u, j, sign in lemma.factors:
            value += [*u, *(words[j] if sign > 0 else inverse(words[j])), *inverse(u)]
        assert reduced(value) == lemma.word
        words.append(lemma.word)
    return words


@pytest.mark.parametrize("order", ORDERS)
def test_orderings_are_total_and_compatible(order: Shortlex) -> None:
    words = [encoded(reduced(w)) for n in range(4) for w in itertools.product((1, -1, 2, -2), repeat=n)]
    words = sorted(set(words))
    for u, v in itertools.combinations(words, 2):
        assert order.greater(u, v) != order.greater(v, u)
    for u, v in itertools.islice(itertools.combinations(words, 2), 0, None, 7):
        small, large = (u, v) if order.greater(v, u) else (v, u)
        for x in (encoded((1,)), encoded((-2,))):
            assert order.greater(x + large, x + small)
            assert order.greater(large + x, small + x)


def completed(rank: int, relators: list[Word], goals: list[Word], order: Shortlex) -> Completion:
    system = Completion(Derivation(relators), order, range(1, rank + 1), budget=Budget(2_000_000))
    for number, word in enumerate(relators):
        system.insert(number, priority=len(word) // 2)
    system.set_goals(dict(enumerate(goals)), {})
    system.run(work=500_000)
    return system


def test_heisenberg_centre_by_completion() -> None:
    a, b, c = (1,), (2,), (3,)
    relators = [(-2, -1, 2, 1, -3), (-3, -1, 3, 1), (-3, -2, 3, 2)]
    power = product(*[(-2, -2, -1, -1, 2, 2, 1, 1), (-3,) * 4])
    system = completed(3, relators, [power], RecursivePath([3, 2, 1]))
    assert system.finished
    proof = system.derivation.cut([system.proved[0]])
    words = multiplied_out(relators, proof)
    assert cyclic_form(words[proof.goals[0]]) == cyclic_form(power)
    # and what is false stays open, in every ordering
    for order in (Shortlex([1, 2, 3]), RecursivePath([3, 2, 1])):
        assert len(completed(3, relators, [product(a, c), product(a, b)], order).goals) == 2


@settings(max_examples=60, deadline=None)
@given(st.lists(st.lists(st.sampled_from([1, -1, 2, -2, 3, -3]), min_size=1, max_size=9).map(tuple), min_size=1, max_size=5))
def test_simplification_is_logged_and_keeps_the_abelianization(words: list[Word]) -> None:
    relators = [reduced(word) for word in words]
    system = RelatorSet(Derivation(relators), Shortlex([1, 2, 3]), [1, 2, 3], budget=Budget(300_000))
    for number in range(len(relators)):
        system.insert(number)
    simplify(system)
    derivation = system.derivation
    assert all(derivation.holds(number) for number in range(len(derivation.words)))
    before = abelianization(3, relators)
    after = abelianization(len(system.alive), system.renumbered_words())
    assert (before.betti, before.torsion) == (after.betti, after.torsion)
    # the images are those of a homomorphism: relators of the original map to words that are trivial in the abelianization
    images = system.renumbered_images(3)
    pulled = [product(*(images[x - 1] if x > 0 else inverse(images[-x - 1]) for x in word)) for word in relators]
    whole = abelianization(len(system.alive), [*system.renumbered_words(), *pulled])
    assert (whole.betti, whole.torsion) == (after.betti, after.torsion)


def test_cut_keeps_only_what_goals_use() -> None:
    derivation = Derivation([(1, 1), (2, 2), (1, 2, 1, 2)])
    system = Completion(derivation, Shortlex([1, 2]), [1, 2], budget=Budget(100_000))
    for number in range(3):
        system.insert(number)
    system.set_goals({0: (1, 2, -1, -2)}, {})
    assert system.run(work=50_000)
    proof = derivation.cut([system.proved[0]])
    assert len(proof.lemmas) <= 3
    assert multiplied_out([(1, 1), (2, 2), (1, 2, 1, 2)], proof)[proof.goals[0]] in [(1, 2, -1, -2)[k:] + (1, 2, -1, -2)[:k] for k in range(4)]
