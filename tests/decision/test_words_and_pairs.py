"""Words proved trivial or separated; groups told apart."""

from __future__ import annotations

import pytest
from corpus import cyclic, flat, nilpotent

from lowindex.budget import Budget
from lowindex.checker import Refused, check
from lowindex.cli.main import main
from lowindex.decision import NONTRIVIAL, TRIVIAL, UNDECIDED, compare, decide_word
from lowindex.words import Presentation

HIGMAN = "⟨a, b, c, d | a^-1ba=b^2, b^-1cb=c^2, c^-1dc=d^2, d^-1ad=a^2⟩"

TRIVIAL_WORDS = [
    ("⟨a, b | a^2, b^3, (ab)^5⟩", "(b a)^10"),
    ("⟨a, b | a^2 = b^3⟩", "[a^2, b]"),
    ("⟨a, b | a b a = b a b⟩", "[(a b a)^2, a]"),
    ("⟨a, b | [a,b,a], [a,b,b]⟩", "[a^2, b^3] [a,b]^-6"),
    (cyclic.fibonacci(2, 7), "x1^29"),
    (cyclic.fibonacci(2, 5), "x1^11"),
    (HIGMAN, "a^-2 b a^2 b^-4"),
    ("⟨a, t | t a t^-1 = a^2⟩", "t^3 a t^-3 a^-8"),
    ("⟨a, b | ⟩", "a b b^-1 a^-1"),
]


@pytest.mark.parametrize(("text", "word"), TRIVIAL_WORDS)
def test_trivial_words(text: str, word: str) -> None:
    group = Presentation.parse(text)
    found = decide_word(group, group.word(word))
    assert found.verdict == TRIVIAL
    assert found.witness is not None
    assert check(found.witness.text, presentation=(group.names, group.relators)).claim == "word trivial"


# text, word, smallest degree
SEPARATED = [
    ("⟨a, b | a^4, a^2 = b^3⟩", "a^2", 4),  # SL(2,Z): the quotient C4
    ("⟨a, b | a b a = b a b⟩", "a b^-1", 3),
    ("⟨a, t | t a^2 t^-1 = a^3⟩", "a", 5),
    ("⟨a | ⟩", "a^12", 5),
    ("⟨a, b | a^2, b^3, (ab)^7⟩", "a", 7),
]


@pytest.mark.parametrize(("text", "word", "degree"), SEPARATED)
def test_separated_words(text: str, word: str, degree: int) -> None:
    group = Presentation.parse(text)
    found = decide_word(group, group.word(word))
    assert (found.verdict, found.degree, found.smallest) == (NONTRIVIAL, degree, True)
    assert found.witness is not None
    check(found.witness.text, presentation=(group.names, group.relators))


def test_words_that_no_finite_quotient_separates() -> None:
    """BS(2,3) is not residually finite (G. Baumslag, D. Solitar 1962): this commutator is not 1, and trivial in every finite quotient."""
    group = Presentation.parse("⟨a, t | t a^2 t^-1 = a^3⟩")
    found = decide_word(group, group.word("[t a t^-1, a]"), effort=3)
    assert found.verdict == UNDECIDED
    assert found.searched["complete_to_degree"] >= 8


def test_wrong_claims_about_words_are_refused() -> None:
    group = Presentation.parse("⟨a, b | a b a = b a b⟩")
    trivial = decide_word(group, group.word("[(a b a)^2, a]")).witness
    moved = decide_word(group, group.word("a b^-1")).witness
    assert trivial is not None
    assert moved is not None
    for text in (
        trivial.text.replace('"word":[', '"word":[1,', 1),
        trivial.text.replace('"goal":', '"goal":1', 1),
        moved.text.replace('"word":[1,-2]', '"word":[1,-1]'),
        moved.text.replace('"degree":3', '"degree":4'),
        moved.text.replace('"word not trivial"', '"word trivial"'),
    ):
        with pytest.raises(Refused):
            check(text)


TORUS_BUNDLE = "⟨x, y, t | [x,y], t x t^-1 = x^-1 y, t y t^-1 = y^-1⟩"

# pairs with equal numbers of subgroups, told apart all the same
PAIRS = [
    ("⟨a, b, c | [a,b], [a,c], [b,c]⟩", flat.FLAT_MANIFOLDS["G2"][0]),
    (flat.FLAT_MANIFOLDS["G3"][0], flat.FLAT_MANIFOLDS["G5"][0]),
    (flat.FLAT_MANIFOLDS["B1"][0], flat.FLAT_MANIFOLDS["B3"][0]),
    (flat.FLAT_MANIFOLDS["B2"][0], flat.FLAT_MANIFOLDS["B4"][0]),
    (nilpotent.HEISENBERG, TORUS_BUNDLE),
]


@pytest.mark.parametrize(("one", "two"), PAIRS)
def test_pairs_told_apart(one: str, two: str) -> None:
    groups = Presentation.parse(one), Presentation.parse(two)
    found = compare(*groups, index=8, budget=Budget())
    assert found.index is not None
    assert found.witness is not None
    report = check(found.witness.text, presentation=(groups[0].names, groups[0].relators))
    assert report.summary["index"] == found.index
    with pytest.raises(Refused):
        check(found.witness.text.replace('"other classes":[[', '"other classes":[[[0]],[[', 1))


def test_isomorphic_groups_come_out_equal() -> None:
    """F(2,6) is the group of the flat manifold G6 (H. Zieschang, E. Vogt, H.-D. Coldewey; as reported in the literature)."""
    found = compare(Presentation.parse(cyclic.fibonacci(2, 6)), Presentation.parse(flat.FLAT_MANIFOLDS["G6"][0]), index=6, budget=Budget())
    assert (found.index, found.complete_to) == (None, 6)


def test_commands(tmp_path: object, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["word", "⟨a, b | a b a = b a b⟩", "a b^-1"]) == 0
    assert "no smaller degree" in capsys.readouterr().out
    assert main(["word", "⟨a | ⟩", "b"]) == 2
    capsys.readouterr()
    assert main(["compare", "⟨a | ⟩", "⟨a, b | b⟩", "--index", "4"]) == 1
    assert "equal up to index 4, complete" in capsys.readouterr().out
    assert main(["compare", "⟨a | ⟩", "⟨a | a^2⟩", "--json"]) == 0
    assert main(["quotients", "⟨a, b | a^2, b^3⟩", "--onto", "A5", "--count", "--json"]) == 0
    assert '"kernels": 1' in capsys.readouterr().out
    assert main(["quotients", "⟨a | ⟩", "--degree", "0"]) == 2
