"""Witnesses as canonical JSON text: keys in a fixed order, no blanks, one file."""

from __future__ import annotations

import hashlib
import json
import os
import tempfile
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Any

from lowindex.errors import InputError
from lowindex.witness.claims import Claim


@dataclass(frozen=True)
class Witness:
    """`text`: the canonical JSON text that the checker reads (lowindex/checker/FORMAT.md)."""

    text: str

    @cached_property
    def content(self) -> dict[str, Any]:
        """The JSON object."""
        value: dict[str, Any] = json.loads(self.text)
        return value

    @property
    def digest(self) -> str:
        """SHA-256 of the text, in hexadecimal."""
        return hashlib.sha256(self.text.encode()).hexdigest()

    @property
    def claim(self) -> str:
        """What the witness proves."""
        return str(self.content["claim"])

    @property
    def lemmas(self) -> int:
        """Number of lemmas."""
        return len(self.content.get("lemmas", ()))

    @property
    def symbols(self) -> int:
        """Total length of the displayed words: lemmas and conjugators."""
        return sum(len(word) + sum(len(u) for u, _, _ in factors) for word, factors in self.content.get("lemmas", ()))

    def save(self, path: str | Path) -> None:
        """Write the file in one step: a reader sees the whole witness or none. InputError when the place cannot be written."""
        target = Path(path)
        try:
            handle, draft = tempfile.mkstemp(dir=target.parent, prefix=target.name, suffix=".part")
            try:
                with os.fdopen(handle, "w", encoding="utf-8") as stream:
                    stream.write(self.text + "\n")
                os.chmod(draft, 0o644)
                os.replace(draft, target)
            except BaseException:
                os.unlink(draft)
                raise
        except OSError as error:
            raise InputError(f"the witness cannot be written to {str(target)!r}: {error.strerror}; name another path") from None


def write(claim: Claim) -> Witness:
    """The witness of a claim: its object as text, in the order of its keys.

    >>> from lowindex.words import Presentation
    >>> from lowindex.witness.claims import NotVirtuallyNilpotent, SmallCancellation, Subject
    >>> subject = Subject(Presentation.parse("⟨a, b | ⟩"), ((0,), (0,)), version="0", effort=1)
    >>> write(NotVirtuallyNilpotent(subject, SmallCancellation(), index=1)).text[:68]
    '{"format":"lowindex witness 1","claim":"not virtually nilpotent","gr'
    """
    return Witness(json.dumps(claim.content(), ensure_ascii=False, separators=(",", ":")))
