"""Propositions with proof: what they say, that replacement chains end at 1, and that LaTeX compiles without loose ends."""

from __future__ import annotations

import re
import shutil
import subprocess
from functools import cache
from pathlib import Path

import pytest
from corpus import coxeter, nilpotent

from lowindex.budget import Budget
from lowindex.cli.main import main
from lowindex.decision import compare, decide_word, hunt
from lowindex.export import Reading, latex, text
from lowindex.words import Presentation

SMALL_CANCELLATION = """⟨a, b |
  b^-2 a b^3 a^-2 b a^-1 b a^-1 b a^2 b a b^2 a^-1 b^-2 a^3 b^-1 a b^-1 a^-1 b
  a b^-1 a^2 b a b^2 a b a^-1 b a b^-1 a^-1 b a^-3 b a^4 b^-1 a^-2 b^-3,
  b a b a b^-1 a^-2 b a b a^-1 b a^7 b^-1 a b a^4 b^-1 a^-1 b^-1
  a b a^2 b^2 a^-1 b^-1 a^2 b^-1 a^-1 b^2 a^-4 b^2 a b^-1 a^-1 b^-3 a^-1 b^-1 a b a⟩"""
"""Two random words of 60 letters, with finite H_1."""

# name -> (presentation, what the page must say)
PAGES = {
    "p4": ("⟨a, b | a^4, b^2, (a b)^4⟩", "subgroup H of index 4 that is abelian and of Hirsch length 2, with lower central factors Z^2"),
    "heisenberg": (nilpotent.heisenberg_by(4), "nilpotent of class 2 and of Hirsch length 3, with lower central factors Z^2, Z"),
    "icosahedral": ("⟨a, b | a^2, b^3, (ab)^5⟩", "finite of order 60"),
    "trivial": ("⟨a | a⟩", "finite of order 1"),
    "names": ("⟨a', x12, long_1 | [a',x12], long_1⟩", "of degree 2"),
    "C~3": (coxeter.coxeter(4, coxeter.path(4, 3, 4)), "of index 48 that is abelian and of Hirsch length 3"),
    "BS(1,2)": ("⟨a, t | t a t^-1 = a^2⟩", "s1 ↦ [[1, 1], [0, 1]]"),
    "Sol": ("⟨x, y, t | [x,y], t x t^-1 = x^2 y, t y t^-1 = x y⟩", "Let K = Q[t]/(t^2 - 3t + 1)"),
    "C2*Z": ("⟨a, t | a^2⟩", "Let K = F2(t)"),
    "(2,3,7)": ("⟨a, b | a^2, b^3, (ab)^7⟩", "subgroup H of index 168"),
    "(2,3,13)": ("⟨a, b | a^2, b^3, (ab)^13⟩", "Golod and Shafarevich"),
    "C'(1/6)": (SMALL_CANCELLATION, "contains a free group of rank 2"),
}


WORDS = {
    "trivial word": ("⟨a, b | a^2 = b^3⟩", "[a^2, b]", "the word a^-2 b^-1 a^2 b is trivial"),
    "no relator": ("⟨a, b | ⟩", "a a^-1", "freely trivial"),
    "moved": ("⟨a, b | a b a = b a b⟩", "a b^-1", "The word takes the point 0 to"),
    "different": ("⟨a | ⟩", "⟨a | a^2⟩", "are not isomorphic"),
}
PAGES |= {name: (text, said) for name, (text, _, said) in WORDS.items()}


@cache
def page(name: str) -> Reading:
    group = Presentation.parse(PAGES[name][0])
    if name == "different":
        witness = compare(group, Presentation.parse(WORDS[name][1]), index=2, budget=Budget()).witness
    elif name in WORDS:
        witness = decide_word(group, group.word(WORDS[name][1])).witness
    else:
        witness = hunt(group).witness
    assert witness is not None
    return Reading(witness)


@pytest.mark.parametrize("name", PAGES)
def test_text(name: str) -> None:
    shown = text(page(name))
    assert PAGES[name][1] in " ".join(shown.split())
    assert max(map(len, shown.splitlines())) <= 100
    assert not re.search(r"[$\\{}]|``", shown)
    keys = [set(re.findall(r"\[([A-Z][A-Za-z]{2,})\]", part)) for part in shown.split("References\n")]
    assert keys[0] == keys[-1]


@pytest.mark.parametrize("name", ["p4", "heisenberg", "icosahedral"])
def test_replacements_end_at_the_identity(name: str) -> None:
    reading = page(name)
    assert reading.lemmas
    for k in range(len(reading.lemmas)):
        assert reading.replacements(k)[-1][0] == ()


@pytest.mark.skipif(shutil.which("pdflatex") is None, reason="pdflatex is not installed")
@pytest.mark.parametrize("name", PAGES)
def test_latex_compiles(name: str, tmp_path: Path) -> None:
    (tmp_path / "page.tex").write_text(latex(page(name)), encoding="utf-8")
    for _ in range(2):
        done = subprocess.run(
            ["pdflatex", "-interaction=nonstopmode", "-halt-on-error", "page.tex"], cwd=tmp_path, capture_output=True, check=False
        )
        assert done.returncode == 0, done.stdout.decode(errors="replace")[-600:]
    log = (tmp_path / "page.log").read_text(errors="replace")
    assert "undefined" not in log
    assert all(float(points) < 5 for points in re.findall(r"Overfull \\hbox \(([\d.]+)pt", log))


def test_command(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    witness = tmp_path / "w.json"
    witness.write_text(page("BS(1,2)").witness.text, encoding="utf-8")
    assert main(["export", str(witness)]) == 0
    assert "Proposition." in capsys.readouterr().out
    assert main(["export", str(witness), "--to", "latex", "--output", str(tmp_path / "w.tex")]) == 0
    assert (tmp_path / "w.tex").read_text(encoding="utf-8").startswith(r"\documentclass")
    assert main(["export", str(witness), "--output", str(tmp_path / "no" / "w.tex")]) == 2
    witness.write_text(page("BS(1,2)").witness.text.replace('"translation":[1]', '"translation":[2]'), encoding="utf-8")
    assert main(["export", str(witness)]) == 1
