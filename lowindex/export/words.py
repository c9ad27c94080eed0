"""The propositions of witnesses about words and about two groups."""

from __future__ import annotations

from lowindex.export import mathematics as tex
from lowindex.export.document import Block, Items, Paragraph
from lowindex.export.lemmas import label, lemmas
from lowindex.export.reading import Reading
from lowindex.export.subgroup import Names, relators


def trivial(reading: Reading) -> list[Block]:
    """A word is 1: its derivation."""
    names = Names(reading)
    word = names.group_word(tuple(reading.content["word"]))
    statement = f"In the group $G = {tex.group(reading.group)}$ the word ${word}$ is trivial."
    goal = reading.content["goal"]
    if goal < 0:
        return [Paragraph(statement, "Proposition"), Paragraph("The word is freely trivial.", "Proof")]
    used = sorted({*reading.used_relators, *([goal] if goal < reading.first_definition else [])})
    main, appendix = relators(reading, names, used, "These relators of $G$ are used:")
    more, behind = lemmas(reading, names)
    end = Paragraph(f"Up to rotation and inversion the last word is that of $({label(reading, goal)})$, which is the statement.")
    opening = Paragraph("Every step can be checked by multiplying words out in the free group.", "Proof")
    return [Paragraph(statement, "Proposition"), opening, *main, *more, end, *appendix, *behind]


def not_trivial(reading: Reading) -> list[Block]:
    """A word is not 1: an action in which it moves a point."""
    names = Names(reading)
    content = reading.content
    letters = tuple(content["word"])
    table = reading.subgroup.table
    point = content["point"]
    statement = f"In the group $G = {tex.group(reading.group)}$ the word ${names.group_word(letters)}$ is not trivial."
    opening = (
        rf"Let the generators act from the right on the points $0, \dots, {table.index - 1}$ by the permutations below. Every relator "
        "fixes every point, so this is an action of $G$."
    )
    images = Items(
        tuple(f"${tex.permutation(images)}$" for images in table.permutations),
        tuple(rf"${name} \mapsto$" for name in names.generators),
    )
    end = f"The word takes the point ${point}$ to ${table.image(point, letters)}$, so it is not trivial."
    return [Paragraph(statement, "Proposition"), Paragraph(opening, "Proof"), images, Paragraph(end)]


def different(reading: Reading) -> list[Block]:
    """Two groups with different subgroups of one index."""
    content = reading.content
    other = Reading.presentation_of(content["other"])
    summary = content["summary"]
    one, two = summary["classes"]
    statement = f"The groups ${tex.group(reading.group)}$ and ${tex.group(other)}$ are not isomorphic."
    proof = (
        f"Isomorphic groups have the same number of conjugacy classes of subgroups of index {summary['index']}, of the same lengths "
        f"and with the same first homology. The witness lists {one} classes of the first group and {two} of the second one as coset "
        "tables; the checker found them to be tables of different classes, and their lengths and first homology to differ. That the two "
        "lists are complete is the result of two exhaustive searches, which the witness does not repeat."
    )
    return [Paragraph(statement, "Proposition"), Paragraph(proof, "Proof")]
