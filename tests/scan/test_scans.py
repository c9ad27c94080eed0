"""Scans of families against the literature, and the executors."""

from __future__ import annotations

import os
import socket
import subprocess
import sys
import time
from concurrent.futures import ThreadPoolExecutor
from dataclasses import replace
from pathlib import Path
from typing import Any

import distributed
import pytest

from lowindex.cli.main import main
from lowindex.decision import NO, YES
from lowindex.scan import Item, Job, Result, Store, columns_of, grid, rendered, rows_of, run_scan, selected, summary
from lowindex.words import Family, Presentation
from tests.scan.deadly import DeadlyText

ROOT = Path(__file__).resolve().parents[2]


def items_of(text: str, **values: Any) -> list[Item]:
    members = Family(text).members({name: list(chosen) for name, chosen in values.items()})
    return [Item(k, "", m.parameters, m.presentation.digest, str(m.presentation)) for k, m in enumerate(members, 1)]


def scanned(tmp_path: Path, items: list[Item], task: str = "hunt", *, jobs: int = 2, effort: int = 5, **options: Any) -> list[dict[str, Any]]:
    with Store(tmp_path / "s", create=True) as store:
        store.enter("scan", items)
        pending = store.pending("scan", task, effort, again=False)
        run_scan(store, pending, Job(task, effort, **options), jobs=jobs, report=lambda item, result: None)
        return rows_of(list(store.results("scan", task)))


FIBONACCI = "⟨x_i (i mod n) | x_i x_{i+1} = x_{i+2}⟩"


def test_fibonacci_groups(tmp_path: Path) -> None:
    """n = 2..5, 7: orders 1, 8, 5, 11, 29; n = 6 degree 3; infinite otherwise (R. M. Thomas, Bull. LMS 21 (1989); L, C)."""
    rows = scanned(tmp_path, items_of(FIBONACCI, n=[2, 3, 4, 5, 6, 7, 8, 10, 12]))
    found = {row["n"]: (row["verdict"], row["finite_order"], row["growth_degree"]) for row in rows}
    assert {n: found[n][1] for n in (2, 3, 4, 5, 7)} == {2: 1, 3: 8, 4: 5, 5: 11, 7: 29}
    assert found[6] == (YES, None, 3)
    assert all(found[n][0] == NO for n in (8, 10, 12))


def test_fibonacci_groups_of_length_three(tmp_path: Path) -> None:
    """n = 2, 3, 5, 6: orders 8, 2, 22, 1512; n = 4: degree 4 (D. L. Johnson, J. W. Wamsley, D. Wright 1974; C)."""
    rows = scanned(tmp_path, items_of("⟨x_i (i mod n) | x_i x_{i+1} x_{i+2} = x_{i+3}⟩", n=range(2, 7)))
    assert [(row["finite_order"], row["growth_degree"]) for row in rows] == [(8, 0), (2, 0), (None, 4), (22, 0), (1512, 0)]


def test_sieradski_groups(tmp_path: Path) -> None:
    """n = 2..5: finite of orders 3, 8, 24, 120; n = 6 degree 4; n >= 7 not virtually nilpotent (J. Milnor 1975, M)."""
    rows = scanned(tmp_path, items_of("⟨x_i (i mod n) | x_i x_{i+2} = x_{i+1}⟩", n=range(2, 10)))
    assert [row["finite_order"] for row in rows[:4]] == [3, 8, 24, 120]
    assert (rows[4]["verdict"], rows[4]["growth_degree"]) == (YES, 4)
    assert [row["verdict"] for row in rows[5:]] == [NO] * 3


def test_von_dyck_groups(tmp_path: Path) -> None:
    """Finite, flat or hyperbolic by 1/p + 1/q + 1/r (common practice), none undecided up to 6."""
    rows = scanned(tmp_path, items_of("⟨a, b | a^p, b^q, (a b)^r⟩ where p <= q <= r", p=range(2, 7), q=range(2, 7), r=range(2, 7)))
    for row in rows:
        total = 1 / row["p"] + 1 / row["q"] + 1 / row["r"]
        if total > 1 + 1e-9:
            assert row["finite_order"] == round(2 / (total - 1)), row
        else:
            assert (row["verdict"], row["growth_degree"]) == ((YES, 2) if total > 1 - 1e-9 else (NO, None)), row


def test_baumslag_solitar_groups(tmp_path: Path) -> None:
    """Virtually nilpotent exactly for |m| = |n| = 1 (J. Milnor, J. A. Wolf 1968)."""
    rows = scanned(tmp_path, items_of("⟨a, t | t a^m t^-1 = a^n⟩ where m n != 0", m=range(-4, 5), n=range(-4, 5)))
    assert len(rows) == 64
    for row in rows:
        assert row["verdict"] == (YES if abs(row["m"]) == abs(row["n"]) == 1 else NO)


def test_torus_bundles_by_trace(tmp_path: Path) -> None:
    """Determinant 1: trace 2 with A != 1 or -2 with A != -1 degree 4, |trace| < 2 or A = 1, -1 degree 3, else not (J. A. Wolf 1968)."""
    text = "⟨x, y, t | [x,y], t x t^-1 = x^a y^b, t y t^-1 = x^c y^d⟩ where a d - b c = 1"
    rows = scanned(tmp_path, items_of(text, **dict.fromkeys("abcd", range(-2, 3))))
    assert len(rows) == 52
    for row in rows:
        trace, scalar = row["a"] + row["d"], row["b"] == row["c"] == 0
        expected = (NO, None) if abs(trace) > 2 else (YES, 3 if abs(trace) < 2 or scalar else 4)
        assert (row["verdict"], row["growth_degree"]) == expected, row


def test_right_angled_coxeter_groups(tmp_path: Path) -> None:
    """All graphs on at most 5 vertices (networkx's atlas): virtually nilpotent, in fact virtually Z^k, exactly for joins of single vertices
    and k non-adjacent pairs (classical; M)."""
    import networkx

    graphs = [graph for graph in networkx.graph_atlas_g() if 1 <= graph.number_of_nodes() <= 5]
    items = []
    for k, graph in enumerate(graphs, 1):
        names = "abcde"[: graph.number_of_nodes()]
        relators = [f"{x}^2" for x in names] + [f"({names[i]} {names[j]})^2" for i, j in graph.edges]
        group = Presentation.parse(f"⟨{', '.join(names)} | {', '.join(relators)}⟩")
        items.append(Item(k, str(k), {}, group.digest, str(group)))
    for row, graph in zip(scanned(tmp_path, items), graphs, strict=True):
        missing = networkx.complement(graph)
        if all(degree <= 1 for _, degree in missing.degree):
            assert (row["verdict"], row["growth_degree"]) == (YES, missing.number_of_edges()), row
        else:
            assert row["verdict"] == NO, row


def test_quotient_tasks(tmp_path: Path) -> None:
    items = items_of("⟨a, b | a^2, b^3, (a b)^n⟩", n=range(2, 10))
    onto = scanned(tmp_path, items, "onto:A5")
    assert [row["verdict"] for row in onto] == ["no quotient"] * 3 + ["quotient"] + ["no quotient"] * 4
    smallest = scanned(tmp_path, items, "smallest-quotient:200")
    assert [row["order"] for row in smallest] == [6, 12, 6, 60, 6, 168, 6, 12]
    betti = scanned(tmp_path, items, "betti:8")
    assert [row["verdict"] for row in betti[:5]] == ["none"] * 4 + ["infinite"]
    assert (betti[4]["index"], betti[4]["homology"]) == (6, "Z^2")


def test_the_same_answers_however_many_workers(tmp_path: Path) -> None:
    items = items_of("⟨a, b | a^p, b^q, (a b)^2⟩", p=range(2, 6), q=range(2, 6))
    tables = []
    for jobs in (1, 2, 3):
        (tmp_path / str(jobs)).mkdir()
        rows = scanned(tmp_path / str(jobs), items, jobs=jobs, effort=3)
        tables.append([{key: value for key, value in row.items() if key != "seconds"} for row in rows])
    assert tables[0] == tables[1] == tables[2]


def test_any_executor(tmp_path: Path) -> None:
    items = items_of("⟨a | a^n⟩", n=range(1, 6))
    with Store(tmp_path / "s", create=True) as store, ThreadPoolExecutor(2) as executor:
        store.enter("scan", items)
        run_scan(store, items, Job("hunt", 2, 5.0), jobs=1, report=lambda item, result: None, executor=executor)
        assert [result.facts["finite_order"] for _, result in store.results("scan", "hunt") if result] == [1, 2, 3, 4, 5]


def test_a_group_that_needs_too_much_memory(tmp_path: Path) -> None:
    """The cap holds: the group is recorded as an error, the others are decided."""
    items = items_of("⟨a, b | a^2, b^3, (a b)^n⟩", n=[3, 4, 5])
    rows = scanned(tmp_path, items, jobs=1, megabytes=300)
    assert all(row["verdict"] == "error" for row in rows)
    with Store(tmp_path / "s") as store:
        assert store.pending("scan", "hunt", 6, again=True) == items


def test_a_worker_that_dies(tmp_path: Path) -> None:
    """One group kills its worker: it is recorded, the others are decided."""
    items = items_of("⟨a | a^n⟩", n=range(1, 9))
    items[4] = replace(items[4], text=DeadlyText(items[4].text))
    with Store(tmp_path / "s", create=True) as store:
        store.enter("scan", items)
        seen: list[Result] = []
        run_scan(store, items, Job("hunt", 2), jobs=2, report=lambda item, result: seen.append(result))
        rows = rows_of(list(store.results("scan", "hunt")))
    assert [row["verdict"] for row in rows] == [YES] * 4 + ["error"] + [YES] * 3
    assert "the worker died" in rows[4]["reason"]
    assert len(seen) == 8


def test_a_dask_cluster_with_a_worker_killed_in_the_middle(tmp_path: Path) -> None:
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        port = probe.getsockname()[1]
    environment = os.environ | {"DASK_DISTRIBUTED__SCHEDULER__ALLOWED_FAILURES": "20"}
    scheduler = subprocess.Popen(
        [sys.executable, "-m", "distributed.cli.dask_scheduler", "--port", str(port), "--no-dashboard"],
        stderr=subprocess.DEVNULL, env=environment, cwd=ROOT,
    )  # fmt: skip
    worker = [sys.executable, "-m", "distributed.cli.dask_worker", f"127.0.0.1:{port}", "--nthreads", "1", "--no-dashboard", "--no-nanny"]
    workers = [subprocess.Popen(worker, stderr=subprocess.DEVNULL, env=environment, cwd=ROOT) for _ in range(2)]
    try:
        with distributed.Client(f"127.0.0.1:{port}", timeout="30s") as client:
            client.wait_for_workers(2, timeout=60)
        command = [sys.executable, "-m", "lowindex.cli.main", "scan", FIBONACCI, "--set", "n=2..8", "--store", str(tmp_path / "s")]
        with subprocess.Popen([*command, "--cluster", f"127.0.0.1:{port}"], stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT) as scan:
            time.sleep(4)
            workers[0].kill()
            out, err = scan.communicate(timeout=120)
        assert scan.returncode == 0, err
        assert b"every member is decided" in out
    finally:
        for process in (*workers, scheduler):
            process.kill()
            process.wait()


ROWS = [
    {"place": 1, "name": None, "presentation": "⟨a | a^2⟩", "parameters": {"p": 1, "q": 2}, "p": 1, "q": 2, "verdict": YES, "finite_order": 2},
    {"place": 2, "name": None, "presentation": "⟨a | ⟩", "parameters": {"p": 2, "q": 2}, "p": 2, "q": 2, "verdict": YES, "growth_degree": 1},
    {"place": 3, "name": None, "presentation": "⟨a, b | ⟩", "parameters": {"p": 1, "q": 3}, "p": 1, "q": 3, "verdict": "undecided"},
]


def test_tables() -> None:
    assert [row["place"] for row in selected(ROWS, "verdict = virtually nilpotent and p >= 1", "p", descending=True)] == [2, 1]
    assert [row["place"] for row in selected(ROWS, "verdict = undecided or finite_order = 2", None)] == [1, 3]
    assert columns_of(ROWS, None) == ["p", "q", "verdict", "growth_degree", "finite_order"]
    assert rendered(ROWS[:1], ["p", "presentation"], "markdown").splitlines()[-1] == "| 1 | ⟨a \\| a^2⟩ |"
    assert rendered(ROWS[:1], ["p", "presentation"], "csv") == "p,presentation\n1,⟨a | a^2⟩"
    assert r"1 & $\langle$a $\mid$ a\^{}2$\rangle$ \\" in rendered(ROWS[:1], ["p", "presentation"], "latex")
    assert summary(ROWS) == "3 members: 2 virtually nilpotent, 1 undecided; all are decided except (p = 1, q = 3)"
    assert grid(ROWS, "p", "q").splitlines()[1].split() == ["2", "2", "d1"]


def test_commands(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    store = str(tmp_path / "s")
    assert main(["scan", "⟨a | a^n⟩", "--set", "n=1..4", "--store", store, "--effort", "1", "--log", str(tmp_path / "log")]) == 0
    assert capsys.readouterr().out == "4 members: 4 virtually nilpotent; every member is decided\n"
    assert len((tmp_path / "log").read_text(encoding="utf-8").splitlines()) == 4
    assert main(["table", store, "--json", "--where", "n > 2"]) == 0
    assert len(capsys.readouterr().out.splitlines()) == 2
    assert main(["table", store, "--witnesses", str(tmp_path / "w")]) == 0
    assert len(list((tmp_path / "w").iterdir())) == 4
    assert main(["check", *map(str, sorted((tmp_path / "w").iterdir()))]) == 0
    for options in (["--where", "foo = 1"], ["--where", "n >"], ["--sort", "foo"], ["--columns", "foo"], ["--grid", "n"], ["--scan", "2"], ["--task", "x"]):
        capsys.readouterr()
        assert main(["table", store, *options]) == 2, options
    for bad in (["⟨a | a^n⟩"], ["⟨a | a^n⟩", "--set", "m=1"], ["⟨a | a^n⟩", "--set", "n=1", "--onto", "FOO"], ["⟨a | a^n⟩ where n > 5", "--set", "n=1"]):
        assert main(["scan", *bad, "--store", store]) == 2, bad
