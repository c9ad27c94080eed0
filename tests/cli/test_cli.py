"""The command line, as a user calls it."""

from __future__ import annotations

import json
import os
import shutil
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from lowindex.cli.main import main

ROOT = Path(__file__).resolve().parents[2]
P4 = "⟨a, b | a^4, b^2, (a b)^4⟩"

Capture = pytest.CaptureFixture[str]


def test_hunt_then_check(tmp_path: Path, capsys: Capture) -> None:
    witness = tmp_path / "p4.json"
    assert main(["hunt", P4, "--witness", str(witness)]) == 0
    out = capsys.readouterr().out
    assert "virtually nilpotent" in out and "index      4" in out and "polynomial of degree 2" in out
    assert main(["check", str(witness), "--for", "< a,b | a^4, b^2, (ab)^4 >"]) == 0
    assert "accepted" in capsys.readouterr().out
    assert main(["check", str(witness), "--for", "⟨a, b | a^4, b^2⟩"]) == 1
    assert "refused: the witness is about another presentation" in capsys.readouterr().out
    witness.write_text(witness.read_text().replace('"index":4', '"index":3'))
    assert main(["check", str(witness), "--json"]) == 1
    assert json.loads(capsys.readouterr().out)["accepted"] is False


def test_hunt_json(capsys: Capture) -> None:
    assert main(["hunt", "klein: " + "⟨a, b | a b a^-1 b⟩", "⟨a | a^3⟩", "--json"]) == 0
    first, second = map(json.loads, capsys.readouterr().out.splitlines())
    keys = {
        "name", "presentation", "verdict", "index", "growth_degree", "hirsch_length", "class", "finite_order", "reason", "searched",
        "effort", "seconds", "witness", "version",
    }
    assert set(first) == keys
    assert (first["name"], first["verdict"], first["index"], first["growth_degree"]) == ("klein", "virtually nilpotent", 2, 2)
    assert (first["hirsch_length"], first["class"], first["finite_order"], first["witness"]) == (2, 1, None, None)
    assert (second["finite_order"], second["growth_degree"], second["name"]) == (3, 0, None)


def test_start_from_a_subgroup(capsys: Capture) -> None:
    assert main(["hunt", P4, "--from", "a b a, a^2 b", "--json"]) == 0
    item = json.loads(capsys.readouterr().out)
    assert (item["index"], item["searched"]["given_index"]) == (4, 4)
    assert main(["hunt", P4, "--from", "c"]) == 2
    assert main(["hunt", P4, "--from", "a b,"]) == 2


def test_jobs_give_the_same_answers_in_order(tmp_path: Path, capsys: Capture) -> None:
    path = tmp_path / "groups.txt"
    path.write_text("\n".join(f"C{n}: ⟨a | a^{n}⟩" for n in range(2, 8)), encoding="utf-8")
    answers = []
    for jobs in ("1", "2"):
        assert main(["hunt", str(path), "--json", "--jobs", jobs]) == 0
        items = [json.loads(line) for line in capsys.readouterr().out.splitlines()]
        answers.append([{key: value for key, value in item.items() if key != "seconds"} for item in items])
    assert answers[0] == answers[1]
    assert [item["finite_order"] for item in answers[0]] == list(range(2, 8))


def test_undecided(capsys: Capture) -> None:
    assert main(["hunt", "⟨a, b, c, d | a^-1ba=b^2, b^-1cb=c^2, c^-1dc=d^2, d^-1ad=a^2⟩", "--effort", "1"]) == 3
    out = capsys.readouterr().out
    assert "undecided" in out and "searched" in out and "virtually nilpotent:" not in out


def test_subgroups_count(capsys: Capture) -> None:
    assert main(["subgroups", "⟨a, b | a^2, b^3⟩", "--index", "6", "--count", "--json"]) == 0
    assert json.loads(capsys.readouterr().out) == {
        "index": [1, 2, 3, 4, 5, 6],
        "classes": [1, 1, 2, 2, 1, 8],
        "subgroups": [1, 1, 4, 8, 5, 22],
        "normal": [1, 1, 1, 0, 0, 2],
        "complete_to": 6,
    }


def test_subgroups_list(capsys: Capture) -> None:
    assert main(["subgroups", "⟨a, b | [a,b]⟩", "--index", "2", "--json", "--presentations"]) == 0
    items = [json.loads(line) for line in capsys.readouterr().out.splitlines()]
    assert [item["index"] for item in items] == [1, 2, 2, 2]
    assert all(item["normal"] and item["H1"] == "Z^2" for item in items)


def test_files_and_standard_input(tmp_path: Path, capsys: Capture) -> None:
    path = tmp_path / "groups.txt"
    path.write_text("# demo\nfirst: ⟨a | a^2⟩\nsecond: ⟨a |\n  a^5⟩\n", encoding="utf-8")
    assert main(["hunt", str(path), "--json", "--witness", str(tmp_path / "w.json")]) == 0
    items = [json.loads(line) for line in capsys.readouterr().out.splitlines()]
    assert [(item["name"], item["finite_order"]) for item in items] == [("first", 2), ("second", 5)]
    assert all(Path(item["witness"]).exists() for item in items)
    done = subprocess.run(
        [sys.executable, "-m", "lowindex.cli.main", "hunt", "-", "--json"], input="⟨a | ⟩".encode(), capture_output=True, cwd=ROOT, check=True
    )
    assert json.loads(done.stdout)["growth_degree"] == 1


def bad_sources(folder: Path) -> list[str]:
    (folder / "latin").write_bytes(b"\xff\xfe\x00")
    (folder / "empty").write_text("")
    (folder / "folder").mkdir()
    os.symlink("loop", folder / "loop")
    return [str(folder / name) for name in ("latin", "empty", "folder", "loop", "missing")] + ["⟨a | b⟩", "⟨a | a^10000000000⟩", "", "\0"]


def test_bad_input_is_one_line_and_code_2(tmp_path: Path, capsys: Capture) -> None:
    for source in bad_sources(tmp_path):
        assert main(["hunt", source]) == 2, source
        err = capsys.readouterr().err
        assert err.startswith("lowindex: ")
        assert len(err.rstrip("\n").splitlines()) in (1, 3)  # text mistakes show the place below
        assert "Traceback" not in err
    for options in (["--effort", "0"], ["--effort", "10"], ["--seconds", "0"], ["--seconds", "nan"]):
        assert main(["hunt", "⟨a | a^2⟩", *options]) == 2
        capsys.readouterr()
    assert main(["subgroups", "⟨a | ⟩", "--index", "0"]) == 2
    assert main(["check", str(tmp_path / "missing")]) == 2
    assert main(["hunt", "⟨a | a^2⟩", "--witness", str(tmp_path / "no" / "such" / "w.json")]) == 2
    assert "cannot be written" in capsys.readouterr().err


def test_seconds_are_a_cap() -> None:
    began = time.monotonic()
    code = main(["hunt", "⟨a, b | [a b^-1, a^-1 b a], [a b^-1, a^-2 b a^2]⟩", "--effort", "9", "--seconds", "2"])
    assert code == 3
    assert time.monotonic() - began < 6


def test_interrupt_keeps_what_was_found() -> None:
    thompson = "⟨a, b | [a b^-1, a^-1 b a], [a b^-1, a^-2 b a^2]⟩"
    command = [sys.executable, "-m", "lowindex.cli.main", "hunt", thompson, "--effort", "9", "--json"]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, cwd=ROOT) as process:
        time.sleep(3)
        process.send_signal(signal.SIGINT)
        out, err = process.communicate(timeout=20)
    assert process.returncode == 130
    assert json.loads(out)["reason"] == "interrupted"
    assert b"Traceback" not in err


def test_checker_from_a_bare_copy(tmp_path: Path) -> None:
    """The folder alone, or the tool from a bare checkout, checks a witness with nothing installed (isolated mode)."""
    witness = tmp_path / "w.json"
    assert main(["hunt", "⟨a, b | a^2, b^2⟩", "--witness", str(witness)]) == 0
    shutil.copytree(ROOT / "lowindex" / "checker", tmp_path / "checker")
    for command in (["-m", "checker", str(witness)], ["-S", str(ROOT / "tools" / "check_witness.py"), str(witness)]):
        done = subprocess.run([sys.executable, *command], capture_output=True, text=True, cwd=tmp_path, check=True)
        assert "accepted" in done.stdout


def test_small_hunt_is_quick() -> None:
    """p4 in under 2 s of wall time including the start, kernels cached by the other tests (median of three)."""
    times = []
    for _ in range(3):
        began = time.monotonic()
        subprocess.run([sys.executable, "-m", "lowindex.cli.main", "hunt", P4], capture_output=True, check=True, cwd=ROOT)
        times.append(time.monotonic() - began)
    assert sorted(times)[1] < 2


def test_compilation_is_announced_once(tmp_path: Path) -> None:
    """On first use, and only then."""
    command = [sys.executable, "-m", "lowindex.cli.main", "subgroups", "⟨a, b | a^2, b^3⟩", "--index", "5", "--count"]
    environment = {**os.environ, "NUMBA_CACHE_DIR": str(tmp_path)}
    said = [subprocess.run(command, capture_output=True, text=True, check=True, env=environment).stderr for _ in range(2)]
    assert "compiling kernels" in said[0]
    assert said[1] == ""
