"""Block collection in the Heisenberg group: the sorted word is the normal form, and every lemma multiplies out."""

from __future__ import annotations

from hypothesis import given, settings
from hypothesis import strategies as st

from lowindex.rewriting import Derivation, Factor
from lowindex.rewriting.blocks import Blocks
from lowindex.rewriting.strings import decoded, encoded, inverted, joined
from lowindex.words import Word, reduced

RELATORS: list[Word] = [(-1, -2, 1, 2, -3), (-1, -3, 1, 3), (-2, -3, 2, 3)]


@settings(max_examples=200, deadline=None)
@given(st.lists(st.sampled_from([1, -1, 2, -2, 3, -3]), max_size=30))
def test_collection(letters: list[int]) -> None:
    """⟨a, b, c | [a,b] = c central⟩; as integer matrices a word has entries x, y, z, and is a^x b^y c^(x y - z) up to the sign of c."""
    derivation = Derivation(RELATORS)
    blocks = Blocks(derivation)
    for number, word in enumerate(RELATORS):
        blocks.learn(encoded(word), number)
    word = encoded(reduced(letters))
    factors: list[Factor] = []
    collected = blocks.sorted_logged(word, "", factors)
    if difference := joined(word, inverted(collected)):
        derivation.derive(difference, factors)
    assert all(derivation.holds(number) for number in range(len(derivation.words)))
    x = y = z = 0
    for letter in letters:
        # matrices with x, y beside the diagonal, z in the corner; [a, b] has z = 1, so c = (0, 0, 1)
        if abs(letter) == 1:
            x += letter
        elif abs(letter) == 2:
            sign = letter // 2
            y, z = y + sign, z + x * sign
        else:
            z += letter // 3
    form = decoded(collected)
    counts = [sum((k > 0) - (k < 0) for k in form if abs(k) == g) for g in (1, 2, 3)]
    assert counts == [x, y, z - x * y]
    assert [abs(k) for k in form if abs(k) < 3] == sorted(abs(k) for k in form if abs(k) < 3)


def test_forgotten_relators_do_not_collect() -> None:
    derivation = Derivation(RELATORS)
    blocks = Blocks(derivation)
    commutator = encoded(RELATORS[1])
    blocks.learn(commutator, 1)
    word = encoded((3, 3, 1))
    assert blocks.sorted_logged(word, "", []) == encoded((1, 3, 3))
    blocks.forget(commutator, 1)
    assert blocks.sorted_logged(word, "", []) == word
