"""A second opinion on witnesses, by other means than the checker's.

Rewritten relators come from the project's own tables, identities in free groups are decided by 2x2 integer matrices (a free group of any finite
rank is faithful in SL(2,Z): I. N. Sanov 1947), affine matrices are multiplied and inverted over a domain of sympy, pieces are found by
comparing all pairs.
"""

from __future__ import annotations

from itertools import combinations
from typing import Any

from sympy import GF, QQ, symbols
from sympy.polys.matrices import DomainMatrix

from lowindex.algebra import abelianization
from lowindex.cosets import CosetTable, SubgroupPresentation, subgroup_presentation
from lowindex.words import Presentation, Word
from tests.checker.witnesses import Object

Matrix = tuple[int, int, int, int]


def assert_proves(mutant: Object, original: Object) -> None:
    """Fail unless the mutant, which the checker accepted, proves its claim; `original` is known to be right."""
    subgroup = _subgroup(mutant)
    assert mutant["claim"] == original["claim"]
    if mutant["claim"] == "virtually nilpotent":
        # A derivation that holds line by line proves the class; exact invariants are the known ones of the same subgroup of the same group.
        assert mutant["summary"] == original["summary"]
        if mutant["summary"]["hirsch_length"] is not None:
            assert _relator_classes(mutant) == _relator_classes(original)
            assert mutant["table"] == original["table"]
        _assert_derivation(mutant, [list(word) for word in subgroup.relators], subgroup.rank)
    else:
        assert mutant["summary"] == {"index": len(mutant["table"][0])}
        _OBSTRUCTIONS[mutant["obstruction"]["kind"]](mutant["obstruction"], subgroup)


def _subgroup(witness: Object) -> SubgroupPresentation:
    names = [f"x{k}" for k, _ in enumerate(witness["group"]["names"])]
    presentation = Presentation(tuple(names), tuple(map(tuple, witness["group"]["relators"])))
    table = CosetTable.from_permutations(witness["table"])
    assert table.satisfies(presentation.relators)
    return subgroup_presentation(presentation, table)


def _relator_classes(witness: Object) -> set[frozenset[Word]]:
    return {frozenset(_rotations(tuple(word))) for word in witness["group"]["relators"]}


def _rotations(word: Word) -> list[Word]:
    """All rotations of the cyclically reduced word and of its inverse."""
    while len(word) > 1 and word[0] == -word[-1]:
        word = word[1:-1]
    back = tuple(-letter for letter in reversed(word))
    return [w[k:] + w[:k] for w in (word, back) for k in range(max(1, len(word)))]


def _times(left: Matrix, right: Matrix) -> Matrix:
    a, b, c, d = left
    e, f, g, h = right
    return a * e + b * g, a * f + b * h, c * e + d * g, c * f + d * h


def free(word: Any) -> Matrix:
    """The matrix of a word in free generators x_k = A^-k B A^k, A = (1 2; 0 1), B = (1 0; 2 1)."""
    value = 1, 0, 0, 1
    for letter in word:
        k = 2 * abs(letter)
        turn = (1, 0, 2, 1) if letter > 0 else (1, 0, -2, 1)
        value = _times(_times(_times(value, (1, -k, 0, 1)), turn), (1, k, 0, 1))
    return value


def _assert_derivation(witness: Object, equations: list[Any], rank: int) -> None:
    for d, definition in enumerate(witness["symbols"], 1):
        assert all(abs(letter) < rank + d for letter in definition)
        equations.append([-(rank + d), *definition])
    for word, factors in witness["lemmas"]:
        product = 1, 0, 0, 1
        for conjugator, number, sign in factors:
            assert 0 <= number < len(equations)
            back = [-letter for letter in reversed(conjugator)]
            equation = equations[number] if sign == 1 else [-letter for letter in reversed(equations[number])]
            product = _times(product, free([*conjugator, *equation, *back]))
        assert product == free(word)
        equations.append(word)
    chain, goals = witness["chain"], witness["goals"]
    _assert_central(chain, witness["symbols"], rank)
    assert max(chain["weights"], default=0) == witness["summary"]["class"]
    normal = lambda vector: [s for k, n in vector for s in [chain["symbols"][k] * (1 if n > 0 else -1)] * abs(n)]  # noqa: E731
    inverse_normal = lambda vector: [-letter for letter in reversed(normal(vector))]  # noqa: E731
    for s, image in enumerate(chain["images"], 1):
        _assert_goal([-s, *normal(image)], goals["generators"][s - 1], equations)
    pairs = [[j, i] for j, _ in enumerate(chain["weights"]) for i in range(j) if chain["weights"][i] == 1]
    assert pairs == [[j, i] for j, i, _ in goals["conjugates"]]
    for j, i, number in goals["conjugates"]:
        a, b = chain["symbols"][j], chain["symbols"][i]
        vector = next((v for jj, ii, v in chain["conjugates"] if (jj, ii) == (j, i)), [[j, 1]])
        _assert_goal([-b, a, b, *inverse_normal(vector)], number, equations)
    finite = [(j, e) for j, e in enumerate(chain["orders"]) if e]
    for (j, e), number in zip(finite, goals["powers"], strict=True):
        if number is not None:
            vector = next((v for jj, v in chain["powers"] if jj == j), [])
            _assert_goal([chain["symbols"][j]] * e + inverse_normal(vector), number, equations)


def _assert_central(chain: Object, definitions: list[list[int]], rank: int) -> None:
    """The weights are those of commutators, and conjugates by weight 1 differ by generators of larger weight."""
    weights = dict(zip(chain["symbols"], chain["weights"], strict=True))
    assert sorted(chain["weights"]) == chain["weights"]
    for symbol, weight in weights.items():
        if weight > 1:
            *_, j, i = definitions[symbol - rank - 1]
            assert definitions[symbol - rank - 1] == [-j, -i, j, i] and weights[i] == 1 and weights[j] == weight - 1
    for j, i, vector in chain["conjugates"]:
        if chain["weights"][i] == 1:
            assert vector[0] == [j, 1] and all(chain["weights"][k] > chain["weights"][j] for k, _ in vector[1:])


def _assert_goal(goal: list[int], number: int, equations: list[Any]) -> None:
    if number == -1:
        assert free(goal) == (1, 0, 0, 1)
        return
    # Conjugate in the free group: some rotation of the equation, turned by a prefix of the goal, is the goal.
    wanted = {free(rotation) for rotation in _rotations(tuple(equations[number]))}
    prefixes = [goal[:k] for k in range(len(goal) + 1)]
    assert any(free([*(-x for x in reversed(p)), *goal, *p]) in wanted for p in prefixes)


def _assert_affine(obstruction: Object, subgroup: SubgroupPresentation) -> None:
    build = _blocks(obstruction["field"])
    size = build([[1], 1]).shape[0]
    identity = build([[1], 1])
    zero = identity - identity
    matrices = {}
    for s, pair in enumerate(zip(obstruction["multipliers"], obstruction["translations"], strict=True), 1):
        m, v = map(build, pair)
        matrices[s] = m.hstack(v).vstack(zero.hstack(identity))
        matrices[-s] = matrices[s].inv()
    whole = matrices[1] * matrices[-1]

    def value(word: Any) -> tuple[DomainMatrix, DomainMatrix]:
        out = whole
        for letter in word:
            out = out * matrices[letter]
        return out[:size, :size], out[:size, size:]

    for relator in subgroup.relators:
        assert value(relator) == (identity, zero)
    m, power = value(obstruction["dilation"])[0], identity
    for _ in range(60):
        power = power * m
        assert (power - identity).rank() == size
    m, v = value(obstruction["translation"])
    assert m == identity and v.rank() == size


def _blocks(field: Object) -> Any:
    """Elements of the field as square matrices over Q (by the companion matrix of f) or F_p(t)."""
    if field["kind"] == "F_p(t)":
        t = symbols("t")
        domain = GF(field["prime"]).frac_field(t)
        variable = domain.from_sympy(t)

        def over_functions(element: Any) -> DomainMatrix:
            above, below = element if isinstance(element[1], list) else (element[0], [1])
            parts = [sum((domain(c) * variable**k for k, c in enumerate(part)), domain.zero) for part in (above, below)]
            return DomainMatrix([[parts[0] / parts[1]]], (1, 1), domain)

        return over_functions
    modulus = field.get("modulus", [0, 1])
    d = len(modulus) - 1
    rows = [[QQ(int(j == i + 1)) for j in range(d)] for i in range(d)]
    rows[-1] = [QQ(-c, modulus[-1]) for c in modulus[:-1]]
    companion = DomainMatrix(rows, (d, d), QQ)
    identity = DomainMatrix.eye(d, QQ).to_dense()

    def over_rationals(element: Any) -> DomainMatrix:
        above = element[0] if isinstance(element[0], list) else [element[0]]
        out, power = identity - identity, identity
        for c in above:
            out = out + power.scalarmul(QQ(c, element[1]))
            power = power * companion
        return out

    return over_rationals


def _assert_pro_p(obstruction: Object, subgroup: SubgroupPresentation) -> None:
    p, classes = obstruction["prime"], {frozenset(_rotations(word)) for word in subgroup.relators if word}
    homology = abelianization(subgroup.rank, subgroup.relators)
    d = homology.betti + sum(order % p == 0 for order in homology.torsion)
    assert p in (2, 3, 5, 7) and d >= 2 and 4 * (len(classes) - subgroup.rank + d) < d * d


def _assert_small_cancellation(obstruction: Object, subgroup: SubgroupPresentation) -> None:
    classes = {frozenset(_rotations(word)) for word in subgroup.relators if word}
    for first, second in combinations([word for rotations in classes for word in rotations], 2):
        piece = next((k for k, (x, y) in enumerate(zip(first, second, strict=False)) if x != y), min(len(first), len(second)))
        assert 6 * piece < min(len(first), len(second))
    assert all(len(rotations) == 2 * len(next(iter(rotations))) for rotations in classes)
    assert 1 - subgroup.rank + len(classes) < 0


_OBSTRUCTIONS = {"affine": _assert_affine, "pro-p": _assert_pro_p, "small cancellation": _assert_small_cancellation}
