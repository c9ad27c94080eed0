"""A presentation in a witness: names, relators, and its canonical text."""

from __future__ import annotations

import re
from typing import Any

from .parse import fields, listing, string, word
from .refused import require
from .words import Word, group_text, reduced

_NAME = re.compile(r"[^\W\d_][\w'′]*")


def read_group(value: Any, where: str) -> tuple[list[str], list[Word], str]:
    """Names, relators and the recomputed text."""
    names, relators, text = fields(value, ("names", "relators", "text"), where)
    for k, name in enumerate(listing(names, f"{where}.names"), 1):
        what = f"the name of generator {k}"
        require(_NAME.fullmatch(string(name, what)), f"{what} is not a letter and letters, digits, _ or '")
    require(len(set(names)) == len(names), "two generators have the same name")
    words = [word(item, f"relator {k}", len(names)) for k, item in enumerate(listing(relators, f"{where}.relators"))]
    for k, item in enumerate(words):
        require(item and item == reduced(item), f"relator {k} is empty or not freely reduced")
    printed = group_text(names, words)
    require(text == printed, f"{where}.text is not the text of {where}.relators")
    return names, words, printed
