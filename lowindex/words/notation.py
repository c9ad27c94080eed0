"""Textbook notation: presentations and words as text.

    presentation   ⟨a, b | a^2, b^3 = (a b)^7 = 1⟩       also < a, b | ... >; the part behind | may be empty or missing
    generator      a letter (Latin or Greek), then letters, digits, underscores, primes
    product        a b, a*b, a·b, or ab read against the declared generators
    power          a^3, a^-1, a^{-1}, a^(-1), a⁻¹, (a b)^2
    conjugate      u^v = v^-1 u v, v a generator or a bracket
    commutator     [u, v] = u^-1 v^-1 u v, [u, v, w] = [[u, v], w]
    identity       1
    equation       u = v; a chain u = v = w says that all are equal (each is divided by the last)
    comment        # to the end of the line

`^` binds tighter than products and is read from the left: a^b^2 = (a^b)^2. Words are expanded and freely reduced as they are read;
an exponent that would make more than MOST_LETTERS letters is refused before anything is expanded.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

from lowindex.errors import NotationError
from lowindex.words.word import Word, commutator, conjugate, inverse, power, product, reduced

MOST_LETTERS = 1_000_000
MOST_GENERATORS = 10_000
MOST_CHARACTERS = 16_000_000
DEEPEST = 100

LETTER = "A-Za-zΑ-ΡΣ-Ωα-ω"
_NAME = re.compile(f"[{LETTER}][{LETTER}0-9_'′]*")
_FOLLOWED = re.compile(f"([{LETTER}][{LETTER}0-9_']*)[ \\t]+(?=[{LETTER}])")
_BLANK = re.compile(r"(?:\s+|#[^\n]*)+")
_INTEGER = re.compile(r"[-+−]?\s*[0-9]+")
_SUPERSCRIPT = re.compile("[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+")
_PLAIN = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺−", "0123456789-+-")
_BRACKETED_INTEGER = re.compile(r"([({])\s*([-+−]?\s*[0-9]+)\s*([)}])")
_CLOSING = {"(": ")", "{": "}", "[": "]", "⟨": "⟩", "<": ">"}


def is_name(text: str) -> bool:
    """Whether the text may name a generator.

    >>> is_name("x_12"), is_name("2x")
    (True, False)
    """
    return bool(_NAME.fullmatch(text))


def readings(run: str, names: dict[str, int]) -> list[tuple[str, ...]]:
    """The ways (at most two are looked for) to cut `run` into names, longest name first.

    >>> readings("aba", {"a": 1, "b": 2})
    [('a', 'b', 'a')]
    """
    longest = max(map(len, names), default=0)
    # ways[i]: number of readings of run[i:], counted up to 2
    ways = [0] * len(run) + [1]
    for i in range(len(run) - 1, -1, -1):
        ways[i] = min(2, sum(ways[j] for j in range(i + 1, min(i + longest, len(run)) + 1) if run[i:j] in names))
    found: list[tuple[str, ...]] = []
    for turn in range(ways[0]):
        parts: list[str] = []
        i, skip = 0, turn
        while i < len(run):
            for j in range(min(i + longest, len(run)), i, -1):
                if run[i:j] in names and ways[j]:
                    if skip and ways[j] <= skip:
                        skip -= ways[j]
                        continue
                    parts.append(run[i:j])
                    i = j
                    break
        found.append(tuple(parts))
    return found


class Reader:
    """A place in a text, and the grammar above by recursive descent."""

    def __init__(self, text: str, *, first_line: int = 1) -> None:
        self.text = text
        self.at = 0
        self.first_line = first_line
        self.names: dict[str, int] = {}
        self.letters = 0
        self.depth = 0
        if len(text) > MOST_CHARACTERS:
            raise self.error(f"the text has {len(text)} characters; at most {MOST_CHARACTERS} are read", 0)

    # -- errors and tokens

    def error(self, message: str, at: int | None = None) -> NotationError:
        """The error at a place of the text (here, if none is given)."""
        at = min(self.at if at is None else at, len(self.text))
        start = self.text.rfind("\n", 0, at) + 1
        end = self.text.find("\n", at)
        end = len(self.text) if end < 0 else end
        shift = max(0, at - start - 60)
        shown = "".join(c if c.isprintable() else "?" for c in self.text[start + shift : min(end, start + shift + 100)])
        place = shown + "\n" + " " * (at - start - shift) + "^"
        line = self.first_line + self.text.count("\n", 0, at)
        return NotationError(message, line=line, column=at - start + 1, place=place)

    def peek(self) -> str:
        """The next character that is not blank, "" at the end."""
        if blank := _BLANK.match(self.text, self.at):
            self.at = blank.end()
        return self.text[self.at : self.at + 1]

    def accept(self, characters: str) -> str:
        """Read the next character if it is one of these."""
        character = self.peek()
        if character and character in characters:
            self.at += 1
            return character
        return ""

    def expect(self, character: str, why: str) -> None:
        """Read this character or fail."""
        if not self.accept(character):
            raise self.error(f"expected {character!r} {why}, found {self.found()}")

    def found(self) -> str:
        """What stands here, for messages."""
        character = self.peek()
        if not character:
            return "the end of the text"
        return repr(character) if character.isprintable() else f"the character U+{ord(character):04X}"

    # -- presentations

    def presentation(self) -> tuple[tuple[str, ...], tuple[Word, ...]]:
        """⟨names | relations⟩."""
        opening = self.accept("⟨<")
        if not opening:
            raise self.error(f"expected a presentation, which starts with ⟨ or <, found {self.found()}")
        closing = _CLOSING[opening]
        names = self._names(closing)
        relators: list[Word] = []
        if self.accept("|") and self.peek() != closing:
            relators += self._relation()
            while self.accept(","):
                relators += self._relation()
        if not self.accept(closing):
            raise self.error(f"expected ',' or {closing!r} after a relation, found {self.found()}")
        return names, tuple(word for word in relators if word)

    def _names(self, closing: str) -> tuple[str, ...]:
        names: list[str] = []
        while self.peek() not in ("|", closing) or names:
            start = self.at
            match = _NAME.match(self.text, self.at)
            if not match:
                raise self.error(f"expected the name of a generator (a letter, then letters, digits, _ or '), found {self.found()}")
            name = match.group().replace("′", "'")
            if name in self.names:
                raise self.error(f"the generator {name} is declared twice", start)
            self.at = match.end()
            names.append(name)
            self.names[name] = len(names)
            if len(names) > MOST_GENERATORS:
                raise self.error(f"more than {MOST_GENERATORS} generators", start)
            if not self.accept(","):
                if self.peek() not in ("|", closing):
                    raise self.error(f"expected ',', '|' or {closing!r} after a generator, found {self.found()}")
                break
        clash = ambiguous_name(names)
        if clash:
            raise self.error(f"the generator {clash[0]} can also be read as the product {clash[1]}: rename it", 0)
        return tuple(names)

    def _relation(self) -> list[Word]:
        sides = [self.product()]
        while self.accept("="):
            sides.append(self.product())
        words = sides if len(sides) == 1 else [product(side, inverse(sides[-1])) for side in sides[:-1]]
        self.letters += sum(map(len, words))
        self._limit(0, self.at)
        return words

    # -- words

    def product(self) -> Word:
        """One or more factors."""
        letters: list[int] = []
        self._plain_factors(letters)
        letters += self._factor()
        while True:
            self._plain_factors(letters)
            if self.accept("*·") or self._starts_factor():
                letters += self._factor()
            else:
                return reduced(letters)
            self._limit(len(letters), self.at)

    def _plain_factors(self, letters: list[int]) -> None:
        """Read generators that are followed by a blank and another letter: the quick way through long words."""
        while match := _FOLLOWED.match(self.text, self.at):
            number = self.names.get(match[1])
            if number is None:
                return
            letters.append(number)
            self.at = match.end()
            if len(letters) + self.letters > MOST_LETTERS:
                self._limit(len(letters), self.at)

    def _starts_factor(self) -> bool:
        character = self.peek()
        return bool(character) and (character in "([1" or bool(_NAME.match(self.text, self.at)))

    def _factor(self) -> Word:
        start = self.at
        character = self.peek()
        if match := _NAME.match(self.text, self.at):
            *before, last = self._run(match)
            return product(*before, self._postfixes(last, start))
        if character == "1":
            self.at += 1
            if self.text[self.at : self.at + 1].isdigit():
                raise self.error("a number other than 1 is not a word", start)
            return self._postfixes((), start)
        if character in "([" and character:
            return self._postfixes(self._bracket(), start)
        raise self.error(f"expected a word (a generator, 1, '(' or '['), found {self.found()}")

    def _run(self, match: re.Match[str]) -> list[Word]:
        """The generators of a run of letters without blanks."""
        run = match.group().replace("′", "'")
        if run in self.names:
            parts: tuple[str, ...] = (run,)
        else:
            found = readings(run, self.names)
            if not found:
                generators = shortened(", ".join(self.names))
                raise self.error(f"{shortened(run)} is not a product of the generators {generators}{capital_hint(run, self.names)}")
            if len(found) > 1:
                one, two = (shortened(" ".join(parts)) for parts in found)
                raise self.error(f"{shortened(run)} can be read as {one} and as {two}: separate the factors")
            parts = found[0]
        self.at = match.end()
        return [(self.names[name],) for name in parts]

    def _bracket(self) -> Word:
        start = self.at
        opening = self.text[start]
        self.at += 1
        self.depth += 1
        if self.depth > DEEPEST:
            raise self.error(f"brackets are nested more than {DEEPEST} deep", start)
        word = self.product()
        if opening == "[":
            if self.peek() != ",":
                raise self.error(f"expected ',' in the commutator, found {self.found()}")
            while self.accept(","):
                other = self.product()
                self._limit(2 * (len(word) + len(other)), start)
                word = commutator(word, other)
        self.expect(_CLOSING[opening], f"to close the {opening!r} at column {start - self.text.rfind(chr(10), 0, start)}")
        self.depth -= 1
        return word

    def _postfixes(self, word: Word, start: int) -> Word:
        while True:
            if match := _SUPERSCRIPT.match(self.text, self.at):
                word = self._power(word, match.group().translate(_PLAIN), start)
                self.at = match.end()
            elif self.accept("^"):
                word = self._exponent(word, start)
            else:
                return word

    def _exponent(self, word: Word, start: int) -> Word:
        character = self.peek()
        if match := _INTEGER.match(self.text, self.at) or _BRACKETED_INTEGER.match(self.text, self.at):
            groups = match.groups()
            if groups and _CLOSING[groups[0]] != groups[2]:
                raise self.error(f"expected {_CLOSING[groups[0]]!r} behind the exponent", match.end() - 1)
            result = self._power(word, groups[1] if groups else match.group(), start)
            self.at = match.end()
            return result
        if match := _NAME.match(self.text, self.at):
            by = self._run(match)
            if len(by) > 1:
                raise self.error("after ^ stands one generator or a bracket: write the conjugating word in brackets", match.start())
            conjugator = by[0]
        elif character and character in "([":
            conjugator = self._bracket()
        else:
            raise self.error(f"expected an exponent, a generator or a bracket after '^', found {self.found()}")
        self._limit(len(word) + 2 * len(conjugator), start)
        return conjugate(word, conjugator)

    def _power(self, word: Word, exponent: str, start: int) -> Word:
        digits = exponent.translate(_PLAIN).replace(" ", "").replace("\n", "").replace("\t", "")
        if len(digits) > 12:
            if not word:
                return word
            raise self.error(f"the exponent {shortened(digits)} would make more than {MOST_LETTERS} letters", start)
        n = int(digits)
        self._limit(len(word) * abs(n), start)
        return power(word, n)

    def _limit(self, more: int, start: int) -> None:
        if self.letters + more > MOST_LETTERS:
            raise self.error(f"the presentation would have more than {MOST_LETTERS} letters", start)


def ambiguous_name(names: Sequence[str]) -> tuple[str, str] | None:
    """A name that is also a product of other names, with that product; None when there is none."""
    known = {name: k for k, name in enumerate(names)}
    if len({len(name) for name in names}) > 1:
        for name in names:
            for parts in readings(name, known):
                if len(parts) > 1:
                    return name, " ".join(parts)
    return None


def capital_hint(run: str, names: dict[str, int]) -> str:
    """A remark for those who write inverses as capital letters."""
    return "; an inverse is written a^-1" if readings(run.lower(), names) else ""


def shortened(text: str) -> str:
    """Text cut to a length that fits into a message."""
    return text if len(text) <= 60 else text[:57] + "..."


def word_text(word: Word, names: Sequence[str]) -> str:
    """The word as text that reads back to the same letters: "a b^-1 (a b)^3"-style powers, "1" for the empty word.

    >>> word_text((1, 1, -2), ("a", "b"))
    'a^2 b^-1'
    """
    if not word:
        return "1"
    parts: list[str] = []
    start = 0
    while start < len(word):
        end = start
        while end < len(word) and word[end] == word[start]:
            end += 1
        n = (end - start) * (1 if word[start] > 0 else -1)
        parts.append(names[abs(word[start]) - 1] + ("" if n == 1 else f"^{n}"))
        start = end
    return " ".join(parts)
