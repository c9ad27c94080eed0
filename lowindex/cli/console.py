"""What people see: results on standard output, errors and progress on standard error."""

from __future__ import annotations

import sys
from types import TracebackType
from typing import Any

from lowindex.errors import LowindexError, NotationError
from lowindex.events import Event


def show(text: str) -> None:
    """Write a result."""
    sys.stdout.write(text + "\n")
    sys.stdout.flush()


def complain(error: LowindexError) -> None:
    """Write an error: one line, and for text that cannot be read the place below it."""
    sys.stderr.write(f"lowindex: {error}\n")
    if isinstance(error, NotationError) and error.place:
        sys.stderr.write(error.place + "\n")


def remark(text: str) -> None:
    """Write a line about what is going on."""
    sys.stderr.write(f"lowindex: {text}\n")
    sys.stderr.flush()


class Progress:
    """A progress line on standard error, when that is a terminal. Call it with events."""

    def __init__(self, label: str) -> None:
        self.label = label
        self.bar: Any = None

    def __enter__(self) -> Progress:
        if sys.stderr.isatty():
            from tqdm import tqdm

            self.bar = tqdm(desc=self.label, unit=" subgroups", leave=False)
        return self

    def __exit__(self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None) -> None:
        if self.bar is not None:
            self.bar.close()

    def __call__(self, event: Event) -> None:
        """Show an event."""
        if self.bar is not None:
            self.bar.update()
            self.bar.set_postfix_str(event.text[:60])
