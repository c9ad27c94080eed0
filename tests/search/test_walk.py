"""Searches in parts: the same answer in the same order whoever does them, kept in files, going on after a kill."""

from __future__ import annotations

import json
import os
import random
import signal
import subprocess
import sys
import time
from concurrent.futures import Executor, Future, ThreadPoolExecutor
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from lowindex.budget import Budget
from lowindex.cli.main import main
from lowindex.errors import InputError
from lowindex.search import ROOT, Conditions, Place, SearchProgress, SubgroupSearch, Task, walk, written_best
from lowindex.words import Presentation

ROOT_FOLDER = Path(__file__).resolve().parents[2]
GROUP = Presentation.parse("⟨a, b | a^2, b^3⟩")


class Shuffled(Executor):
    """An executor that is in no hurry: futures are done in the order of the coin, long after they were handed in."""

    def __init__(self, seed: int) -> None:
        self.pool = ThreadPoolExecutor(3)
        self.coin = random.Random(seed)

    def submit(self, function: Any, /, *arguments: Any, **options: Any) -> Future[Any]:
        pause = self.coin.choice([0.0, 0.0, 0.01])

        def later() -> Any:
            time.sleep(pause)
            return function(*arguments, **options)

        return self.pool.submit(later)


def tables(task: Task, **options: Any) -> tuple[list[bytes], SearchProgress, int]:
    progress = SearchProgress(task, listing=True)
    parts = 0
    for part, left in walk(task, budget=Budget(), listing=True, **options):
        progress.add(part, left)
        parts += 1
    return [item.table.rows.tobytes() for item in progress.classes()], progress, parts


@pytest.mark.parametrize("seed", range(3))
def test_the_same_in_parts(seed: int) -> None:
    task = Task.plain(GROUP, 18, Conditions())
    whole = SubgroupSearch.at(task, ROOT, budget=Budget())
    expected = [item.table.rows.tobytes() for item in whole]
    with Shuffled(seed) as executor:
        found, progress, parts = tables(task, executor=executor, workers=3, part_steps=2000, first_steps=1000)
    assert parts > 20
    assert progress.finished
    assert found == expected
    assert np.array_equal(progress.counts, whole.counts)
    assert (progress.nodes, progress.trials) == (whole.nodes, whole.trials)


def test_places_left_are_what_is_left() -> None:
    """After every part, what was done and what is left make the whole."""
    task = Task.plain(GROUP, 11, Conditions())
    whole = SubgroupSearch.at(task, ROOT, budget=Budget())
    whole.count()
    done = np.zeros_like(whole.counts)
    with Shuffled(7) as executor:
        for part, left in walk(task, budget=Budget(), listing=False, executor=executor, workers=3, part_steps=2000, first_steps=1000):
            done = done + part.counts
            rest = np.zeros_like(done)
            for place in left:
                search = SubgroupSearch.at(task, place, budget=Budget())
                assert search.count()
                rest += search.counts
            assert np.array_equal(done + rest, whole.counts)


def test_parts_end_with_the_budget_and_go_on() -> None:
    task = Task.plain(GROUP, 18, Conditions())
    progress = SearchProgress(task, listing=False)
    rounds = 0
    while not progress.finished:
        for part, left in walk(task, budget=Budget(50), listing=False, places=progress.places, part_steps=3000, first_steps=3000):
            progress.add(part, left)
        rounds += 1
    assert rounds > 10
    whole = SubgroupSearch.at(task, ROOT, budget=Budget())
    whole.count()
    assert np.array_equal(progress.counts, whole.counts)
    assert progress.nodes == whole.nodes


NOWHERE = [((1, 1, 9), 0), ((0, 1), 0), ((1, 1), 2), ((1,) * 10_000, 0), ((2, -1), 0), ((10**9,), 0)]


@pytest.mark.parametrize("place", [Place(*place) for place in NOWHERE])
def test_no_such_place(place: Place) -> None:
    with pytest.raises(InputError, match=r"place|path"):
        SubgroupSearch.at(Task.plain(GROUP, 8, Conditions()), place, budget=Budget())


def test_a_file_of_progress(tmp_path: Path) -> None:
    task = written_best(Task.plain(Presentation.parse("⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩"), 12, Conditions()), Budget())
    plain = Task.plain(task.presentation, 12, Conditions())
    assert task != plain
    progress = SearchProgress(task, listing=True)
    for part, left in walk(task, budget=Budget(2000), listing=True, part_steps=20_000, first_steps=20_000):
        progress.add(part, left)
    assert not progress.finished
    progress.save(tmp_path / "p")
    again = SearchProgress.load(tmp_path / "p", plain, listing=True)
    assert again.task == task
    assert again.places == progress.places
    for part, left in walk(again.task, budget=Budget(), listing=True, places=again.places):
        again.add(part, left)
    whole = SubgroupSearch.at(task, ROOT, budget=Budget())
    assert [(x.table, x.length) for x in again.classes()] == [(x.table, x.length) for x in whole]
    assert again.nodes == whole.nodes
    assert np.array_equal(again.counts, whole.counts)


def damaged(value: dict[str, Any], kind: str) -> str:
    if kind == "text":
        return "⟨a | ⟩"
    if kind == "list":
        return "[]"
    if kind == "index":
        value["index"] += 1
    elif kind == "group":
        value["group"] = "⟨a | ⟩"
    elif kind == "missing":
        del value["left"]
    elif kind == "counts":
        value["counts"] = [[1]]
    elif kind == "path":
        value["left"] = [[[7, 7, 7], 0]]
    elif kind == "letters":
        value["left"] = [[["x"], 0]]
    elif kind == "huge":
        value["left"] = [[[10**30], 0]]
    elif kind == "encoding":
        value["encoding"] = 99
    elif kind == "found":
        value["found"] = [[[1], [1], "AAAA"]]
    return json.dumps(value)


KINDS = ["text", "list", "index", "group", "missing", "counts", "path", "letters", "huge", "encoding", "found"]


@pytest.mark.parametrize("kind", KINDS)
def test_files_that_are_none(tmp_path: Path, kind: str, capsys: pytest.CaptureFixture[str]) -> None:
    command = ["subgroups", str(GROUP), "--index", "14", "--resume", str(tmp_path / "p"), "--count"]
    assert main(command) == 0
    value = json.loads((tmp_path / "p").read_text(encoding="utf-8"))
    value["left"] = [[[1, 1], 0]]
    text = damaged(value, kind)
    (tmp_path / "p").write_text(text, encoding="utf-8")
    capsys.readouterr()
    assert main(command) == 2
    err = capsys.readouterr().err
    assert err.startswith("lowindex: ")
    assert len(err.splitlines()) == 1
    assert (tmp_path / "p").read_text(encoding="utf-8") == text


@pytest.mark.parametrize("number", [signal.SIGKILL, signal.SIGINT, signal.SIGTERM])
def test_a_killed_search_goes_on(tmp_path: Path, number: signal.Signals) -> None:
    """It ends with the answer of a search that was left alone (published counts of the modular group; tests/published)."""
    path = tmp_path / "p"
    text = "⟨a, b | a^2, b^3⟩"
    command = [sys.executable, "-m", "lowindex.cli.main", "subgroups", text, "--index", "27", "--count", "--jobs", "2", "--resume", str(path)]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT_FOLDER, start_new_session=True) as process:
        deadline = time.monotonic() + 30
        while time.monotonic() < deadline and not path.exists():
            time.sleep(0.02)
        if number == signal.SIGKILL:
            os.killpg(process.pid, number)
        else:
            process.send_signal(number)
        _, err = process.communicate(timeout=60)
    assert b"Traceback" not in err
    if process.returncode == 130:
        assert b"the same command goes on" in err
    done = subprocess.run(command, capture_output=True, text=True, cwd=ROOT_FOLDER, check=False)
    assert done.returncode == 0, done.stderr
    alone = subprocess.run(command[:-4], capture_output=True, text=True, cwd=ROOT_FOLDER, check=False)
    assert done.stdout == alone.stdout
    assert not Path(f"{path}.new").exists() or number == signal.SIGKILL


def test_limits_of_the_command(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    log = tmp_path / "log"
    assert main(["subgroups", "⟨a, b | ⟩", "--index", "12", "--count", "--seconds", "0.3", "--log", str(log)]) == 3
    captured = capsys.readouterr()
    assert "not complete" in captured.err
    assert "not complete at any index" in captured.out
    lines = log.read_text(encoding="utf-8").splitlines()
    assert lines[0].startswith("after root below 0: ")
    assert all(" nodes, " in line for line in lines)
    assert main(["subgroups", "⟨a, b | ⟩", "--index", "5", "--jobs", "0"]) == 2
    assert main(["subgroups", "⟨a, b | ⟩", "--index", "5", "--avoiding", "1"]) == 2
    assert main(["subgroups", "⟨a, b | ⟩", "--index", "5", "--normal", "--up-to-symmetry"]) == 2


def test_the_log_adds_up(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The nodes of all parts are the nodes of the search."""
    log = tmp_path / "log"
    assert main(["subgroups", "⟨a, b | a^2, b^3⟩", "--index", "22", "--count", "--log", str(log)]) == 0
    total = sum(int(line.split(": ")[1].split(" ")[0]) for line in log.read_text(encoding="utf-8").splitlines())
    assert f"({total} nodes)" in capsys.readouterr().out


def test_blocks_are_the_classes() -> None:
    blocks = list(SubgroupSearch(GROUP, 10, budget=Budget()).blocks())
    assert [(x.table, x.length) for block in blocks for x in block] == [(x.table, x.length) for x in SubgroupSearch(GROUP, 10, budget=Budget())]


def test_counting_takes_no_memory() -> None:
    """A million subgroups counted in the memory of a few thousand: within ten per cent."""
    code = (
        "import resource; from lowindex import Presentation; from lowindex.budget import Budget; from lowindex.search import SubgroupSearch\n"
        "search = SubgroupSearch(Presentation.parse('⟨a, b | ⟩'), {index}, budget=Budget()); search.count()\n"
        "print(int(search.counts[1].sum()), resource.getrusage(resource.RUSAGE_SELF).ru_maxrss)"
    )
    found = {}
    for index in (6, 9):
        done = subprocess.run([sys.executable, "-c", code.format(index=index)], capture_output=True, text=True, check=True, cwd=ROOT_FOLDER)
        found[index] = [int(number) for number in done.stdout.split()]
    assert found[6][0] < 4_000 < 10**6 < found[9][0]
    assert found[9][1] < 1.1 * found[6][1]


def test_the_tool_that_measures() -> None:
    done = subprocess.run(
        [sys.executable, "tools/bench.py", "--only", "plain", "--rounds", "1"], capture_output=True, text=True, check=False, cwd=ROOT_FOLDER
    )
    assert done.returncode == 0, done.stderr
    rows = [line.split("|")[-2].strip() for line in done.stdout.splitlines() if line.startswith("| ")][1:]
    assert len(rows) == 4
    assert all(float(row.replace(",", "")) > 10 for row in rows)
