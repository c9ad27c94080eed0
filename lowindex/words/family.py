"""Families of presentations with integer parameters.

    ⟨x_i (i mod n) | x_i x_{i+1} = x_{i+2}⟩                 generators x_0, ..., x_(n-1), one relation for every i
    ⟨a, b | a^p, b^q, (a b)^r⟩ where p <= q <= r and 1/p + 1/q + 1/r < 1

An index _{...} or _i and an exponent ^{...} or ^p may be any integer expression in the parameters and, for indices, the index variable;
indices are taken modulo the range of their generators. A relation is repeated for every value of the index variables that occur in it.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import product as tuples

from lowindex.errors import InputError, NotationError
from lowindex.words.expressions import WORDS, Expression, Value
from lowindex.words.notation import LETTER, Reader
from lowindex.words.presentation import Presentation

MOST_MEMBERS = 1_000_000
MOST_TEXT = 4_000_000

_DECLARED = re.compile(rf"\s*([{LETTER}][{LETTER}'′]*)_([{LETTER}])\s*\(\s*([{LETTER}])\s+mod\s+([^()]+)\)\s*")
_INDEX = re.compile(rf"([{LETTER}][{LETTER}'′]*)_(?:\{{([^{{}}]*)\}}|([{LETTER}0-9]))")
_POWER = re.compile(r"\^\s*(?:\{([^{}]*)\}|([-−]?\s*[^\W\d_]\w*))")
_WHERE = re.compile(r"\bwhere\b")
_NAMES = re.compile(r"[^\W\d_]\w*")


@dataclass(frozen=True)
class Member:
    """One presentation of a family with the values of its parameters."""

    parameters: dict[str, int]
    presentation: Presentation


@dataclass(frozen=True)
class _Indexed:
    stem: str
    variable: str
    start: int
    end: int


class Family:
    """A family read from text. `parameters`: the names that need values."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.reader = Reader(text)
        where = _WHERE.search(text)
        self.body_end = where.start() if where else len(text)
        self.condition_start = where.end() if where else None
        opening = re.search("[⟨<]", text)
        bar = text.find("|", 0, self.body_end)
        closing = text.rfind({"⟨": "⟩", "<": ">"}[opening[0]] if opening else "⟩", 0, self.body_end)
        if opening is None or opening.start() >= self.body_end or closing < 0:
            raise self.reader.error("expected a family ⟨generators | relations⟩, perhaps with a condition after the word where", 0)
        self.open = opening.start()
        self.bar = bar if 0 <= bar < closing else closing
        self.close = closing
        if rest := text[closing + 1 : self.body_end].strip():
            raise self.reader.error(f"expected the end or the word where, found {rest[:20]!r}", closing + 1)
        self.indexed: dict[str, _Indexed] = {}
        self.plain: list[str] = []
        self._declare()
        self.parameters = self._parameters()

    def _declare(self) -> None:
        start = self.open + 1
        for part in self.text[start : self.bar].split(","):
            match = _DECLARED.fullmatch(part)
            if match:
                if match[2] != match[3]:
                    raise self.reader.error(f"the index of {match[1]} is {match[2]}, but the range is that of {match[3]}", start)
                offset = start + match.start(4)
                self.indexed[match[1]] = _Indexed(match[1], match[2], offset, start + match.end(4))
            elif "(" in part or "_{" in part:
                raise self.reader.error("expected generators such as a, b or x_i (i mod n)", start)
            elif part.strip():
                self.plain.append(part.strip())
            start += len(part) + 1

    def _parameters(self) -> tuple[str, ...]:
        variables = {item.variable for item in self.indexed.values()}
        found: dict[str, None] = {}
        pieces = [self.text[item.start : item.end] for item in self.indexed.values()]
        relations = self.text[self.bar : self.close]
        pieces += [match[2] or "" for match in _INDEX.finditer(relations) if match[1] in self.indexed]
        for match in _POWER.finditer(relations):
            piece = match[1] if match[1] is not None else match[2]
            if match[1] is not None or not self._is_generator(piece.lstrip("-− ")):
                pieces.append(piece)
        if self.condition_start is not None:
            pieces.append(self.text[self.condition_start :])
        for piece in pieces:
            for name in _NAMES.findall(piece):
                if name not in WORDS and name not in variables and not self._is_generator(name):
                    found[name] = None
        return tuple(found)

    def _is_generator(self, name: str) -> bool:
        """Whether a power of this is a conjugate: it begins with the name of a generator."""
        return any(name.startswith(known) for known in self.plain) or any(name.startswith(f"{stem}_") for stem in self.indexed)

    def member(self, values: Mapping[str, int]) -> Presentation | None:
        """The presentation for these values; None when the condition excludes them. NotationError where the text cannot be read."""
        missing = [name for name in self.parameters if name not in values]
        if missing:
            raise InputError(f"the family needs a value of {missing[0]}; give it, such as {missing[0]}=2..10")
        known: dict[str, Value] = {name: Fraction(value) for name, value in values.items()}
        if self.condition_start is not None and not Expression(self.text, known, start=self.condition_start).condition():
            return None
        sizes: dict[str, int] = {}
        ranges: dict[str, int] = {}
        for item in self.indexed.values():
            size = Expression(self.text, known, start=item.start, end=item.end).integer()
            if not 1 <= size <= 10_000:
                raise self.reader.error(f"{item.stem} has {size} generators; a range must be from 1 to 10000", item.start)
            if ranges.setdefault(item.variable, size) != size:
                raise self.reader.error(f"the index {item.variable} has two ranges", item.start)
            sizes[item.stem] = size
        names = [*self.plain, *(f"{stem}_{k}" for stem, size in sizes.items() for k in range(size))]
        relations = list(self._relations(known, sizes, ranges))
        if sum(map(len, relations)) > MOST_TEXT:
            raise self.reader.error(f"the relations have more than {MOST_TEXT} characters", self.bar)
        try:
            return Presentation.parse(f"⟨{', '.join(names)} | {', '.join(relations)}⟩")
        except NotationError as error:
            shown = ", ".join(f"{name} = {value}" for name, value in values.items()) or "no parameters"
            raise InputError(f"the family with {shown} cannot be read: {error}") from None

    def _relations(self, known: dict[str, Value], sizes: dict[str, int], ranges: dict[str, int]) -> Iterator[str]:
        start = self.bar + 1
        for part in _outer_parts(self.text[start : self.close]):
            used = [variable for variable in ranges if self._uses(part, variable)]
            for choice in tuples(*(range(ranges[variable]) for variable in used)):
                here = known | {variable: Fraction(k) for variable, k in zip(used, choice, strict=True)}
                if part.strip():
                    yield self._filled(part, start, here, sizes)
            start += len(part) + 1

    def _uses(self, part: str, variable: str) -> bool:
        for match in _INDEX.finditer(part):
            if match[1] in self.indexed and variable in _NAMES.findall(match[2] if match[2] is not None else match[3]):
                return True
        return False

    def _filled(self, part: str, start: int, known: dict[str, Value], sizes: dict[str, int]) -> str:
        def index(match: re.Match[str]) -> str:
            if match[1] not in sizes:
                return match[0]
            group = 2 if match[2] is not None else 3
            value = Expression(self.text, known, start=start + match.start(group), end=start + match.end(group)).integer()
            return f" {match[1]}_{value % sizes[match[1]]} "

        def exponent(match: re.Match[str]) -> str:
            if match[1] is None and self._is_generator(match[2].lstrip("-− ")):
                return match[0]
            group = 1 if match[1] is not None else 2
            return f"^{Expression(self.text, known, start=start + match.start(group), end=start + match.end(group)).integer()} "

        # exponents first, as places in the text must stay right; indices in a second pass over pieces between them
        pieces: list[tuple[int, int, str]] = [(m.start(), m.end(), exponent(m)) for m in _POWER.finditer(part)]
        pieces += [(m.start(), m.end(), index(m)) for m in _INDEX.finditer(part)]
        out, at = "", 0
        for left, right, text in sorted(pieces):
            if left >= at:
                out += part[at:left] + text
                at = right
        return out + part[at:]

    def members(self, values: Mapping[str, Sequence[int]]) -> Iterator[Member]:
        """All members for lists of values, the first parameter slowest. InputError for parameters that the family does not have."""
        extra = [name for name in values if name not in self.parameters]
        if extra:
            raise InputError(f"the family has no parameter {extra[0]}; it has: {', '.join(self.parameters) or 'none'}")
        missing = [name for name in self.parameters if name not in values]
        if missing:
            raise InputError(f"the family needs values of {missing[0]}; give them, such as {missing[0]}=2..10")
        total = 1
        for chosen in values.values():
            total *= len(chosen)
        if total > MOST_MEMBERS:
            raise InputError(f"the parameters have {total} combinations; at most {MOST_MEMBERS} are scanned")
        names = list(values)
        for choice in tuples(*values.values()):
            parameters = dict(zip(names, choice, strict=True))
            presentation = self.member(parameters)
            if presentation is not None:
                yield Member(parameters, presentation)


def _outer_parts(text: str) -> Iterator[str]:
    """Split at commas outside brackets."""
    depth, start = 0, 0
    for place, character in enumerate(text):
        if character in "([{":
            depth += 1
        elif character in ")]}":
            depth -= 1
        elif character == "," and depth == 0:
            yield text[start:place]
            start = place + 1
    yield text[start:]


def parse_values(text: str) -> tuple[str, list[int]]:
    """A parameter with its values: "n=2..12", "p=3,5,7", "m=-3..3,7". InputError when it cannot be read."""
    match = re.fullmatch(r"\s*([^\W\d_]\w*)\s*=\s*(.+)", text)
    values: list[int] = []
    for part in match[2].split(",") if match else ():
        bounds = re.fullmatch(r"\s*([-−]?\d{1,9})\s*(?:\.\.\s*([-−]?\d{1,9})\s*)?", part)
        if bounds is None:
            break
        low = int(bounds[1].replace("−", "-"))
        high = int((bounds[2] or bounds[1]).replace("−", "-"))
        if high - low >= MOST_MEMBERS:
            raise InputError(f"the range {part.strip()} has more than {MOST_MEMBERS} values")
        values += range(low, high + 1)
    else:
        if match and values:
            return match[1], list(dict.fromkeys(values))
    raise InputError(f"parameters must be given as NAME=VALUES, such as n=2..12 or p=3,5,7, not {text[:40]!r}")
