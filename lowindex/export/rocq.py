"""Witnesses as scripts for the Rocq (Coq) proof assistant, version 8.16 or later, standard library only.

A script holds the presentation, the table, the certificate as data and one theorem whose proof is a computation by the soundness
theorems of Prelude.v, which is written beside it unchanged. Before anything is written the checks of the theorem are done here once more.
"""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable, Sequence
from importlib.resources import files
from typing import Any

from lowindex.errors import InputError
from lowindex.export.certificate import AffineCertificate, Lemma, MovedWord, NilpotentCertificate, TrivialWord, certificate
from lowindex.export.cone import LinearCertificate, Map, inverted
from lowindex.export.reading import Factor, Reading
from lowindex.words import Word

PRELUDE = "Prelude.v"
MOST_LEMMAS = 20_000
MOST_LETTERS = 2_000_000

MOST_STRUCTURED = 4_000
"""Letters of a derivation whose lemmas are written as terms; longer ones are text that the script decodes, which is read far sooner."""

CHUNK = 2_000
"""Letters in one piece of text: a long one is too much for the reader's stack."""


def rocq(reading: Reading) -> dict[str, str]:
    """The files of the export by name: the prelude and Witness.v. InputError when the script cannot say what the witness proves."""
    found = certificate(reading)
    if found.size > MOST_LETTERS or len(reading.lemmas) > MOST_LEMMAS:
        raise InputError(f"this proof is too long for a script ({found.size} letters, {len(reading.lemmas)} lemmas); use --to latex")
    found.verify()
    script = _Script(reading)
    if isinstance(found, NilpotentCertificate):
        script.nilpotent(found)
    elif isinstance(found, AffineCertificate):
        script.affine(found)
    elif isinstance(found, LinearCertificate):
        script.linear(found)
    elif isinstance(found, MovedWord):
        script.moved(found)
    else:
        script.trivial(found)
    prelude = files("lowindex.export").joinpath(PRELUDE).read_text(encoding="utf-8")
    return {PRELUDE: prelude, "Witness.v": script.text}


class _Script:
    """The text of a script, statement first."""

    def __init__(self, reading: Reading) -> None:
        self.reading = reading
        self.names = _constructors(reading.group.names)
        made = reading.content["made by"]
        self.parts = [
            f"(* {_comment(str(reading.group))}\n   {reading.claim}\n"
            f"   Made by lowindex {made['version']} at effort {made['effort']} from the witness with SHA-256\n"
            f"   {reading.witness.digest}.\n"
            f"   To check: coqc -Q . Lowindex {PRELUDE} && coqc -Q . Lowindex Witness.v *)",
            "From Coq Require Import List Bool Arith ZArith QArith.\nFrom Lowindex Require Import Prelude.\nImport ListNotations.\n"
            "Open Scope nat_scope.",
            "(** The presentation *)",
            f"Inductive generator := {' | '.join(self.names)}.",
            *(f"Notation p{name[1:]} := ({name}, true).\nNotation n{name[1:]} := ({name}, false)." for name in self.names),
            self._constant("relators", "list (word generator)", map(self.word, reading.group.relators)),
            self._constant("gens", "list generator", self.names),
            "Lemma gens_complete : forall g, In g gens.\nProof. intros []; cbn; repeat (try (left; reflexivity); right). Qed.",
        ]

    @property
    def text(self) -> str:
        """All parts."""
        return "\n\n".join(self.parts) + "\n"

    def word(self, word: Word) -> str:
        """A word of the group."""
        return _list(("p" if x > 0 else "n") + self.names[abs(x) - 1][1:] for x in word)

    def _constant(self, name: str, kind: str, items: Iterable[str]) -> str:
        return f"Definition {name} : {kind} :=\n  {_list(items)}."

    def _table(self) -> None:
        """The statement's action on points."""
        table = self.reading.subgroup.table
        for name, back in (("forward", False), ("backward", True)):
            rows = [[table.lists[p][2 * k + back] for p in range(table.index)] for k in range(table.rank)]
            self._by_generator(f"{name} (g : generator) : list nat", [_list(map(str, row)) for row in rows])

    def _by_generator(self, title: str, values: Sequence[str]) -> None:
        """A function of the generators."""
        cases = "\n  ".join(f"| {name} => {value}" for name, value in zip(self.names, values, strict=True))
        self.parts.append(f"Definition {title} :=\n  match g with\n  {cases}\n  end.")

    def _goal(self, word: Word, claim: str) -> None:
        self.parts.append(f"Definition goal : word generator :=\n  {self.word(word)}.")
        self.parts.append(f"Definition claim : Prop := {claim}.")

    def _equality(self) -> None:
        self.parts.append("Scheme Equality for generator.")

    def _derivation(self, found: NilpotentCertificate | TrivialWord) -> None:
        bases = (f"({_sword(word)}, {_origin(origin)})" for word, origin in found.bases)
        self.parts.append(self._constant("bases", "list (sword * option (nat * nat))", bases))
        if found.size <= MOST_STRUCTURED:
            self.parts.append(self._constant("lemmas", "list (sword * list factor)", (_lemma(*lemma) for lemma in found.lemmas)))
        else:
            chunks = [f'unpacked {len(chunk)} "{_packed(chunk)}"%packed' for chunk in _chunks(found.lemmas)]
            self.parts.append("Definition lemmas : list (sword * list factor) :=\n  " + " ++\n  ".join(chunks) + ".")

    def nilpotent(self, found: NilpotentCertificate) -> None:
        """A nilpotent subgroup of finite index."""
        self.parts.append("(** The coset table: images of the points under the generators and their inverses *)")
        self._table()
        n, c = self.reading.index, found.nilpotency_class
        self.parts.append(f"(** Claim: the stabiliser of point 0 has index {n} and is nilpotent of class at most {c}. *)")
        self.parts.append(
            "Definition claim : Prop :=\n  is_subgroup relators (stabiliser forward backward) /\\ "
            f"has_index (stabiliser forward backward) {n} /\\\n  class_at_most relators (stabiliser forward backward) {c}."
        )
        self.parts.append("(** The certificate *)")
        self._equality()
        self.parts.append(self._constant("transversal", "list (word generator)", map(self.word, found.transversal)))
        edges = (f"({point}, {self.names[k - 1]})" for point, k in found.edges)
        self.parts.append(self._constant("edges", "list (nat * generator)", edges))
        self.parts.append(self._constant("definitions", "list sword", map(_sword, found.definitions)))
        self._derivation(found)
        chain = (f"({symbol}, {weight}, ({j}, {i}))" for symbol, weight, (j, i) in found.chain)
        self.parts.append(self._constant("chain", "list (nat * nat * (nat * nat))", chain))
        self.parts.append(self._constant("images", "list (sword * list factor)", (_lemma(*image) for image in found.images)))
        commutators = (f"({j}, {i}, {_lemma(*proof)})" for j, i, proof in found.commutators)
        self.parts.append(self._constant("commutators", "list (nat * nat * (sword * list factor))", commutators))
        self.parts.append(
            "Theorem result : claim.\nProof.\n  refine (check_sound generator_beq internal_generator_dec_bl gens gens_complete relators "
            f"forward backward {n} transversal\n    edges definitions bases lemmas chain {c} images commutators _).\n"
            "  vm_cast_no_check (eq_refl true).\nQed."
        )
        self.parts.append(
            "Corollary group_is_virtually_nilpotent : virtually_nilpotent relators.\n"
            f"Proof. exists (stabiliser forward backward), {n}, {c}. exact result. Qed."
        )
        self.parts.append("Print Assumptions result.")

    def _obstruction(self, edges: tuple[str, list[str]], dilation: Word, translation: Word, theorem: str) -> None:
        """What all obstructions share."""
        self.parts.append("(** Claim: no subgroup of finite index is nilpotent. *)")
        self.parts.append("Definition claim : Prop := ~ virtually_nilpotent relators.")
        self.parts.append("(** The certificate: a table, an affine map on every edge, a dilation, a translation *)")
        self._table()
        self._by_generator(*edges)
        self.parts.append(f"Definition dilation : word generator :=\n  {self.word(dilation)}.")
        self.parts.append(f"Definition translation : word generator :=\n  {self.word(translation)}.")
        self.parts.append(
            f"Theorem result : claim.\nProof.\n  refine (@{theorem} dilation translation _).\n  vm_cast_no_check (eq_refl true).\nQed."
        )
        self.parts.append("Print Assumptions result.")

    def affine(self, found: AffineCertificate) -> None:
        """An affine action of a subgroup on the rationals."""
        rows = [_list(f"({_rational(m)}, {_rational(b)})" for m, b in row) for row in found.labels]
        theorem = f"check_affine_sound generator gens gens_complete relators forward backward {self.reading.index} labels"
        self._obstruction(("labels (g : generator) : list (Q * Q)", rows), found.dilation, found.translation, theorem)

    def linear(self, found: LinearCertificate) -> None:
        """An affine action of a subgroup on rational vectors."""
        trivial = f"(identity {found.dimension}, identity {found.dimension})"
        rows = [_list(trivial if f is None else f"({_map(f)}, {_map(inverted(f))})" for f in row) for row in found.maps]
        theorem = f"check_linear_sound generator gens gens_complete relators forward backward {self.reading.index} {found.dimension} maps"
        self._obstruction(("maps (g : generator) : list (map_of * map_of)", rows), found.dilation, found.translation, theorem)

    def trivial(self, found: TrivialWord) -> None:
        """A word that is trivial."""
        self.parts.append("(** Claim: this word is trivial. *)")
        self._goal(found.word, "eqv relators goal []")
        self._equality()
        self._derivation(found)
        self.parts.append(f"Definition proof : sword * list factor :=\n  {_lemma(*found.proof)}.")
        self.parts.append(
            "Theorem result : claim.\nProof.\n  refine (check_word_sound generator_beq internal_generator_dec_bl relators gens "
            "bases lemmas goal proof _).\n  vm_cast_no_check (eq_refl true).\nQed."
        )
        self.parts.append("Print Assumptions result.")

    def moved(self, found: MovedWord) -> None:
        """A word that is not trivial."""
        self.parts.append("(** Claim: this word is not trivial. *)")
        self._goal(found.word, "~ eqv relators goal []")
        self.parts.append("(** The certificate: an action that moves a point under the word *)")
        self._table()
        self.parts.append(
            "Theorem result : claim.\nProof.\n  refine (@check_moved_sound generator gens relators forward backward "
            f"{self.reading.index} {found.point} goal gens_complete _).\n  vm_cast_no_check (eq_refl true).\nQed."
        )
        self.parts.append("Print Assumptions result.")


def _constructors(names: Sequence[str]) -> list[str]:
    """A constructor for every generator: g_ and its name, or its number when the name is not of plain letters."""
    plain = all(re.fullmatch(r"[A-Za-z0-9_]+", name) for name in names)
    return [f"g_{name}" if plain else f"g_{k}" for k, name in enumerate(names, 1)]


def _comment(text: str) -> str:
    """Text that cannot end or open a comment or a string."""
    return text.replace("(*", "( *").replace("*)", "* )").replace('"', "'")


def _list(items: Iterable[str]) -> str:
    """A list, broken into lines."""
    lines, width = [""], 0
    for number, item in enumerate(items):
        piece = ("; " if number else "") + item
        if width + len(piece) > 130:
            lines.append("")
            width = 0
        lines[-1] += piece
        width += len(piece)
    return "[" + "\n   ".join(lines) + "]"


def _sword(word: Word) -> str:
    """A word in symbols or places, which count from 0 there."""
    return _list(f"({abs(x) - 1}, {'true' if x > 0 else 'false'})" for x in word)


def _lemma(word: Word, factors: Sequence[Factor]) -> str:
    spelled = (f"({_sword(u)}, {j}, {'true' if e > 0 else 'false'})" for u, j, e in factors)
    return f"({_sword(word)}, {_list(spelled)})"


def _chunks(lemmas: Sequence[Lemma]) -> list[list[Lemma]]:
    """Lemmas one after the other, in pieces of about CHUNK letters."""
    chunks: list[list[Lemma]] = [[]]
    letters = 0
    for word, factors in lemmas:
        chunks[-1].append((word, factors))
        letters += len(word) + sum(len(u) + 1 for u, _, _ in factors)
        if letters > CHUNK:
            chunks.append([])
            letters = 0
    return [chunk for chunk in chunks if chunk]


def _packed(lemmas: Sequence[Lemma]) -> str:
    """Lemmas as numbers: words by length and letters, factors by their number; the prelude says how they are read."""
    numbers: list[int] = []
    for word, factors in lemmas:
        numbers += [*_numbers(word), len(factors)]
        for u, j, e in factors:
            numbers += [*_numbers(u), j, int(e < 0)]
    return textwrap.fill(" ".join(map(str, numbers)), 130) + " "


def _numbers(word: Word) -> list[int]:
    return [len(word), *(2 * (abs(x) - 1) + (x < 0) for x in word)]


def _rational(q: Any) -> str:
    return f"({int(q.numerator)}) # {int(q.denominator)}"


def _map(f: Map) -> str:
    """A map by the rows of its matrix and its column, with fractions of flint's."""
    size = f[0].nrows()
    rows = _list(_list(_entry(f[0][i, j]) for j in range(size)) for i in range(size))
    return f"({rows}, {_list(_entry(f[1][i, 0]) for i in range(size))})"


def _entry(q: Any) -> str:
    return f"({int(q.p)}) # {int(q.q)}"


def _origin(origin: tuple[int, int] | None) -> str:
    return "None" if origin is None else f"Some ({origin[0]}, {origin[1]})"
