"""Scripts for a proof assistant: they compile, rest on no axiom, say what they should, and do not compile once they are changed."""

from __future__ import annotations

import re
import shutil
import subprocess
from collections.abc import Iterator
from pathlib import Path

import pytest
from corpus import coxeter, cyclic, plane, space

from lowindex import Presentation, hunt
from lowindex.cli.main import main
from lowindex.decision.word import decide_word
from lowindex.errors import InputError
from lowindex.export import Reading, rocq
from lowindex.witness import Witness

POSITIVE = {
    # name: (text, index, class): the subgroup found by the hunt; both stand in the theorem
    "Klein bottle": ("⟨a, b | a b a^-1 b⟩", 2, 1),
    "p4": (plane.plane_group("p4"), 4, 1),
    "p6m": (plane.plane_group("p6m"), 12, 1),
    "Heisenberg": ("⟨a, b | [a,b,a], [a,b,b]⟩", 1, 2),
    "free nilpotent of class 3": ("⟨a, b | [a,b,a,a], [a,b,a,b], [a,b,b,a], [a,b,b,b]⟩", 1, 3),
    "cyclic": ("⟨a | a^5⟩", 1, 1),
    "A5": ("⟨a, b | a^2, b^3, (ab)^5⟩", 60, 0),
    "F(2,5)": (cyclic.fibonacci(2, 5), 1, 1),
    "Coxeter C~3": (coxeter.AFFINE["C~3"][0], 48, 1),
    "Z by D4 of class 2": ("⟨a, b, t | [a,b,a], [a,b,b], t^2, a^t = a^-1, b^t = b^-1⟩", 2, 2),
}
NEGATIVE = {
    "BS(1,2)": "⟨a, t | t a t^-1 = a^2⟩",
    "C3 * C3": "⟨a, b | a^3, b^3⟩",
    "BS(2,3)": "⟨a, t | t a^2 t^-1 = a^3⟩",
    "Sol": "⟨x, y, t | [x,y], t x t^-1 = x^2 y, t y t^-1 = x y⟩",
    "Sol, negative trace": "⟨x, y, t | [x,y], t x t^-1 = x^-3 y, t y t^-1 = x^-1⟩",
    "figure-eight knot": "⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩",
    "cubic": "⟨x, y, z, t | [x,y], [x,z], [y,z], t x t^-1 = y, t y t^-1 = z, t z t^-1 = x y^4 z^3⟩",
    "Klein bottle times a trefoil": "⟨a, b, c, d | a^-1 b a = b^-1, [a,c], [a,d], [b,c], [b,d], c^2 = d^3⟩",
}


@pytest.fixture(scope="module")
def workshop(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Path]:
    """A folder with the compiled prelude."""
    folder = tmp_path_factory.mktemp("rocq")
    (folder / "Prelude.v").write_text(rocq(reading("⟨a | a^5⟩"))["Prelude.v"], encoding="utf-8")
    done = compiled(folder, "Prelude.v")
    assert done.returncode == 0, done.stdout
    yield folder
    shutil.rmtree(folder)


def compiled(folder: Path, name: str) -> subprocess.CompletedProcess[str]:
    command = ["coqc", "-Q", ".", "Lowindex", name]
    return subprocess.run(command, cwd=folder, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True, check=False, timeout=300)


def reading(text: str) -> Reading:
    found = hunt(Presentation.parse(text))
    assert found.witness is not None
    return Reading(found.witness)


def checked(folder: Path, script: str) -> subprocess.CompletedProcess[str]:
    (folder / "Witness.v").write_text(script, encoding="utf-8")
    return compiled(folder, "Witness.v")


def accepted(folder: Path, script: str) -> None:
    done = checked(folder, script)
    assert done.returncode == 0, done.stdout
    assert done.stdout.strip() == "Closed under the global context"


@pytest.mark.parametrize("name", POSITIVE)
def test_nilpotent_subgroups(workshop: Path, name: str) -> None:
    text, index, nilpotency_class = POSITIVE[name]
    script = rocq(reading(text))["Witness.v"]
    assert f"has_index (stabiliser forward backward) {index} /\\" in script
    assert f"class_at_most relators (stabiliser forward backward) {nilpotency_class}." in script
    accepted(workshop, script)


README = (Path(__file__).parents[2] / "README.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"^\| `(⟨.*?⟩)` \| (.*?) \|$", README.replace("\\|", "|"), flags=re.M)


@pytest.mark.parametrize(("text", "said"), EXAMPLES)
def test_the_examples_of_the_readme(workshop: Path, text: str, said: str) -> None:
    found = reading(text)
    summary = found.content["summary"]
    facts = {"index": summary["index"], "class": summary.get("class"), "degree": summary.get("growth_degree"), "order": summary.get("finite_order")}
    assert said.startswith("not virtually") == (found.claim == "not virtually nilpotent")
    for fact, number in re.findall(r"(index|class|degree|order) (\d+)", said):
        assert facts[fact] == int(number)
    accepted(workshop, rocq(found)["Witness.v"])


def test_there_are_five_examples() -> None:
    assert len(EXAMPLES) == 5


def test_long_derivations_are_text(workshop: Path) -> None:
    """A space group of order 48 over its translations: the lemmas stand in strings, and a changed number is noticed."""
    text = str(space.SpaceGroup(229).without_translations())
    found = reading(text)
    script = rocq(found)["Witness.v"]
    assert "unpacked" not in rocq(reading(POSITIVE["p4"][0]))["Witness.v"]
    if "unpacked" not in script:
        script = rocq(reading(str(space.SpaceGroup(230).without_translations())))["Witness.v"]
    assert "has_index (stabiliser forward backward) 48" in script
    accepted(workshop, script)
    start = script.index('unpacked')
    assert checked(workshop, script[:start] + re.sub(r" 2 (\d+) (\d+) ", r" 2 \2 \1 ", script[start:], count=1)).returncode != 0


@pytest.mark.parametrize("name", NEGATIVE)
def test_obstructions(workshop: Path, name: str) -> None:
    script = rocq(reading(NEGATIVE[name]))["Witness.v"]
    assert "Definition claim : Prop := ~ virtually_nilpotent relators." in script
    accepted(workshop, script)


@pytest.mark.parametrize(
    ("group", "word", "trivial"),
    [
        ("⟨a, b | a^-1 b a b^-2, b^-1 a b a^-2⟩", "a", True),
        ("⟨a, b | [a,b]⟩", "[a^3, b^2]", True),
        ("⟨a, b | a^2, b^3, (ab)^7⟩", "[a, b]", False),
        ("⟨a, b | ⟩", "[[a, b], [a, b^-1]]", False),
        ("⟨a, b | a^2⟩", "1", True),
    ],
)
def test_words(workshop: Path, group: str, word: str, trivial: bool) -> None:
    presentation = Presentation.parse(group)
    found = decide_word(presentation, presentation.word(word))
    assert found.witness is not None
    script = rocq(Reading(found.witness))["Witness.v"]
    assert ("Prop := eqv relators goal []." in script) == trivial
    accepted(workshop, script)


def changed(script: str, definition: str, pattern: str, replacement: str) -> str:
    """The first match after the beginning of a definition is replaced."""
    start = script.index(definition)
    found, times = re.subn(pattern, replacement, script[start:], count=1)
    assert times == 1
    return script[:start] + found


MUTATIONS = {
    # name: (the definition, what is replaced in it, by what)
    "class": ("Definition claim", r"relators \(stabiliser forward backward\) 2", "relators (stabiliser forward backward) 1"),
    "class of the certificate": ("Theorem result", r"lemmas chain 2 images", "lemmas chain 1 images"),
    "index": ("Definition claim", r"has_index \(stabiliser forward backward\) 2", "has_index (stabiliser forward backward) 3"),
    "table": ("Definition forward", r"g_a => \[0; 1\]", "g_a => [1; 0]"),
    "inverse table": ("Definition backward", r"g_t => \[1; 0\]", "g_t => [0; 1]"),
    "transversal": ("Definition transversal", r"\[p_t\]", "[p_a]"),
    "relator": ("Definition relators", r"n_t", "p_a"),
    "weight": ("Definition chain", r"\((\d+), 1,", r"(\1, 2,"),
    "a symbol of the chain": ("Definition chain", r"\((\d+), 1,", r"(1\1, 1,"),
    "an image": ("Definition images", r"\((\d+), true\)", r"(\1, false)"),
    "a commutator missing": ("Definition commutators", r"\(1, 0,", "(1, 1,"),
    "a commutator": ("Definition commutators", r"\((\d+), (true|false)\)\]", "(0, true)]"),
    "origin of an equation": ("Definition bases", r"Some \(1, ", "Some (0, "),
    "a word of an equation": ("Definition bases", r"\((\d+), true\)", r"(\1, false)"),
    "a reference": ("Definition lemmas", r"\], (\d+), (true|false)\)", r"], 77, \2)"),
    "a direction": ("Definition lemmas", r"\], (\d+), true\)", r"], \1, false)"),
    "a lemma": ("Definition lemmas", r"\((\d+), true\)", r"(\1, false)"),
}


@pytest.fixture(scope="module")
def to_be_changed() -> str:
    return rocq(reading(POSITIVE["Z by D4 of class 2"][0]))["Witness.v"]


@pytest.mark.parametrize("name", MUTATIONS)
def test_changed_scripts_do_not_compile(workshop: Path, to_be_changed: str, name: str) -> None:
    assert checked(workshop, changed(to_be_changed, *MUTATIONS[name])).returncode != 0


@pytest.mark.parametrize(
    ("definition", "pattern", "replacement"),
    [
        ("Definition labels", r"# 2", "# 3"),
        ("Definition labels", r"\(1\) # 1", "(5) # 1"),
        ("Definition dilation", r"p_t", "p_a"),
        ("Definition translation", r"p_a", "p_t"),
        ("Definition relators", r"p_a", "n_a"),
    ],
)
def test_changed_obstructions_do_not_compile(workshop: Path, definition: str, pattern: str, replacement: str) -> None:
    script = rocq(reading(NEGATIVE["BS(1,2)"]))["Witness.v"]
    assert checked(workshop, changed(script, definition, pattern, replacement)).returncode != 0


@pytest.mark.parametrize(
    ("definition", "pattern", "replacement"),
    [
        ("Definition maps", r"\(1\) # 1", "(2) # 1"),
        ("Definition maps", r"\(identity 2, identity 2\)|\(-1\) # 1", "(7) # 1"),
        ("Definition translation", r"n_x", "p_x"),
        ("Definition dilation", r"_t", "_x"),
        ("Theorem result", r" 2 maps", " 1 maps"),
    ],
)
def test_changed_matrices_do_not_compile(workshop: Path, definition: str, pattern: str, replacement: str) -> None:
    script = rocq(reading(NEGATIVE["Sol"]))["Witness.v"]
    assert checked(workshop, changed(script, definition, pattern, replacement)).returncode != 0


@pytest.mark.parametrize(("text", "reason"), [("⟨a, t | a^2⟩", r"F_p\(t\)"), ("⟨a, b | a^2, b^3, (ab)^13⟩", "pro-p")])
def test_what_cannot_be_said_is_refused_with_a_reason(text: str, reason: str) -> None:
    with pytest.raises(InputError, match=reason):
        rocq(reading(text))


def test_a_tampered_witness_writes_nothing(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "w.json"
    text = reading("⟨a, b | a b a^-1 b⟩").witness.text
    Witness(text.replace('"class":1', '"class":0')).save(path)
    assert main(["export", str(path), "--to", "rocq", "--output", str(tmp_path / "folder")]) == 1
    assert "refused" in capsys.readouterr().out
    assert not (tmp_path / "folder").exists()
    Witness(text).save(path)
    assert main(["export", str(path), "--to", "rocq"]) == 2
    assert main(["export", str(path), "--to", "rocq", "--output", str(tmp_path / "folder")]) == 0
    assert sorted(item.name for item in (tmp_path / "folder").iterdir()) == ["Prelude.v", "Witness.v"]


def test_the_prelude_has_no_axioms(workshop: Path) -> None:
    names = ("check_sound", "check_word_sound", "check_moved_sound", "check_affine_sound", "check_linear_sound")
    text = "From Lowindex Require Import Prelude.\n" + "".join(f"Print Assumptions {name}.\n" for name in names)
    (workshop / "Axioms.v").write_text(text, encoding="utf-8")
    assert compiled(workshop, "Axioms.v").stdout.splitlines() == ["Closed under the global context"] * 5
    assert not re.search(r"\b(Axiom|Admitted|admit|Parameter|Conjecture)\b", (workshop / "Prelude.v").read_text(encoding="utf-8"))
