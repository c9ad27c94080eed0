"""A text that kills the process that unpickles it, as a crash in compiled code would."""

from __future__ import annotations

import os
import signal
from typing import Any


def die() -> str:
    """Never returns."""
    os.kill(os.getpid(), signal.SIGKILL)
    return ""


class DeadlyText(str):
    """Equal to its text in this process."""

    def __reduce__(self) -> Any:
        return die, ()
