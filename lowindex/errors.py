"""The exception tree. Everything a caller may want to catch descends from LowindexError.

    LowindexError
    ├── InputError (also a ValueError)     what the user handed over cannot be used: one line, exit code 2
    │   └── NotationError                  text that is not a presentation or a word; knows line and column
    └── RefusedError                       the independent checker refused a witness

A search that runs out of budget is a result, never an exception.
"""

from __future__ import annotations


class LowindexError(Exception):
    """Root of the tree."""


class InputError(LowindexError, ValueError):
    """Input that cannot be used. The message says what, where and what to do, in one line."""


class NotationError(InputError):
    """Text that cannot be read as a presentation or a word.

    `line` and `column` count from 1; `place` is the offending line with a pointer below it (two lines).
    """

    def __init__(self, message: str, *, line: int = 1, column: int = 1, place: str = "") -> None:
        super().__init__(f"line {line}, column {column}: {message}")
        self.line = line
        self.column = column
        self.place = place


class RefusedError(LowindexError):
    """A witness that the independent checker refused; the message is the checker's reason."""
