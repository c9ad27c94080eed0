"""The store: results kept, kills survived, files that are none."""

from __future__ import annotations

import os
import random
import resource
import shutil
import signal
import sqlite3
import subprocess
import sys
import tempfile
import time
from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path

import pytest

from lowindex.cli.main import main
from lowindex.errors import InputError
from lowindex.scan import Item, Result, Store
from lowindex.scan.store import APPLICATION, MIGRATIONS

ROOT = Path(__file__).resolve().parents[2]
ITEMS = [Item(k, f"g{k}", {"n": k}, f"digest{k}", f"⟨a | a^{k}⟩") for k in range(1, 6)]


def result(verdict: str = "virtually nilpotent", effort: int = 5) -> Result:
    return Result("hunt", effort, "0", verdict, {"index": 1}, 0.1, "witness " * 100)


def test_round_trip(tmp_path: Path) -> None:
    with Store(tmp_path / "s", create=True) as store:
        store.enter("scan", ITEMS)
        store.record("digest2", result())
        store.record("digest3", result("undecided"))
        assert [item.place for item in store.pending("scan", "hunt", 5, again=False)] == [1, 4, 5]
        assert [item.place for item in store.pending("scan", "hunt", 6, again=True)] == [1, 3, 4, 5]
    with Store(tmp_path / "s") as store:
        found = list(store.results("scan", "hunt", witnesses=True))
        assert [item for item, _ in found] == ITEMS
        assert found[1][1] == result()
        assert store.scans() == ["scan"]
        assert store.tasks("scan") == ["hunt"]


def test_a_decided_result_comes_before_a_later_undecided_one(tmp_path: Path) -> None:
    with Store(tmp_path / "s", create=True) as store:
        store.enter("scan", ITEMS[:1])
        store.record("digest1", result(effort=3))
        store.record("digest1", result("undecided", effort=9))
        ((_, best),) = store.results("scan", "hunt")
        assert best is not None
        assert best.verdict == "virtually nilpotent"


def test_readers_while_a_scan_writes(tmp_path: Path) -> None:
    with Store(tmp_path / "s", create=True) as writer, Store(tmp_path / "s") as reader:
        writer.enter("scan", ITEMS)
        for item in ITEMS:
            writer.record(item.digest, result())
            assert sum(found is not None for _, found in reader.results("scan", "hunt")) == item.place


def test_checkpoints(tmp_path: Path) -> None:
    """Kept with an unfinished result, replaced by the next one, gone with a decided one, kept when a run failed."""
    with Store(tmp_path / "s", create=True) as store:
        store.enter("scan", ITEMS)
        for verdict, state, kept in (("undecided", "1", "1"), ("undecided", "2", "2"), ("error", None, "2"), ("none", None, None)):
            store.record("digest1", replace(result(verdict), checkpoint=state))
            assert store.checkpoint("digest1", "hunt") == kept
        assert store.checkpoint("digest2", "hunt") is None


def test_a_store_of_the_first_schema_is_taken_over(tmp_path: Path) -> None:
    path = tmp_path / "s"
    with sqlite3.connect(path) as connection:
        for statement in MIGRATIONS[0].split(";"):
            connection.execute(statement)
        connection.execute(f"PRAGMA application_id = {APPLICATION}")
        connection.execute("PRAGMA user_version = 1")
        connection.execute("INSERT INTO groups VALUES ('d', '⟨a | ⟩')")
        connection.execute("INSERT INTO members VALUES ('scan', 1, NULL, '{}', 'd')")
    connection.close()
    with Store(path) as store:
        store.record("d", replace(result("undecided"), checkpoint="here"))
        assert store.checkpoint("d", "hunt") == "here"
        assert len(list(store.results("scan", "hunt"))) == 1


def test_made_by_several_at_once(tmp_path: Path) -> None:
    """Scans that start at the same moment wait for each other."""

    def use(path: Path) -> int:
        with Store(path, create=True) as store:
            store.enter("scan", ITEMS)
            store.record("digest1", result())
            return len(store.pending("scan", "hunt", 5, again=False))

    with ThreadPoolExecutor(8) as pool:
        for k in range(30):
            assert list(pool.map(use, [tmp_path / str(k)] * 8)) == [4] * 8


def spoiled(path: Path, kind: str) -> None:
    if kind == "empty":
        path.write_bytes(b"")
    elif kind == "random":
        path.write_bytes(random.Random(1).randbytes(5000))
    elif kind == "text":
        path.write_text("⟨a | a^2⟩\n" * 100, encoding="utf-8")
    elif kind == "other database":
        with sqlite3.connect(path) as connection:
            connection.execute("CREATE TABLE t (x)")
        connection.close()
    elif kind == "newer":
        with Store(path, create=True):
            pass
        with sqlite3.connect(path) as connection:
            connection.execute("PRAGMA user_version = 99")
        connection.close()
    elif kind == "folder":
        path.mkdir()
    elif kind == "truncated":
        with Store(path, create=True) as store:
            store.enter("scan", [Item(k, "", {}, f"d{k}", "⟨a | ⟩" * 50) for k in range(500)])
        data = path.read_bytes()
        path.write_bytes(data[: len(data) // 2])
    elif kind == "damaged":
        with Store(path, create=True) as store:
            store.enter("scan", [Item(k, "", {}, f"d{k}", "⟨a | ⟩" * 50) for k in range(500)])
        data = bytearray(path.read_bytes())
        for at in range(4096, len(data), 97):
            data[at] ^= 0x55
        path.write_bytes(bytes(data))


@pytest.mark.parametrize("kind", ["empty", "random", "text", "other database", "newer", "folder", "truncated", "damaged", "missing"])
def test_files_that_are_no_store(tmp_path: Path, kind: str, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "s"
    spoiled(path, kind)
    assert main(["table", str(path)]) == 2
    err = capsys.readouterr().err
    assert err.startswith("lowindex: ")
    assert len(err.splitlines()) == 1
    if kind not in ("empty", "missing"):
        assert main(["scan", "⟨a | a^n⟩", "--set", "n=2", "--store", str(path)]) == 2
        assert len(capsys.readouterr().err.splitlines()) == 1


def scan_command(store: Path, *more: str) -> list[str]:
    family = "⟨a, b | a^p, b^q, (a b)^2⟩"
    return [sys.executable, "-m", "lowindex.cli.main", "scan", family, "--set", "p=2..9", "--set", "q=2..9", "--effort", "2", "--store", str(store), *more]


def decided(store: Path) -> int:
    with Store(store) as opened:
        return sum(found is not None for scan in opened.scans() for _, found in opened.results(scan, "hunt"))


@pytest.mark.parametrize("seed", range(4))
def test_killed_at_a_random_moment(tmp_path: Path, seed: int) -> None:
    """`kill -9`: what was stored stays, and the same command goes on to the end."""
    store = tmp_path / "s"
    with subprocess.Popen(scan_command(store), stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT, start_new_session=True) as process:
        time.sleep(0.8 + 3 * random.Random(seed).random())
        os.killpg(process.pid, signal.SIGKILL)
        process.communicate()
    before = decided(store) if store.exists() and store.stat().st_size else 0
    done = subprocess.run(scan_command(store), capture_output=True, text=True, cwd=ROOT, check=False)
    assert done.returncode in (0, 3), done.stderr
    assert done.stdout.startswith("64 members: ")
    assert decided(store) == 64 >= before


@pytest.mark.parametrize("number", [signal.SIGINT, signal.SIGTERM])
def test_interrupted(tmp_path: Path, number: signal.Signals) -> None:
    store = tmp_path / "s"
    with subprocess.Popen(scan_command(store, "--jobs", "2"), stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT) as process:
        deadline = time.monotonic() + 30
        while time.monotonic() < deadline and not (store.exists() and store.stat().st_size and _some(store)):
            time.sleep(0.1)
        process.send_signal(number)
        out, err = process.communicate(timeout=30)
    if process.returncode != 3 and process.returncode != 0:  # it may have been over by then
        assert process.returncode == 130
        assert b"the same command goes on" in err
    assert b"Traceback" not in err
    assert out.startswith(b"64 members: ")
    assert decided(store) > 0


def _some(store: Path) -> bool:
    try:
        return decided(store) > 0
    except InputError:
        return False


def test_two_scans_on_one_file(tmp_path: Path) -> None:
    store = tmp_path / "s"
    processes = [subprocess.Popen(scan_command(store), stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT) for _ in range(2)]
    for process in processes:
        out, err = process.communicate(timeout=120)
        assert process.returncode in (0, 3), err
        assert out.startswith(b"64 members: ")
    assert decided(store) == 64


def test_a_full_disk_is_one_line(tmp_path: Path) -> None:
    """A limit on the size of files stands for a full disk: what was stored before is kept."""
    store = tmp_path / "s"
    subprocess.run([*scan_command(store), "--betti", "2"], capture_output=True, cwd=ROOT, check=False)
    size = store.stat().st_size

    def limited() -> None:
        resource.setrlimit(resource.RLIMIT_FSIZE, (size + 20_000, size + 20_000))

    done = subprocess.run(scan_command(store), capture_output=True, text=True, cwd=ROOT, preexec_fn=limited, check=False)
    assert done.returncode == 2
    assert "cannot be used" in done.stderr
    assert "Traceback" not in done.stderr
    with Store(store) as opened:
        assert opened.scans()


def test_a_read_only_store(capsys: pytest.CaptureFixture[str]) -> None:
    """Root may write everywhere, so the scan is tried as another user then."""
    folder = Path(tempfile.mkdtemp())
    store = folder / "s"
    command = ["scan", "⟨a | a^n⟩", "--set", "n=2", "--store", str(store), "--effort", "1"]
    try:
        assert main(command) == 0
        store.chmod(0o444)
        folder.chmod(0o555)
        capsys.readouterr()
        with _as_an_ordinary_user():
            assert main(command) == 2
        err = capsys.readouterr().err
        assert len(err.splitlines()) == 1
        assert "cannot be used" in err
    finally:
        folder.chmod(0o755)
        store.chmod(0o644)
    assert decided(store) == 1
    shutil.rmtree(folder)


@contextmanager
def _as_an_ordinary_user() -> Iterator[None]:
    if os.geteuid() != 0:
        yield
        return
    os.seteuid(65534)
    try:
        yield
    finally:
        os.seteuid(0)
