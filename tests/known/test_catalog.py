"""The catalog: every entry can be read and has its sources; quick facts are recomputed here, all of them by tools/catalog."""

from __future__ import annotations

import json
from typing import Any

import pytest

from lowindex.cli.main import main
from lowindex.known import Entry, entries, entry, sources
from lowindex.known.recompute import recomputed

GROUPS = [item for item in entries().values() if not item.is_family]
QUICK = ("H1", "alexander")


@pytest.mark.parametrize("item", GROUPS, ids=lambda item: item.name)
def test_every_group_can_be_read(item: Entry) -> None:
    assert item.presentation.rank >= 1
    assert item.facts
    assert all(fact.mark in "LMC" for fact in item.facts)


def test_every_family_can_be_read() -> None:
    for item in entries().values():
        if item.is_family:
            assert item.family.parameters


def test_every_source_is_used() -> None:
    used = {item.source.key for item in entries().values()} | {fact.source.key for item in entries().values() for fact in item.facts}
    assert used <= set(sources())


@pytest.mark.parametrize("item", [item for item in GROUPS if any(fact.what in QUICK for fact in item.facts)], ids=lambda item: item.name)
def test_homology_and_polynomials(item: Entry) -> None:
    for fact in item.facts:
        if fact.what in QUICK:
            assert recomputed(item, fact, seconds=60) == fact.value, fact.source.key


@pytest.mark.parametrize("item", [item for item in GROUPS if item.kind != "trap"], ids=lambda item: item.name)
@pytest.mark.slow
def test_all_facts(item: Entry) -> None:
    for fact in item.facts:
        assert recomputed(item, fact, seconds=300) == fact.value, (fact.what, fact.source.key)


SAMPLE = ("p4", "flat-G6", "heisenberg-by-C4", "coxeter-A3", "affine-G2", "triangle-2-3-5", "surface-2", "BS-2-3", "knot-5_1", "F-2-8", "S-6", "torus-sol-3")


@pytest.mark.parametrize("name", SAMPLE)
def test_a_sample_of_all_facts(name: str) -> None:
    item = entry(name)
    assert item is not None
    for fact in item.facts:
        assert recomputed(item, fact, seconds=60) == fact.value, (fact.what, fact.source.key)


def test_commands_take_names(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["hunt", "p4", "--json"]) == 0
    found: dict[str, Any] = json.loads(capsys.readouterr().out)
    assert (found["name"], found["index"]) == ("p4", 4)
    assert main(["catalog", "p4"]) == 0
    assert "CoxeterMoser" in capsys.readouterr().out
    assert main(["catalog", "--kind", "knot", "--json"]) == 0
    assert all(json.loads(line)["kind"] == "knot group" for line in capsys.readouterr().out.splitlines())
    assert main(["compare", "heisenberg", "S-6", "--index", "4"]) == 1
    for bad in (["catalog", "no-such"], ["catalog", "--kind", "no such"], ["hunt", "fibonacci"], ["hunt", "no-such-name"]):
        capsys.readouterr()
        assert main(bad) == 2
        assert len(capsys.readouterr().err.splitlines()) == 1
