"""A small document: headings, paragraphs, lists and displayed formulas, with formulas between $ signs in running text."""

from __future__ import annotations

import re
import textwrap
from dataclasses import dataclass

from lowindex.export.mathematics import plain


@dataclass(frozen=True)
class Heading:
    """A section; in an appendix when `appendix`."""

    text: str
    appendix: bool = False


@dataclass(frozen=True)
class Paragraph:
    """Running text. `kind`: "" or the name of a statement ("Proposition", "Proof")."""

    text: str
    kind: str = ""


@dataclass(frozen=True)
class Items:
    """A list; `labels` stand before the items, `proofs`, if there are any, behind them."""

    texts: tuple[str, ...]
    labels: tuple[str, ...]
    proofs: tuple[str, ...] = ()

    @property
    def whole(self) -> list[str]:
        """Every item with its proof."""
        return [text + proof for text, proof in zip(self.texts, self.proofs, strict=True)] if self.proofs else list(self.texts)


@dataclass(frozen=True)
class References:
    """Works cited, by key."""

    entries: tuple[tuple[str, str], ...]


Block = Heading | Paragraph | Items | References

WIDTH = 100


def as_text(title: str, blocks: list[Block]) -> str:
    """Plain text, 100 columns."""
    parts = [title, "=" * len(title), ""]
    for block in blocks:
        if isinstance(block, Heading):
            heading = ("Appendix: " if block.appendix else "") + _plain(block.text)
            parts += [heading, "-" * len(heading), ""]
        elif isinstance(block, Paragraph):
            lead = f"{block.kind}. " if block.kind else ""
            parts += [_filled(lead + _plain(block.text), "", ""), ""]
        elif isinstance(block, Items):
            for label, text in zip(block.labels, block.whole, strict=True):
                parts.append(_filled(_plain(text), f"  {_plain(label)}  "))
            parts.append("")
        else:
            parts += ["References", "----------", ""]
            parts += [_filled(f"[{key}] {_plain(entry)}", "  ") for key, entry in block.entries] + [""]
    return "\n".join(parts).rstrip("\n") + "\n"


def _filled(text: str, lead: str, hanging: str = "      ") -> str:
    return textwrap.fill(text, WIDTH, initial_indent=lead, subsequent_indent=hanging, break_long_words=False, break_on_hyphens=False)


def _plain(text: str) -> str:
    text = re.sub(r"\$(.*?)\$", lambda m: plain(m[1]), text)
    text = re.sub(r"\\cite\{(.*?)\}", r"[\1]", text)
    return text.replace("~", " ").replace("--", "–").replace("{-}", "-").replace("``", '"').replace("''", '"')


_PREAMBLE = r"""\documentclass{amsart}
\usepackage[T1]{fontenc}
\usepackage[utf8]{inputenc}
\usepackage{amsmath,amssymb,amsthm}
\newtheorem*{proposition}{Proposition}
\emergencystretch=3em
\raggedbottom
\allowdisplaybreaks
"""


def as_latex(title: str, blocks: list[Block]) -> str:
    """A complete LaTeX document (amsart)."""
    parts = [_PREAMBLE + rf"\title{{{title}}}", r"\begin{document}", r"\maketitle", ""]
    appendix = False
    proof = False
    for number, block in enumerate(blocks):
        if isinstance(block, Heading):
            if block.appendix and not appendix:
                parts.append(r"\appendix")
                appendix = True
            parts += [rf"\section{{{block.text}}}", ""]
        elif isinstance(block, Paragraph):
            if block.kind == "Proposition":
                parts += [r"\begin{proposition}", block.text, r"\end{proposition}", ""]
            elif block.kind == "Proof":
                parts += [r"\begin{proof}", block.text, ""]
                proof = True
            else:
                parts += [block.text, ""]
        elif isinstance(block, Items):
            parts.append(r"\begin{list}{}{\setlength{\leftmargin}{4em}\setlength{\labelwidth}{3.5em}\setlength{\itemsep}{1pt}}\raggedright")
            parts += [rf"\item[{label}] {text}" for label, text in zip(block.labels, block.whole, strict=True)]
            parts += [r"\end{list}", ""]
        else:
            parts.append(r"\begin{thebibliography}{99}")
            parts += [rf"\bibitem{{{key}}} {entry}" for key, entry in block.entries]
            parts += [r"\end{thebibliography}", ""]
        following = blocks[number + 1] if number + 1 < len(blocks) else None
        if proof and (following is None or isinstance(following, Heading | References)):
            parts += [r"\end{proof}", ""]
            proof = False
    return "\n".join([*parts, r"\end{document}", ""])
