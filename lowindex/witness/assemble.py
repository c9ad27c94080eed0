"""From results to witnesses: the only place that knows both the mathematics and the file."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TypeAlias, cast

from lowindex.cosets import CosetTable, SubgroupPresentation
from lowindex.nilpotent import ChainProof, conjugate_pairs
from lowindex.obstructions import AffineObstruction, Obstruction, ProPObstruction
from lowindex.rewriting import Proof
from lowindex.witness.claims import (
    Affine,
    Chain,
    DifferentGroups,
    Element,
    Goals,
    NilpotentSummary,
    NotVirtuallyNilpotent,
    NumberField,
    ProP,
    RationalFunctions,
    Rationals,
    SmallCancellation,
    Subject,
    VirtuallyNilpotent,
    WordNotTrivial,
    WordTrivial,
)
from lowindex.witness.writer import Witness, write
from lowindex.words import Presentation, Word

Elements: TypeAlias = tuple[Element, ...]


def virtually_nilpotent(
    presentation: Presentation, subgroup: SubgroupPresentation, proof: ChainProof, *, effort: int, version: str
) -> Witness:
    """The witness that the subgroup is nilpotent, with its exact invariants."""
    return write(
        VirtuallyNilpotent(
            subject=Subject(presentation, tuple(map(tuple, subgroup.table.permutations)), version, effort),
            definitions=proof.definitions,
            lemmas=tuple((lemma.word, tuple(lemma.factors)) for lemma in proof.proof.lemmas),
            chain=_chain(proof),
            goals=_goals(subgroup.rank, proof),
            summary=_summary(subgroup.table.index, proof),
        )
    )


def not_virtually_nilpotent(
    presentation: Presentation,
    table: CosetTable,
    obstruction: Obstruction,
    *,
    effort: int,
    version: str,
) -> Witness:
    """The witness that the stabiliser of point 0 carries an obstruction."""
    claim: Affine | ProP | SmallCancellation
    if isinstance(obstruction, AffineObstruction):
        claim = _affine(obstruction)
    else:
        claim = ProP(obstruction.prime) if isinstance(obstruction, ProPObstruction) else SmallCancellation()
    subject = Subject(presentation, tuple(map(tuple, table.permutations)), version, effort)
    return write(NotVirtuallyNilpotent(subject, claim, table.index))


def word_trivial(presentation: Presentation, word: Word, proof: Proof, *, effort: int, version: str) -> Witness:
    """The witness that a word is trivial; the proof has one goal."""
    subject = Subject(presentation, ((0,),) * presentation.rank, version, effort)
    lemmas = tuple((lemma.word, tuple(lemma.factors)) for lemma in proof.lemmas)
    return write(WordTrivial(subject, word, lemmas, proof.goals[0]))


def word_not_trivial(
    presentation: Presentation, word: Word, table: CosetTable, point: int, *, effort: int, version: str
) -> Witness:
    """The witness that a word moves a point of an action."""
    subject = Subject(presentation, tuple(map(tuple, table.permutations)), version, effort)
    return write(WordNotTrivial(subject, word, point))


def different_groups(
    one: Presentation, two: Presentation, tables: Sequence[CosetTable], others: Sequence[CosetTable], *, effort: int, version: str
) -> Witness:
    """The witness that the classes of subgroups of one index differ."""
    subject = Subject(one, ((0,),) * one.rank, version, effort)
    lists = [tuple(tuple(map(tuple, table.permutations)) for table in classes) for classes in (tables, others)]
    return write(DifferentGroups(subject, two, lists[0], lists[1]))


def _affine(found: AffineObstruction) -> Affine:
    field: Rationals | NumberField | RationalFunctions = Rationals()
    if found.kind == "Q[t]/(f)":
        field = NumberField(found.modulus)
    elif found.kind == "F_p(t)":
        field = RationalFunctions(found.prime)
    multipliers, translations = cast(Elements, found.multipliers), cast(Elements, found.translations)
    return Affine(field, multipliers, translations, found.dilation, found.translation)


def _chain(proof: ChainProof) -> Chain:
    group = proof.group
    return Chain(proof.symbols, group.weights, group.orders, group.powers, group.conjugates, proof.images)


def _goals(rank: int, proof: ChainProof) -> Goals:
    numbers = dict(zip(proof.goals, proof.proof.goals, strict=True))
    return Goals(
        generators=tuple(numbers.get(("generator", s, 0), -1) for s in range(1, rank + 1)),
        conjugates=tuple((j, i, numbers.get(("conjugate", j, i), -1)) for j, i in conjugate_pairs(proof.group)),
        powers=tuple(numbers.get(("power", j, 0), -1) for j, e in enumerate(proof.group.orders) if e),
    )


def _summary(index: int, proof: ChainProof) -> NilpotentSummary:
    quotient = proof.quotient
    order = None if quotient.order is None else index * quotient.order
    return NilpotentSummary(
        index, quotient.nilpotency_class, quotient.hirsch_length, quotient.factors, quotient.growth_degree, order
    )
