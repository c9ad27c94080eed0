"""Witnesses written by hand, as JSON objects, each with a faithful model of its group where the tests use one.

The canonical text comes from the project's own printer, so that the checker's printer is compared with it.
"""

from __future__ import annotations

import json
from copy import deepcopy
from typing import Any

from lowindex.words import Presentation

Object = dict[str, Any]


def sealed(witness: Object) -> Object:
    """The witness with the text and digest that belong to its names and relators."""
    group = witness["group"]
    presentation = Presentation(tuple(group["names"]), tuple(map(tuple, group["relators"])))
    group["text"] = str(presentation)
    witness["made by"]["digest"] = presentation.digest
    return witness


def text(witness: Object) -> str:
    """The canonical JSON text."""
    return json.dumps(witness, ensure_ascii=False, separators=(",", ":"))


def presentation_of(witness: Object) -> tuple[list[str], list[list[int]]]:
    """What `check` takes as `presentation`."""
    return witness["group"]["names"], witness["group"]["relators"]


def _framed(claim: str, presentation: str, table: list[list[int]], body: Object, summary: Object) -> Object:
    group = Presentation.parse(presentation)
    head = {
        "format": "lowindex witness 1",
        "claim": claim,
        "group": {"names": list(group.names), "relators": [list(word) for word in group.relators], "text": ""},
        "table": table,
    }
    return sealed(head | body | {"summary": summary, "made by": {"version": "0.1.0", "effort": 5, "digest": ""}})


def _nilpotent(
    presentation: str, table: list[list[int]], *, symbols: Any = (), lemmas: Any = (), chain: Object, goals: Object, summary: list[Any]
) -> Object:
    keys = ("index", "class", "hirsch_length", "factors", "growth_degree", "finite_order")
    body = {"symbols": list(symbols), "lemmas": list(lemmas), "chain": chain, "goals": goals}
    return _framed("virtually nilpotent", presentation, table, body, dict(zip(keys, summary, strict=True)))


def _chain(symbols: list[int], weights: list[int], orders: list[int], images: Any, powers: Any = (), conjugates: Any = ()) -> Object:
    return {
        "symbols": symbols,
        "weights": weights,
        "orders": orders,
        "powers": list(powers),
        "conjugates": list(conjugates),
        "images": images,
    }


def _goals(generators: list[int], conjugates: Any = (), powers: Any = ()) -> Object:
    return {"generators": generators, "conjugates": list(conjugates), "powers": list(powers)}


def plane_lattice() -> Object:
    """Z^2; the relator itself proves the only goal."""
    return _nilpotent(
        "⟨a, b | [a,b]⟩",
        [[0], [0]],
        chain=_chain([1, 2], [1, 1], [0, 0], [[[0, 1]], [[1, 1]]]),
        goals=_goals([-1, -1], [[1, 0, 0]]),
        summary=[1, 1, 2, [[2, []]], 2, None],
    )


def klein_bottle() -> Object:
    """Index 2: s1 = a, s2 = b a b^-1, s3 = b^2; rewritten relators s3^-1 s2 s3 s1 and s1 s2."""
    return _nilpotent(
        "⟨a, b | a^b a⟩",
        [[0, 1], [1, 0]],
        lemmas=[[[-3, -1, 3, 1], [[[-3, 2], 1, -1], [[], 0, 1]]]],
        chain=_chain([1, 3], [1, 1], [0, 0], [[[0, 1]], [[0, -1]], [[1, 1]]]),
        goals=_goals([-1, 1, -1], [[1, 0, 2]]),
        summary=[2, 1, 2, [[2, []]], 2, None],
    )


def heisenberg() -> Object:
    """Symbol 3 is [x,y]; equation 2 is its definition, and with it the relators [x,y,x] and [x,y,y] become lemmas 3 and 4."""
    return _nilpotent(
        "⟨x, y | [x,y,x], [x,y,y]⟩",
        [[0], [0]],
        symbols=[[-1, -2, 1, 2]],
        lemmas=[
            [[-3, -1, 3, 1], [[[], 2, 1], [[], 0, 1], [[-1], 2, -1]]],
            [[-3, -2, 3, 2], [[[], 2, 1], [[], 1, 1], [[-2], 2, -1]]],
        ],
        chain=_chain([1, 2, 3], [1, 1, 2], [0, 0, 0], [[[0, 1]], [[1, 1]]], conjugates=[[1, 0, [[1, 1], [2, -1]]]]),
        goals=_goals([-1, -1], [[1, 0, 2], [2, 0, 3], [2, 1, 4]]),
        summary=[1, 2, 3, [[2, []], [1, []]], 4, None],
    )


def cyclic_six() -> Object:
    """C6 as C3 by C2: a_0 = a with a_0^2 = a_1, a_1 = symbol 2 = a^2 of order 3; equation 1 is its definition."""
    return _nilpotent(
        "⟨a | a^6⟩",
        [[0]],
        symbols=[[1, 1]],
        lemmas=[
            [[2, 2, 2], [[[1, 1], 1, -1], [[1] * 4, 1, -1], [[1] * 6, 1, -1], [[], 0, 1]]],
            [[-1, 2, 1, -2], [[[1], 1, -1], [[1, 1], 1, 1]]],
        ],
        chain=_chain([1, 2], [1, 1], [2, 3], [[[0, 1]]], powers=[[0, [[1, 1]]]]),
        goals=_goals([-1], [[1, 0, 3]], [1, 2]),
        summary=[1, 1, 0, [[0, [6]]], 0, 6],
    )


def symmetric_three() -> Object:
    """S3, index 2: s1 = b a^-1, s2 = a^2, s3 = a b; H = C3 on s3."""
    return _nilpotent(
        "⟨a, b | a^2, b^2, (ab)^3⟩",
        [[1, 0], [1, 0]],
        lemmas=[[[-1, 3, 3], [[[], 4, -1], [[], 2, 1]]]],
        chain=_chain([3], [1], [3], [[[0, 2]], [], [[0, 1]]]),
        goals=_goals([6, 0, -1], [], [2]),
        summary=[2, 1, 0, [[0, [3]]], 0, 6],
    )


def trivial_group() -> Object:
    """The trivial group on two generators: the chain is empty."""
    return _nilpotent(
        "⟨a, b | a b, a b^2⟩",
        [[0], [0]],
        lemmas=[[[2], [[[], 0, -1], [[], 1, 1]]], [[1], [[[], 0, 1], [[], 2, -1]]]],
        chain=_chain([], [], [], [[], []]),
        goals=_goals([3, 2]),
        summary=[1, 0, 0, [], 0, 1],
    )


def no_generators() -> Object:
    """The presentation without generators and relators."""
    return _nilpotent("⟨ | ⟩", [], chain=_chain([], [], [], []), goals=_goals([]), summary=[1, 0, 0, [], 0, 1])


def inexact() -> Object:
    """C6 once more, the order of a_1 not proved: nilpotent of class at most 1, nothing more."""
    witness = cyclic_six()
    witness["lemmas"] = witness["lemmas"][1:]
    witness["goals"] = _goals([-1], [[1, 0, 2]], [1, None])
    for key in ("hirsch_length", "factors", "growth_degree", "finite_order"):
        witness["summary"][key] = None
    return witness


def _obstructed(presentation: str, table: list[list[int]], obstruction: Object, index: int = 1) -> Object:
    return _framed("not virtually nilpotent", presentation, table, {"obstruction": obstruction}, {"index": index})


def affine(field: Object, multipliers: Any, translations: Any, dilation: list[int], translation: list[int]) -> Object:
    """An affine obstruction."""
    return {
        "kind": "affine",
        "field": field,
        "multipliers": multipliers,
        "translations": translations,
        "dilation": dilation,
        "translation": translation,
    }


def baumslag_solitar() -> Object:
    """BS(1,2) acts on Q: a is x -> x + 1, t is x -> x/2."""
    action = affine({"kind": "Q"}, [[1, 1], [1, 2]], [[1, 1], [0, 1]], [2], [1])
    return _obstructed("⟨a, t | a^t = a^2⟩", [[0], [0]], action)


def baumslag_solitar_index_two() -> Object:
    """The same on the subgroup of index 2 generated by s1 = a, s2 = t a t^-1, s3 = t^2."""
    action = affine({"kind": "Q"}, [[1, 1], [1, 1], [1, 4]], [[1, 1], [1, 2], [0, 1]], [3, 1], [-2])
    return _obstructed("⟨a, t | a^t = a^2⟩", [[0, 1], [1, 0]], action, 2)


def torus_bundle() -> Object:
    """Z^2 by Z with the matrix (2 1; 1 1): in Q[t]/(t^2 - 3t + 1) a is translation by 1, b by t - 2, c multiplies by 1/t = 3 - t."""
    field = {"kind": "Q[t]/(f)", "modulus": [1, -3, 1]}
    action = affine(field, [[[1], 1], [[1], 1], [[3, -1], 1]], [[[1], 1], [[-2, 1], 1], [[], 1]], [3], [1])
    return _obstructed("⟨a, b, c | [a,b], a^c = a^2 b, b^c = a b⟩", [[0], [0], [0]], action)


def not_monic() -> Object:
    """A group with Alexander polynomial 2t^2 - 3t + 2, whose roots lie on the unit circle but are no roots of unity: c multiplies by
    1/t = (3 - 2t)/2."""
    field = {"kind": "Q[t]/(f)", "modulus": [2, -3, 2]}
    action = affine(field, [[[1], 1], [[3, -2], 2]], [[[1], 1], [[], 1]], [2], [1])
    return _obstructed("⟨a, c | a^2 c^-1 a^-3 c^-1 a^2 c^2⟩", [[0], [0]], action)


def lamplighter_overgroup() -> Object:
    """G. Baumslag's finitely presented metabelian group containing the lamplighter group, modulo 2: over F_2(t) a is translation by 1, t multiplies by 1/t, s by
    1/(1 + t)."""
    action = affine(
        {"kind": "F_p(t)", "prime": 2},
        [[[1], [1]], [[1], [1, 1]], [[1], [0, 1]]],
        [[[1], [1]], [[], [1]], [[], [1]]],
        [3],
        [1],
    )
    return _obstructed("⟨a, s, t | a^2, [s,t], [a,a^t], a^s = a a^t⟩", [[0], [0], [0]], action)


def genus_two() -> Object:
    """The fundamental group of the closed orientable surface of genus 2: C'(1/6), even C'(1/7)."""
    return _obstructed("⟨a, b, c, d | [a,b][c,d]⟩", [[0]] * 4, {"kind": "small cancellation"})


def five_involutions() -> Object:
    """The free product of five groups of order 2: d = g = r = 5 modulo 2, and 5 < 25/4."""
    return _obstructed("⟨a, b, c, d, e | a^2, b^2, c^2, d^2, e^2⟩", [[0]] * 5, {"kind": "pro-p", "prime": 2})


POSITIVE = (plane_lattice, klein_bottle, heisenberg, cyclic_six, symmetric_three, trivial_group, no_generators, inexact)
AFFINE = (baumslag_solitar, baumslag_solitar_index_two, torus_bundle, not_monic, lamplighter_overgroup)
NEGATIVE = (*AFFINE, genus_two, five_involutions)
ALL = (*POSITIVE, *NEGATIVE)


def changed(witness: Object, path: tuple[str | int, ...], value: Any) -> Object:
    """A copy with another value at one place."""
    copy = deepcopy(witness)
    target: Any = copy
    for key in path[:-1]:
        target = target[key]
    target[path[-1]] = value
    return copy
