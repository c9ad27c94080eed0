"""Pages of HTML: whole in themselves, well formed, and at work in a browser (Debian's chromium, without a window)."""

from __future__ import annotations

import re
import subprocess
import xml.etree.ElementTree as ET
from html.parser import HTMLParser
from pathlib import Path

import pytest
from corpus import coxeter, plane

from lowindex import Presentation, hunt
from lowindex.cli.main import main
from lowindex.cosets import CosetTable
from lowindex.decision.word import decide_word
from lowindex.export import Reading, mathml, page, table_page

GROUPS = {
    "p4": plane.plane_group("p4"),
    "Heisenberg": "⟨a, b | [a,b,a], [a,b,b]⟩",
    "icosahedral": "⟨a, b | a^2, b^3, (ab)^5⟩",
    "names": "⟨a', x12, long_1 | [a',x12], long_1⟩",
    "BS(1,2)": "⟨a, t | t a t^-1 = a^2⟩",
    "Sol": "⟨x, y, t | [x,y], t x t^-1 = x^2 y, t y t^-1 = x y⟩",
    "triangle": "⟨a, b | a^2, b^3, (ab)^7⟩",
    "C~3": coxeter.AFFINE["C~3"][0],
}
VOID = {"meta", "br", "wbr"}


def reading(name: str) -> Reading:
    found = hunt(Presentation.parse(GROUPS[name]))
    assert found.witness is not None
    return Reading(found.witness)


class Nesting(HTMLParser):
    """Fails on an element that is closed wrongly."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.seen: set[str] = set()

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.seen.add(tag)
        if tag not in VOID:
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag, tag


def well_formed(text: str) -> set[str]:
    parser = Nesting()
    parser.feed(text)
    assert not parser.open
    return parser.seen


def in_browser(folder: Path, text: str, script: str) -> tuple[str, str]:
    """The page after a script has run in it, and what the console said."""
    path = folder / "page.html"
    path.write_text(text.replace("</body>", f"<script>{script}</script></body>"), encoding="utf-8")
    options = ["--headless", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", f"--user-data-dir={folder / 'profile'}"]
    command = ["chromium", *options, "--enable-logging=stderr", "--virtual-time-budget=3000", "--dump-dom", path.as_uri()]
    done = subprocess.run(command, capture_output=True, text=True, check=False, timeout=120)
    assert done.returncode == 0, done.stderr
    return done.stdout, "\n".join(line for line in done.stderr.splitlines() if "CONSOLE" in line)


@pytest.mark.parametrize("name", GROUPS)
def test_pages_of_witnesses(name: str) -> None:
    found = reading(name)
    text = page(found)
    seen = well_formed(text)
    assert {"math", "h1", "main", "dl"} <= seen
    assert found.witness.digest in text
    assert str(found.content["made by"]["effort"]) in text
    assert "svg" in seen or not (1 < found.index <= 60 or found.claim == "virtually nilpotent")
    # nothing is fetched: the only addresses are names of namespaces and places on the page itself
    assert not re.search(r"(?:src|href)=\"(?!#)", text)
    assert set(re.findall(r"https?://[^\s\"<]+", text)) <= {"http://www.w3.org/2000/svg"}
    assert not re.search(r"\\\\(?!cite)[a-z]+", re.sub(r"<(annotation|script)[^>]*>.*?</\1>", "", text, flags=re.S))


@pytest.mark.parametrize("name", ["p4", "triangle", "C~3"])
def test_pages_in_a_browser(tmp_path: Path, name: str) -> None:
    script = """
      for (const fold of document.querySelectorAll("summary")) fold.click();
      const all = [...document.querySelectorAll("details")];
      document.body.dataset.open = all.filter(fold => fold.open).length + "/" + all.length;
      document.body.dataset.wide = document.documentElement.scrollWidth > innerWidth;
    """
    shown, console = in_browser(tmp_path, page(reading(name)), script)
    assert console == ""
    opened, every = re.search(r'data-open="(\d+)/(\d+)"', shown).groups()  # type: ignore[union-attr]
    assert opened == every != "0"
    assert 'data-wide="false"' in shown


def test_a_table_that_sorts(tmp_path: Path) -> None:
    rows: list[list[object]] = [[10, "undecided", None], [9, "virtually nilpotent", 4], [2, "not virtually nilpotent", 30], [1, "<b>", 5]]
    text = table_page("a family", ["n", "verdict", "index"], rows, "4 members", [None, "proofs/2.html", None, None])
    well_formed(text)
    assert "&lt;b&gt;" in text
    assert '<a href="proofs/2.html">' in text
    script = """
      const column = k => [...document.querySelector("tbody").rows].map(row => row.cells[k].textContent).join(",");
      const buttons = document.querySelectorAll("th button"), seen = [column(0)];
      buttons[0].click(); seen.push(column(0)); buttons[0].click(); seen.push(column(0));
      buttons[2].click(); seen.push(column(2)); buttons[1].click(); seen.push(column(0));
      document.body.dataset.seen = seen.join(";");
      document.body.dataset.sort = [...document.querySelectorAll("th")].map(head => head.getAttribute("aria-sort")).join(",");
    """
    shown, console = in_browser(tmp_path, text, script)
    assert console == ""
    seen = re.search(r'data-seen="([^"]*)"', shown).group(1)  # type: ignore[union-attr]
    assert seen.split(";") == ["10,9,2,1", "1,2,9,10", "10,9,2,1", "4,5,30,", "1,2,10,9"]
    assert 'data-sort=",ascending,,"' in shown


def test_a_page_of_a_scan_with_proofs(tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    assert main(["scan", "⟨a, b | a^2, b^n⟩", "--set", "n=2..4", "--store", "s"]) == 0
    capsys.readouterr()
    assert main(["table", "s", "--format", "html", "--witnesses", "proofs"]) == 0
    text = capsys.readouterr().out
    well_formed(text)
    links = re.findall(r'href="([^"]+)"', text)
    assert links == [f"proofs/{k}.html" for k in (1, 2, 3)]
    for link in links:
        well_formed((tmp_path / link).read_text(encoding="utf-8"))


def test_export_to_html(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    reading("p4").witness.save(tmp_path / "w.json")
    assert main(["export", str(tmp_path / "w.json"), "--to", "html", "--output", str(tmp_path / "w.html")]) == 0
    well_formed((tmp_path / "w.html").read_text(encoding="utf-8"))


def test_a_page_for_words() -> None:
    for group, word in (("⟨a, b | [a,b]⟩", "[a^2, b]"), ("⟨a, b | a^2, b^3, (ab)^7⟩", "[a, b]")):
        presentation = Presentation.parse(group)
        found = decide_word(presentation, presentation.word(word))
        assert found.witness is not None
        well_formed(page(Reading(found.witness)))


@pytest.mark.parametrize(
    ("formula", "shown"),
    [
        ("a^{-1}", "<msup><mi>a</mi><mrow><mo>−</mo><mn>1</mn></mrow></msup>"),
        (r"\sigma_{12}^{3}", "<msubsup><mi>σ</mi><mn>12</mn><mn>3</mn></msubsup>"),
        (r"\frac{1}{t}", "<mfrac><mn>1</mn><mi>t</mi></mfrac>"),
        (r"\mathbb{Z}^{2}", "<msup><mi>ℤ</mi><mn>2</mn></msup>"),
        (r"\begin{pmatrix}1 & x \\\\ 0 & 1\end{pmatrix}", "<mtr><mtd><mn>1</mn></mtd><mtd><mi>x</mi></mtd></mtr>"),
        ("a < b", "<mo>&lt;</mo>"),
    ],
)
def test_formulas(formula: str, shown: str) -> None:
    found = mathml(formula)
    assert shown in found
    ET.fromstring(found)


def test_notebooks() -> None:
    verdict = hunt(Presentation.parse(GROUPS["p4"]))
    html = verdict._repr_html_()
    assert "<th>index</th><td>4</td>" in html
    well_formed(html)
    table = CosetTable.from_permutations([(1, 2, 0), (0, 2, 1)])
    picture = table._repr_svg_()
    assert picture is not None
    ET.fromstring(picture)
    assert CosetTable.from_permutations([tuple(range(1, 100)) + (0,)])._repr_svg_() is None
    group = Presentation.parse("⟨x_12, b | ⟩")
    assert group._repr_latex_() == r"$\langle x_{12}, b \mid \rangle$"
    assert group.spelled(group.word("x_12^-3 b"))._repr_latex_() == r"$x_{12}^{-3}\,b$"
