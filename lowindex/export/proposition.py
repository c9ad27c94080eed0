"""A witness as a proposition with proof, in plain text or LaTeX."""

from __future__ import annotations

from lowindex.export import nilpotent, obstruction, words
from lowindex.export.document import Block, Paragraph, as_latex, as_text
from lowindex.export.reading import Reading

CLAIMS = {
    "virtually nilpotent": ("A group that has a nilpotent subgroup of finite index", nilpotent.proposition),
    "not virtually nilpotent": ("A group that has no nilpotent subgroup of finite index", obstruction.proposition),
    "word trivial": ("A word that is trivial", words.trivial),
    "word not trivial": ("A word that is not trivial", words.not_trivial),
    "different groups": ("Two groups that are not isomorphic", words.different),
}


def blocks(reading: Reading) -> list[Block]:
    """The proposition, its proof, and where it comes from."""
    made_by = reading.content["made by"]
    digest = _spaced(reading.witness.digest)
    effort = made_by["effort"]
    origin = Paragraph(
        f"This page was made from a witness with the SHA-256 digest {digest}, written by lowindex {made_by['version']} at effort {effort} "
        f"and accepted by its independent checker. The presentation has the SHA-256 digest {_spaced(made_by['digest'])}. To check again: "
        "``lowindex check WITNESS {-}{-}for PRESENTATION'', or with Python alone ``python -m checker WITNESS'' in a copy of the checker's "
        f"folder. To make it again, with the same version: ``lowindex hunt PRESENTATION {{-}}{{-}}effort {effort}''."
    )
    return [*CLAIMS[reading.claim][1](reading), origin]


def _spaced(digest: str) -> str:
    return " ".join(digest[i : i + 16] for i in range(0, 64, 16))


def text(reading: Reading) -> str:
    """Plain text."""
    return as_text(title(reading), blocks(reading))


def latex(reading: Reading) -> str:
    """A LaTeX document."""
    return as_latex(title(reading), blocks(reading))


def title(reading: Reading) -> str:
    """What the page shows."""
    return CLAIMS[reading.claim][0]
