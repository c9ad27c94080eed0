"""python -m checker FILE...: accept or refuse witnesses. Exit code 0 when all are accepted, 1 when one is refused, 2 for unusable files."""

from __future__ import annotations

import sys
from io import TextIOWrapper

from . import Refused, check
from .parse import MOST_CHARACTERS


def main(paths: list[str]) -> int:
    """Check the files, one line each; the exit code."""
    if isinstance(sys.stdout, TextIOWrapper):
        sys.stdout.reconfigure(errors="backslashreplace")
    if not paths or paths[0] in ("-h", "--help"):
        print("usage: python -m checker FILE...   (each FILE a witness; FORMAT.md says what that is)", file=sys.stderr)
        return 0 if paths else 2
    worst = 0
    for path in paths:
        try:
            with open(path, encoding="utf-8") as stream:
                text = stream.read(MOST_CHARACTERS + 1)
        except (OSError, ValueError) as error:
            print(f"{path}: cannot be read: {error}", file=sys.stderr)
            return 2
        try:
            print(f"{path}: accepted: {check(text)}")
        except Refused as reason:
            print(f"{path}: refused: {reason}")
            worst = 1
        except KeyboardInterrupt:
            print(f"{path}: interrupted", file=sys.stderr)
            return 130
    return worst


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
