"""What several commands ask of their options, and files they write."""

from __future__ import annotations

import argparse
from pathlib import Path

from lowindex.errors import InputError


def require_positive_seconds(arguments: argparse.Namespace) -> None:
    """InputError when --seconds is given and is not positive."""
    if arguments.seconds is not None and not arguments.seconds > 0:
        raise InputError(f"--seconds must be positive, not {arguments.seconds}")


def write_into(folder: str, name: str, text: str) -> None:
    """Write a file into a folder, which is made if need be. InputError when that fails."""
    path = Path(folder) / name
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8")
    except OSError as error:
        raise InputError(f"{str(path)!r} cannot be written: {error.strerror}; name another folder") from None
