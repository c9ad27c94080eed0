"""Every mutant of a witness is refused, or proves its claim in the opinion of independent.py too."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from lowindex.checker import Refused, check
from tests.checker.independent import assert_proves
from tests.checker.mutations import mutants
from tests.checker.witnesses import ALL, Object, text

STORED = sorted((Path(__file__).parent / "stored").glob("*.json"))
WITNESSES = [pytest.param(make(), id=make.__name__) for make in ALL] + [
    pytest.param(json.loads(path.read_text(encoding="utf-8")), id=path.stem) for path in STORED
]


@pytest.mark.parametrize("witness", WITNESSES)
def test_originals_are_valid_by_both_means(witness: Object) -> None:
    check(text(witness))
    assert_proves(witness, witness)


@pytest.mark.parametrize("witness", WITNESSES)
def test_mutants_are_refused_or_valid(witness: Object) -> None:
    accepted = []
    for what, mutant in mutants(witness, 200, seed=20):
        try:
            check(text(mutant))
        except Refused as reason:
            assert "\n" not in str(reason) and 10 < len(str(reason)) < 300
            continue
        accepted.append(what)
        assert_proves(mutant, witness)
    assert len(accepted) < 40, accepted


@pytest.mark.parametrize("witness", WITNESSES)
def test_mutants_bound_to_the_presentation_keep_group_and_summary(witness: Object) -> None:
    presentation = witness["group"]["names"], witness["group"]["relators"]
    for what, mutant in mutants(witness, 200, seed=21):
        try:
            report = check(text(mutant), presentation=presentation)
        except Refused:
            continue
        assert (mutant["group"], report.summary) == (witness["group"], witness["summary"]), what


def test_mutants_are_repeatable_and_differ() -> None:
    witness = ALL[2]()
    first = list(mutants(witness, 50, seed=1))
    assert first == list(mutants(witness, 50, seed=1))
    assert first != list(mutants(witness, 50, seed=2))
    assert len({repr(mutant) for _, mutant in first} | {repr(witness)}) == 51
