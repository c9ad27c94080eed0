"""What a proof assistant is given to check, made from a witness: the same proof with everything spelled out that a witness leaves to be
recomputed, equations renumbered, and the checks of the soundness theorems mirrored."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from lowindex.cosets import SchreierTree
from lowindex.errors import InputError
from lowindex.export.cone import LinearCertificate, linear_certificate
from lowindex.export.reading import Factor, Reading
from lowindex.words import Presentation, Word, cyclically_reduced, inverse, product

Lemma = tuple[Word, list[Factor]]
Base = tuple[Word, tuple[int, int] | None]
"""A known equation: a relator from a point (point, number of the relator), or None for a definition."""

MOST_EXPANDED = 100_000
"""Letters of the word of the group that a symbol stands for."""


@dataclass(frozen=True)
class Derivation:
    """Known equations and lemmas, numbered one after the other."""

    bases: list[Base]
    lemmas: list[Lemma]

    @property
    def size(self) -> int:
        """Letters in all."""
        letters = sum(len(word) for word, _ in self.bases)
        return letters + sum(len(word) + sum(len(u) + 1 for u, _, _ in factors) for word, factors in self.lemmas)

    def equations(self) -> list[Word]:
        """All equations, after every lemma was found to be the product of its factors."""
        known = [word for word, _ in self.bases]
        for number, lemma in enumerate(self.lemmas):
            _require(follows(lemma, known), f"lemma {number}")
            known.append(lemma[0])
        return known


def follows(lemma: Lemma, known: list[Word]) -> bool:
    """Whether a word is the product of its factors."""
    word, factors = lemma
    return product(*(x for u, j, e in factors for x in (u, known[j] if e > 0 else inverse(known[j]), inverse(u)))) == product(word)


def _require(true: bool, what: str) -> None:
    if not true:
        raise InputError(f"the export does not pass its own check at {what}; nothing was written, please report this witness")


@dataclass(frozen=True)
class NilpotentCertificate(Derivation):
    """`definitions` of the symbols behind the Schreier generators; `values`: the words of the group that symbols stand for; `chain`: symbol
    (from 0), weight, and the places of the two symbols whose commutator it is; `images` and `commutators` in places from 1, with proofs."""

    group: Presentation
    tree: SchreierTree
    definitions: list[Word]
    values: list[Word]
    chain: list[tuple[int, int, tuple[int, int]]]
    images: list[Lemma]
    commutators: list[tuple[int, int, Lemma]]

    @property
    def transversal(self) -> tuple[Word, ...]:
        """A word for every point."""
        return self.tree.transversal

    @property
    def edges(self) -> tuple[tuple[int, int], ...]:
        """The edges of the Schreier generators."""
        return self.tree.edges

    @property
    def nilpotency_class(self) -> int:
        """The largest weight."""
        return max((weight for _, weight, _ in self.chain), default=0)

    def value(self, word: Word) -> Word:
        """A word in symbols as a word of the group."""
        return _substituted(word, self.values)

    def spelled(self, places: Word) -> Word:
        """A word in places as a word in symbols."""
        return tuple((1 if x > 0 else -1) * (self.chain[abs(x) - 1][0] + 1) for x in places)

    def verify(self) -> None:
        """The checks of the soundness theorem, apart from those that the table has passed before."""
        for number, (word, origin) in enumerate(self.bases):
            t = () if origin is None else self.transversal[origin[0]]
            relator = () if origin is None else self.group.relators[origin[1]]
            _require(self.value(word) == product(t, relator, inverse(t)), f"equation {number}")
        known = self.equations()
        for s, (places, factors) in enumerate(self.images, 1):
            _require(follows((product((-s,), self.spelled(places)), factors), known), f"Schreier generator {s}")
        for k, (symbol, weight, (j, i)) in enumerate(self.chain):
            if weight > 1:
                one, two = (self.values[self.chain[x][0]] for x in (j, i))
                commutator = product(inverse(one), inverse(two), one, two)
                _require(max(j, i) < k and self.values[symbol] == commutator, f"symbol {symbol}")
        for j, i, (places, factors) in self.commutators:
            target = product(_commutator(self.chain[j][0] + 1, self.chain[i][0] + 1), inverse(self.spelled(places)))
            heavier = all(self.chain[abs(x) - 1][1] > self.chain[j][1] for x in places)
            _require(heavier and follows((target, factors), known), f"the commutator of {j} and {i}")


@dataclass(frozen=True)
class TrivialWord(Derivation):
    """`proof`: the word with a factor."""

    word: Word
    proof: Lemma

    def verify(self) -> None:
        """The lemmas and the goal."""
        _require(follows(self.proof, self.equations()), "the word")


@dataclass(frozen=True)
class MovedWord:
    """A word that moves a point."""

    word: Word
    point: int
    size: int = 0

    def verify(self) -> None:
        """Nothing beyond what the checker has done."""


@dataclass(frozen=True)
class AffineCertificate:
    """`labels`: for each generator of the group and each point the map x -> m x + b of the edge, as (m, b), paths being read from left
    to right; `dilation` and `translation` as words of the group."""

    group: Presentation
    tree: SchreierTree
    labels: list[list[tuple[Fraction, Fraction]]]
    dilation: Word
    translation: Word
    size: int = 0

    def along(self, point: int, word: Word) -> tuple[int, Fraction, Fraction]:
        """Where a path ends, and its map."""
        m, b = Fraction(1), Fraction(0)
        for x in word:
            end = self.tree.table.image(point, (x,))
            p, q = self.labels[abs(x) - 1][point if x > 0 else end]
            m, b = (p * m, p * b + q) if x > 0 else (m / p, (b - q) / p)
            point = end
        return point, m, b

    def verify(self) -> None:
        """The checks of the soundness theorem."""
        for word in self.group.relators:
            for point in range(self.tree.table.index):
                _require(self.along(point, word) == (point, Fraction(1), Fraction(0)), "a relator")
        end, m, _ = self.along(0, self.dilation)
        _require(end == 0 and m * m != 1, "the dilation")
        end, m, b = self.along(0, self.translation)
        _require(end == 0 and m == 1 and b != 0, "the translation")


Certificate = NilpotentCertificate | TrivialWord | MovedWord | AffineCertificate | LinearCertificate


def certificate(reading: Reading) -> Certificate:
    """The certificate of a witness. InputError for claims that the soundness theorems do not cover."""
    if reading.claim == "virtually nilpotent":
        return _nilpotent(reading)
    if reading.claim == "word trivial":
        return _trivial(reading)
    if reading.claim == "word not trivial":
        return MovedWord(tuple(reading.content["word"]), reading.content["point"])
    if reading.claim == "different groups":
        raise InputError("that groups differ rests on two complete searches, which a script cannot hold; use --to latex")
    obstruction = reading.content["obstruction"]
    field = obstruction["field"]["kind"] if obstruction["kind"] == "affine" else None
    if field == "Q":
        return _affine(reading)
    if field == "Q[t]/(f)":
        return linear_certificate(reading)
    kind = obstruction["kind"] if field is None else f"affine over {field}"
    raise InputError(f"the soundness theorems cover affine obstructions over Q and Q[t]/(f), not {kind}; use --to latex")


def _affine(reading: Reading) -> AffineCertificate:
    obstruction, tree = reading.content["obstruction"], reading.subgroup.tree
    maps = []
    for multiplier, translation in zip(obstruction["multipliers"], obstruction["translations"], strict=True):
        m, v = Fraction(*multiplier), Fraction(*translation)
        maps.append((1 / m, -v / m))  # matrices act from the left, paths are read from the left: so the inverse
    one = (Fraction(1), Fraction(0))
    labels = [[one] * tree.table.index for _ in range(tree.table.rank)]
    for (point, k), label in zip(tree.edges, maps, strict=True):
        labels[k - 1][point] = label
    dilation, translation = (_substituted(obstruction[name], tree.generators) for name in ("dilation", "translation"))
    return AffineCertificate(reading.group, tree, labels, dilation, translation)


def _substituted(word: Sequence[int], values: Sequence[Word]) -> Word:
    """A word in symbols as a word in what they stand for."""
    return product(*(values[x - 1] if x > 0 else inverse(values[-x - 1]) for x in word))


def _renumbered(reading: Reading, numbers: list[int]) -> tuple[list[Base], list[Lemma], dict[int, int]]:
    """The known equations of these numbers and all lemmas, and the new number of every equation."""
    relators = len(reading.group.relators)
    new = {number: k for k, number in enumerate(numbers)}
    new |= {reading.first_lemma + k: len(numbers) + k for k in range(len(reading.lemmas))}
    origins = [divmod(number, relators) if number < reading.first_definition else None for number in numbers]
    bases = list(zip((reading.equations[number] for number in numbers), origins, strict=True))
    lemmas = [(word, [(u, new[j], e) for u, j, e in factors]) for word, factors in reading.lemmas]
    return bases, lemmas, new


def _trivial(reading: Reading) -> TrivialWord:
    goal, word = reading.content["goal"], tuple(reading.content["word"])
    used = {j for _, factors in reading.lemmas for _, j, _ in factors} | ({goal} - {-1})
    numbers = sorted(number for number in used if number < reading.first_lemma)
    bases, lemmas, new = _renumbered(reading, numbers)
    return TrivialWord(bases, lemmas, word, (word, _by_conjugation(word, goal, reading, new)))


def _nilpotent(reading: Reading) -> NilpotentCertificate:
    content, tree = reading.content, reading.subgroup.tree
    chain, goals = content["chain"], content["goals"]
    numbers = [*reading.used_relators, *range(reading.first_definition, reading.first_lemma)]
    bases, lemmas, new = _renumbered(reading, numbers)
    values = list(tree.generators)
    for word in reading.definitions:
        values.append(_substituted(word, values))
        if len(values[-1]) > MOST_EXPANDED:
            raise InputError("a symbol of this proof stands for too long a word; use --to latex")
    symbols, weights = chain["symbols"], chain["weights"]
    place = {symbol: k for k, symbol in enumerate(symbols)}
    rows = []
    for symbol, weight in zip(symbols, weights, strict=True):
        parents = (0, 0)
        if weight > 1:
            one, two = reading.definitions[symbol - reading.rank - 1][2:]
            parents = place[one], place[two]
        rows.append((symbol - 1, weight, parents))
    images = []
    for s, (vector, number) in enumerate(zip(chain["images"], goals["generators"], strict=True), 1):
        places = _places(vector)
        target = product((-s,), _in_symbols(places, symbols))
        images.append((places, _by_conjugation(target, number, reading, new)))
    conjugates = {(j, i): vector for j, i, vector in chain["conjugates"]}
    commutators = []
    for j, i, number in goals["conjugates"]:
        places = _places(conjugates.get((j, i), [[j, 1]])[1:])
        target = product(_commutator(symbols[j], symbols[i]), inverse(_in_symbols(places, symbols)))
        commutators.append((j, i, (places, _by_conjugation(target, number, reading, new))))
    return NilpotentCertificate(bases, lemmas, reading.group, tree, reading.definitions, values, rows, images, commutators)


def _commutator(one: int, two: int) -> Word:
    return (-one, -two, one, two)


def _places(vector: list[list[int]]) -> Word:
    """A vector as a word in places, from 1."""
    if sum(abs(exponent) for _, exponent in vector) > MOST_EXPANDED:
        raise InputError("an exponent of this proof is too large to be written out; use --to latex")
    return tuple(x for k, exponent in vector for x in [k + 1 if exponent > 0 else -k - 1] * abs(exponent))


def _in_symbols(places: Word, symbols: list[int]) -> Word:
    return tuple(symbols[x - 1] if x > 0 else -symbols[-x - 1] for x in places)


def _by_conjugation(target: Word, number: int, reading: Reading, new: dict[int, int]) -> list[Factor]:
    """The target as a conjugate of an equation or its inverse; no factor when it is empty in the free group."""
    target = product(target)
    if not target:
        return []
    for sign in (1, -1):
        source = reading.equations[number] if sign > 0 else inverse(reading.equations[number])
        by = _conjugator(target, source)
        if by is not None:
            return [(by, new[number], sign)]
    raise InputError("a goal of the witness is no conjugate of its equation; nothing was written")


def _conjugator(target: Word, source: Word) -> Word | None:
    """u with u source u^-1 = target in the free group."""
    cores = [cyclically_reduced(word) for word in (target, source)]
    if len(cores[0]) != len(cores[1]):
        return None
    heads = [word[: (len(word) - len(core)) // 2] for word, core in zip((target, source), cores, strict=True)]
    goal, core = cores
    for k in range(len(core)):
        if core[k:] + core[:k] == goal:
            return product(heads[0], inverse(core[:k]), inverse(heads[1]))
    return None
