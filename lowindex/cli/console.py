"""What people see: results on standard output, errors and progress on standard error."""

from __future__ import annotations

import os
import sys
from pathlib import Path
from types import TracebackType
from typing import Any

import lowindex
from lowindex.errors import InputError, LowindexError, NotationError
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


def announce_compilation(kernel: str = "search_kernel") -> None:
    """Say so when the kernel a command needs first is going to be compiled (looked for as files, nothing is imported)."""
    package = Path(lowindex.__file__).parent
    cache = os.environ.get("NUMBA_CACHE_DIR")
    if cache is None and not os.access(package, os.W_OK):
        return  # the compiler keeps them somewhere in the home folder then
    if next(Path(cache or package).rglob(f"{kernel}.*.nbc"), None) is None:
        remark("compiling kernels on first use (a few seconds)")


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


class LoggedBar:
    """A bar on standard error, when that is a terminal, and a log of one line a step, when one is wanted."""

    def __init__(self, log: str | None, **bar: Any) -> None:
        self.path = log
        self.options = bar
        self.log: Any = None
        self.bar: Any = None

    def __enter__(self) -> LoggedBar:
        if self.path is not None:
            try:
                self.log = open(self.path, "a", encoding="utf-8")
            except OSError as error:
                raise InputError(f"the log {self.path!r} cannot be written: {error.strerror}; name another path") from None
        if sys.stderr.isatty():
            from tqdm import tqdm

            self.bar = tqdm(leave=False, **self.options)
        return self

    def __exit__(self, *_: object) -> None:
        for thing in (self.log, self.bar):
            if thing is not None:
                thing.close()

    def advance(self, steps: int, shown: str, line: str) -> None:
        """Move the bar, with a text behind it, and log a line."""
        if self.bar is not None:
            self.bar.update(steps)
            self.bar.set_postfix_str(shown)
        if self.log is not None:
            self.log.write(line + "\n")
            self.log.flush()
