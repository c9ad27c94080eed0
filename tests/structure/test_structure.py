"""The shape of the project: layers, kernels, the checker as an island, silence outside the command line, quick start."""

from __future__ import annotations

import ast
import doctest
import statistics
import subprocess
import sys
import time
from importlib import import_module
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
PACKAGE = ROOT / "lowindex"
FILES = sorted(PACKAGE.rglob("*.py"))

LAYERS = [
    {"errors", "budget", "events", "workers"},
    {"words"},
    {"cosets", "algebra", "rewriting"},
    {"search"},
    {"quotients"},
    {"nilpotent", "obstructions"},
    {"growth"},
    {"witness"},
    {"decision", "export"},
    {"scan", "known"},
    {"cli"},
]
LEVEL = {room: level for level, rooms in enumerate(LAYERS) for room in rooms}
MAY_CALL_THE_CHECKER = {"decision", "cli"}


def room_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imports(path: Path) -> list[tuple[str, list[str]]]:
    """(module, names) of every import statement of ours, wherever it stands in the file."""
    found: list[tuple[str, list[str]]] = []
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found += [(alias.name, []) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            found.append(("." * node.level + (node.module or ""), [alias.name for alias in node.names]))
    return found


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_layers(path: Path) -> None:
    """A room imports lower rooms or itself, and of other rooms only the names that their __init__ exports."""
    room = room_of(path)
    if room in ("checker", "__init__"):
        return
    for module, names in imports(path):
        if not module.startswith("lowindex."):
            continue
        _, other, *inner = module.split(".")
        if other == room:
            continue
        if other == "checker":
            assert room in MAY_CALL_THE_CHECKER, module
            continue
        allowed = LEVEL[other] < LEVEL[room] or (LEVEL[other] == LEVEL[room] == 0)
        assert allowed, f"{room} imports {other}"
        if (PACKAGE / other).is_dir() and not (room == "cli" and other == "decision"):
            assert not inner, f"{module}: import from lowindex.{other}"
            exported = ast.literal_eval(
                next(
                    ast.unparse(node.value)
                    for node in ast.parse((PACKAGE / other / "__init__.py").read_text(encoding="utf-8")).body
                    if isinstance(node, ast.Assign) and getattr(node.targets[0], "id", "") == "__all__"
                )
            )
            assert set(names) <= {*exported, "strings"}, f"{names} of {other}"


@pytest.mark.parametrize("path", [p for p in FILES if p.name.endswith("_kernel.py")], ids=lambda p: p.name)
def test_kernels(path: Path) -> None:
    """A kernel file imports numpy and numba only and has nothing but its docstring, imports and compiled functions."""
    assert {module.split(".")[0] for module, _ in imports(path)} <= {"numpy", "numba"}
    for node in ast.parse(path.read_text(encoding="utf-8")).body:
        if isinstance(node, ast.FunctionDef):
            assert ast.unparse(node.decorator_list[0]) == "njit(cache=True, nogil=True)", node.name
        else:
            assert isinstance(node, ast.Import | ast.ImportFrom | ast.Expr), ast.unparse(node)[:60]


@pytest.mark.parametrize("path", sorted((PACKAGE / "checker").glob("*.py")), ids=lambda p: p.name)
def test_the_checker_is_an_island(path: Path) -> None:
    for module, _ in imports(path):
        if not module.startswith("."):
            assert module.split(".")[0] in sys.stdlib_module_names, module


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_silence_and_size(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    if path != PACKAGE / "checker" / "__main__.py":
        calls = [node for node in ast.walk(ast.parse(text)) if isinstance(node, ast.Call) and getattr(node.func, "id", "") == "print"]
        assert not calls
    assert len(text.splitlines()) <= 450
    assert ast.get_docstring(ast.parse(text))


def test_top_level() -> None:
    listed = subprocess.run(["git", "ls-files"], cwd=ROOT, capture_output=True, text=True, check=False).stdout.splitlines()
    if listed:
        tops = {line.split("/")[0] for line in listed}
        agreed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "lowindex", "tests", "catalog", "tools"}
        assert {top for top in tops if not top.startswith(".")} <= agreed


def test_import_is_light() -> None:
    code = "import lowindex, sys; print(sorted({'numba','sympy','flint','numpy','networkx','tqdm'} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


@pytest.mark.parametrize("path", [p for p in FILES if ">>>" in p.read_text(encoding="utf-8")], ids=lambda p: str(p.relative_to(PACKAGE)))
def test_examples_in_docstrings(path: Path) -> None:
    name = ".".join(("lowindex", *path.relative_to(PACKAGE).with_suffix("").parts)).removesuffix(".__init__")
    failed, tried = doctest.testmod(import_module(name))
    assert tried > 0
    assert failed == 0


def test_public_names() -> None:
    import lowindex

    for name in lowindex.__all__:
        assert getattr(lowindex, name) is not None
    with pytest.raises(AttributeError):
        lowindex.nothing_of_this_name  # noqa: B018
    import lowindex.decision
    from lowindex import hunt, subgroups

    assert callable(hunt) and callable(subgroups)


def test_help_is_quick() -> None:
    """The median of five starts is under 0.3 s (measured 0.05 s; the bound leaves room for slow machines)."""
    times = []
    for _ in range(5):
        began = time.monotonic()
        subprocess.run([sys.executable, "-m", "lowindex.cli.main", "--help"], capture_output=True, check=True, cwd=ROOT)
        times.append(time.monotonic() - began)
    assert statistics.median(times) < 0.3
