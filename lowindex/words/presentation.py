"""Finitely presented groups: names of generators and relators."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import cached_property

from lowindex.errors import InputError, NotationError
from lowindex.words.notation import Reader, ambiguous_name, is_name, word_text
from lowindex.words.word import Word, primitive_root, reduced

_LABEL = re.compile(r"[ \t]*([^\n:<>⟨⟩|#]{1,200}?)[ \t]*:")


@dataclass(frozen=True)
class Presentation:
    """⟨names | relators⟩. Relators are nonempty freely reduced words in the letters 1..rank and their negatives. `name` is a label
    and takes no part in equality.

    >>> G = Presentation.parse("⟨a, b | a^2, (ab)^3 = 1⟩")
    >>> G.relators
    ((1, 1), (1, 2, 1, 2, 1, 2))
    >>> str(G)
    '⟨a, b | a^2, (a b)^3⟩'
    """

    names: tuple[str, ...]
    relators: tuple[Word, ...]
    name: str = field(default="", compare=False)

    def __post_init__(self) -> None:
        if len(set(self.names)) != len(self.names):
            raise InputError(f"names must be distinct, not {self.names}")
        for name in self.names:
            if not is_name(name):
                raise InputError(f"names must be a letter followed by letters, digits, _ or ', not {name!r}")
        if clash := ambiguous_name(self.names):
            raise InputError(f"names must not be products of other names: {clash[0]} can be read as {clash[1]}")
        for word in self.relators:
            if not word or reduced(word) != word or any(not 1 <= abs(x) <= len(self.names) for x in word):
                raise InputError(f"relators must be nonempty reduced words in the letters ±1..±{len(self.names)}, not {word}")

    @classmethod
    def parse(cls, text: str) -> Presentation:
        """Read one presentation, with or without a label `name:` before it. NotationError when that fails."""
        found = parse_file(text)
        if len(found) != 1:
            raise NotationError(f"expected one presentation, found {len(found)}")
        return found[0]

    @classmethod
    def from_relators(cls, names: int | Sequence[str], relators: Iterable[Iterable[int]], *, name: str = "") -> Presentation:
        """From words that need not be reduced; a number of generators names them a, b, ... (up to 26) or x1, x2, ..."""
        if isinstance(names, int):
            names = [chr(97 + k) for k in range(names)] if names <= 26 else [f"x{k + 1}" for k in range(names)]
        words = (reduced(word) for word in relators)
        return cls(tuple(names), tuple(word for word in words if word), name)

    @property
    def rank(self) -> int:
        """Number of generators."""
        return len(self.names)

    def word(self, text: str) -> Word:
        """Read a word in the generators."""
        reader = Reader(text)
        reader.names = {name: k for k, name in enumerate(self.names, 1)}
        word = reader.product()
        if reader.peek():
            raise reader.error(f"expected the end of the word, found {reader.found()}")
        return word

    def words(self, text: str) -> tuple[Word, ...]:
        """Read words separated by commas.

        >>> Presentation.parse("⟨a, b | ⟩").words("a^2, [a,b]")
        ((1, 1), (-1, -2, 1, 2))
        """
        reader = Reader(text)
        reader.names = {name: k for k, name in enumerate(self.names, 1)}
        found = [reader.product()]
        while reader.accept(","):
            found.append(reader.product())
        if reader.peek():
            raise reader.error(f"expected ',' or the end of the words, found {reader.found()}")
        return tuple(found)

    def text(self, word: Word) -> str:
        """A word as text; "1" for the empty word."""
        return word_text(word, self.names)

    def __str__(self) -> str:
        names = ", ".join(self.names)
        relators = ", ".join(map(self._relator_text, self.relators))
        return f"⟨{names} | {relators}⟩" if relators else f"⟨{names} | ⟩"

    def _relator_text(self, word: Word) -> str:
        root, n = primitive_root(word)
        return f"({self.text(root)})^{n}" if n > 1 and len(set(root)) > 1 else self.text(word)

    @cached_property
    def digest(self) -> str:
        """SHA-256 of the canonical text, in hexadecimal."""
        return hashlib.sha256(str(self).encode()).hexdigest()

    def spelled(self, word: Word) -> SpelledWord:
        """A word with the names of the generators, for people and notebooks.

        >>> print(Presentation.parse("⟨x_1, y | ⟩").spelled((1, 1, -2)))
        x_1^2 y^-1
        """
        return SpelledWord(self, word)

    def _latex(self, text: str) -> str:
        """Words as text, in LaTeX."""
        text = re.sub(r"\^(-?\d+)", r"^{\1}", text).replace(" ", r"\,")
        for name in sorted(self.names, key=len, reverse=True):
            if _latex_name(name) != name:
                text = re.sub(rf"(?<![\w'{{]){re.escape(name)}(?![\w'])", lambda _, n=name: _latex_name(n), text)  # type: ignore[misc]
        return text

    def _repr_latex_(self) -> str:
        relators = ", ".join(self._latex(self._relator_text(word)) for word in self.relators)
        return rf"$\langle {', '.join(map(_latex_name, self.names))} \mid {relators}\rangle$"


def _latex_name(name: str) -> str:
    stem, digits = re.fullmatch(r"(.*?)_?(\d*)", name).groups()  # type: ignore[union-attr]
    return f"{stem}_{{{digits}}}" if digits and stem else name.replace("_", r"\_")


@dataclass(frozen=True)
class SpelledWord:
    """A word of a presentation, shown with its names."""

    presentation: Presentation
    word: Word

    def __str__(self) -> str:
        return self.presentation.text(self.word)

    def _repr_latex_(self) -> str:
        return f"${self.presentation._latex(str(self))}$"


def parse_file(text: str) -> list[Presentation]:
    """Read presentations, each optionally labelled `name: ⟨…⟩`, with blank lines and comments between them. NotationError with the line
    of the file when that fails."""
    reader = Reader(text)
    found: list[Presentation] = []
    while reader.peek():
        label = ""
        if match := _LABEL.match(text, reader.at):
            label = match.group(1).strip()
            reader.at = match.end()
        reader.names, reader.letters, reader.depth = {}, 0, 0
        names, relators = reader.presentation()
        found.append(Presentation(names, relators, label))
        if reader.peek() in tuple(",;"):
            raise reader.error(f"expected a new line or the end after a presentation, found {reader.found()}")
    if not found:
        raise reader.error("expected a presentation, found nothing but blanks and comments")
    return found
