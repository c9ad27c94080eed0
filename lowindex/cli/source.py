"""From a SOURCE argument to presentations: text, "-" for standard input, a file of presentations, or a name of the catalog."""

from __future__ import annotations

import os
import stat
import sys

from lowindex.errors import InputError
from lowindex.words import Presentation, parse_file

LARGEST_FILE = 64_000_000


def read_source(source: str) -> list[Presentation]:
    """The presentations that a SOURCE names. InputError (NotationError for their text) when there are none to be had."""
    stripped = source.strip()
    if source == "-":
        return parse_file(_decoded(sys.stdin.buffer.read(LARGEST_FILE + 1), "standard input"))
    if stripped[:1] in ("<", "⟨") or (("<" in stripped or "⟨" in stripped) and not os.path.lexists(source)):
        return parse_file(source)
    if not os.path.lexists(source):
        from lowindex.known import entry

        known = entry(source)
        if known is not None:
            return [known.presentation]
    return parse_file(read_text(source))


def read_one(source: str) -> Presentation:
    """The one presentation that a SOURCE names; InputError when there are more."""
    groups = read_source(source)
    if len(groups) != 1:
        raise InputError(f"expected one presentation, found {len(groups)}")
    return groups[0]


def read_text(path: str) -> str:
    """The text of a regular file. InputError when it cannot be read."""
    try:
        if not stat.S_ISREG(os.stat(path).st_mode):
            raise InputError(f"{path!r} is not a regular file; give a presentation ⟨…⟩, a file of presentations, or -")
        with open(path, "rb") as stream:
            return _decoded(stream.read(LARGEST_FILE + 1), repr(path))
    except FileNotFoundError:
        raise InputError(f"{path[:80]!r} is no presentation ⟨…⟩, file or name of the catalog; give one of them, or -") from None
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) else str(error)
        raise InputError(f"{path[:80]!r} cannot be read: {reason}; give a presentation ⟨…⟩, a file, or -") from None


def _decoded(data: bytes, where: str) -> str:
    if len(data) > LARGEST_FILE:
        raise InputError(f"{where} has more than {LARGEST_FILE} bytes; split it")
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as error:
        raise InputError(f"{where} is not UTF-8 text (byte {error.start}); save it as UTF-8") from None
