"""From results to witnesses: the only place that knows both the mathematics and the file."""

from __future__ import annotations

from typing import Any

from lowindex.cosets import SubgroupPresentation
from lowindex.nilpotent import ChainProof, Vector, conjugate_pairs
from lowindex.witness.writer import Witness, canonical
from lowindex.words import Presentation

FORMAT = "lowindex witness 1"


def virtually_nilpotent(
    presentation: Presentation, subgroup: SubgroupPresentation, proof: ChainProof, *, effort: int, version: str
) -> Witness:
    """The witness that the subgroup is nilpotent, with its exact invariants."""
    numbers = dict(zip(proof.goals, proof.proof.goals, strict=True))
    group = proof.group
    return Witness(
        canonical(
            {
                "format": FORMAT,
                "claim": "virtually nilpotent",
                "group": _group(presentation),
                "table": [list(images) for images in subgroup.table.permutations],
                "symbols": [list(word) for word in proof.definitions],
                "lemmas": [
                    [list(lemma.word), [[list(u), j, sign] for u, j, sign in lemma.factors]] for lemma in proof.proof.lemmas
                ],
                "chain": _chain(proof),
                "goals": {
                    "generators": [numbers.get(("generator", s, 0), -1) for s in range(1, subgroup.rank + 1)],
                    "conjugates": [[j, i, numbers.get(("conjugate", j, i), -1)] for j, i in conjugate_pairs(group)],
                    "powers": [numbers.get(("power", j, 0), -1) for j, e in enumerate(group.orders) if e],
                },
                "summary": _summary(subgroup.table.index, proof),
                "made by": {"version": version, "effort": effort, "digest": presentation.digest},
            }
        )
    )


def _group(presentation: Presentation) -> dict[str, Any]:
    return {
        "names": list(presentation.names),
        "relators": [list(word) for word in presentation.relators],
        "text": str(presentation),
    }


def _chain(proof: ChainProof) -> dict[str, Any]:
    group = proof.group
    return {
        "symbols": list(proof.symbols),
        "weights": list(group.weights),
        "orders": list(group.orders),
        "powers": [[j, _sparse(vector)] for j, vector in sorted(group.powers.items())],
        "conjugates": [[j, i, _sparse(vector)] for (j, i), vector in sorted(group.conjugates.items())],
        "images": [_sparse(vector) for vector in proof.images],
    }


def _sparse(vector: Vector) -> list[list[int]]:
    return [[k, n] for k, n in enumerate(vector) if n]


def _summary(index: int, proof: ChainProof) -> dict[str, Any]:
    quotient = proof.quotient
    order = quotient.order
    return {
        "index": index,
        "class": quotient.nilpotency_class,
        "hirsch_length": quotient.hirsch_length,
        "factors": [[rank, list(torsion)] for rank, torsion in quotient.factors],
        "growth_degree": quotient.growth_degree,
        "finite_order": None if order is None else index * order,
    }
