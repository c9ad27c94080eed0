"""The notation: everything it allows, and every kind of mistake with its place."""

from __future__ import annotations

import time
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lowindex.errors import InputError, NotationError
from lowindex.words import Presentation, parse_file, reduced

READ = [
    ("⟨a, b | a^2, b^3, (ab)^7⟩", ("a", "b"), ((1, 1), (2, 2, 2), (1, 2) * 7)),
    ("< a, b | a^2, b^3, (a*b)^7 >", ("a", "b"), ((1, 1), (2, 2, 2), (1, 2) * 7)),
    ("⟨x, y | x·y x⁻¹ = y², 1⟩", ("x", "y"), ((1, 2, -1, -2, -2),)),
    ("⟨x1, x_12, t' | x1^-1 x_12 t′, x1^{-2}, x1^( 3 )⟩", ("x1", "x_12", "t'"), ((-1, 2, 3), (-1, -1), (1, 1, 1))),
    ("⟨a, b | [a,b], [a,b,a]⟩", ("a", "b"), ((-1, -2, 1, 2), (-2, -1, 2, 1, -1, -1, -2, 1, 2, 1))),
    ("⟨a, b | a^b = a^-1, a^(a b)⟩", ("a", "b"), ((-2, 1, 2, 1), (-2, 1, 2))),
    ("⟨a, b | a^2 = b^3 = (ab)^5 = 1⟩", ("a", "b"), ((1, 1), (2, 2, 2), (1, 2) * 5)),
    ("⟨a, b | a = b = a b⟩", ("a", "b"), ((1, -2, -1), (2, -2, -1))),
    ("⟨a, b⟩", ("a", "b"), ()),
    ("⟨a |⟩", ("a",), ()),
    ("⟨ | ⟩", (), ()),
    ("⟨α, β | αβα = βαβ⟩ # braids", ("α", "β"), ((1, 2, 1, -2, -1, -2),)),
    ("⟨a, ab' | ab'a⟩", ("a", "ab'"), ((2, 1),)),
]


@pytest.mark.parametrize(("text", "names", "relators"), READ)
def test_reads(text: str, names: tuple[str, ...], relators: tuple[tuple[int, ...], ...]) -> None:
    presentation = Presentation.parse(text)
    assert presentation.names == names
    assert presentation.relators == tuple(word for word in map(reduced, relators) if word)
    assert Presentation.parse(str(presentation)) == presentation


MISTAKES = [
    ("⟨a, b | c⟩", 1, 9, "c is not a product of the generators a, b"),
    ("⟨a, b | A b⟩", 1, 9, "an inverse is written a^-1"),
    ("⟨a, a | ⟩", 1, 5, "declared twice"),
    ("⟨a |\n a^1000000000⟩", 2, 2, "more than 1000000 letters"),
    ("⟨a | a^99999999999999999999⟩", 1, 6, "more than 1000000 letters"),
    ("⟨a | ((a)^2⟩", 1, 12, "expected ')'"),
    ("⟨a, ab, bc, c | abc⟩", 1, 17, "abc can be read as ab c and as a bc"),
    ("⟨a, b, ab | ⟩", 1, 1, "ab can also be read as the product a b"),
    ("⟨a | a", 1, 7, "found the end of the text"),
    ("⟨a | a^⟩", 1, 8, "expected an exponent"),
    ("⟨a | a^b⟩", 1, 8, "b is not a product"),
    ("⟨a | [a]⟩", 1, 8, "expected ',' in the commutator"),
    ("⟨a | 2⟩", 1, 6, "expected a word"),
    ("⟨a | 11⟩", 1, 6, "a number other than 1"),
    ("⟨a | a^{2)⟩", 1, 10, "expected '}'"),
    ("hello", 1, 1, "expected a presentation"),
    ("# nothing\n", 2, 1, "nothing but blanks"),
    ("⟨a | a⟩ ⟨", 1, 10, "expected the name of a generator"),
    ("⟨а | ⟩", 1, 2, "expected the name of a generator"),  # a Cyrillic letter
    ("⟨a | a\0⟩", 1, 7, "U+0000"),
]


@pytest.mark.parametrize(("text", "line", "column", "message"), MISTAKES)
def test_mistakes(text: str, line: int, column: int, message: str) -> None:
    with pytest.raises(NotationError) as caught:
        Presentation.parse(text)
    assert (caught.value.line, caught.value.column) == (line, column)
    assert message in str(caught.value)
    shown, pointer = caught.value.place.split("\n")
    assert pointer.strip() == "^" and pointer.index("^") <= len(shown)


@pytest.mark.parametrize(
    "text",
    ["⟨a | " + "(" * 1_000_000, "[" * 1_000_000, "⟨a | (((a^1000)^1000)^1000)⟩", "⟨a" * 300_000, "\ufeff⟨a|⟩", "⟨a | a^-" + "9" * 100_000,
     "⟨" + ",".join(f"x{i}" for i in range(20_000)) + "|⟩", "⟨a,b | " + "[a," * 40 + "b" + "]" * 40 + "⟩"],
)
def test_hostile_text_is_refused_quickly(text: str) -> None:
    began = time.monotonic()
    with pytest.raises(InputError):
        Presentation.parse(text)
    assert time.monotonic() - began < 2


def test_large_input_is_read() -> None:
    group = Presentation.parse("⟨a, b | " + "a b " * 400_000 + "⟩")
    assert len(group.relators[0]) == 800_000


def test_files() -> None:
    text = "# two groups\n\nfirst: ⟨a |\n   a^2⟩\n⟨b | ⟩  # free\n"
    first, second = parse_file(text)
    assert (first.name, str(first)) == ("first", "⟨a | a^2⟩")
    assert (second.name, str(second)) == ("", "⟨b | ⟩")
    with pytest.raises(NotationError) as caught:
        parse_file("one: ⟨a | ⟩\ntwo: ⟨a | b⟩")
    assert (caught.value.line, caught.value.column) == (2, 11)


NAMES = st.lists(st.from_regex(r"[a-zA-Z][0-9_]{0,2}'?", fullmatch=True), min_size=1, max_size=4, unique=True)


@given(NAMES, st.data())
def test_print_and_read_back(names: list[str], data: st.DataObject) -> None:
    letters = st.integers(1, len(names)).flatmap(lambda k: st.sampled_from([k, -k]))
    words = data.draw(st.lists(st.lists(letters, max_size=12).map(lambda w: w * data.draw(st.integers(1, 3))), max_size=4))
    group = Presentation.from_relators(names, words)
    assert Presentation.parse(str(group)) == group
    for word in group.relators:
        assert group.word(group.text(word)) == word


@given(st.lists(st.sampled_from([1, -1, 2, -2]), max_size=30), st.lists(st.sampled_from([1, -1, 2, -2]), max_size=30))
def test_free_reduction_is_a_normal_form(left: list[int], right: list[int]) -> None:
    once = reduced(left)
    assert reduced(once) == once
    assert all(x != -y for x, y in pairwise(once))
    assert reduced([*left, *right]) == reduced([*reduced(left), *reduced(right)])
    assert reduced([*left, *(-x for x in reversed(left))]) == ()


def test_presentation_refuses_bad_data() -> None:
    for names, relators in ((("a", "a"), ()), (("1a",), ()), (("a",), ((2,),)), (("a",), ((1, -1),)), (("a",), ((),))):
        with pytest.raises(InputError):
            Presentation(names, relators)
