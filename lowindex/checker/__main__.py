"""python -m checker FILE...: accept or refuse witnesses. Exit code 0 when all are accepted, 1 when one is refused, 2 for unusable files."""

from __future__ import annotations

import sys

from . import Refused, check


def main(paths: list[str]) -> int:
    """Check the files; the exit code."""
    if not paths:
        print("usage: python -m checker FILE...", file=sys.stderr)
        return 2
    worst = 0
    for path in paths:
        try:
            with open(path, encoding="utf-8") as stream:
                text = stream.read()
        except (OSError, ValueError) as error:
            print(f"{path}: cannot be read: {error}", file=sys.stderr)
            return 2
        try:
            print(f"{path}: accepted: {check(text)}")
        except Refused as reason:
            print(f"{path}: refused: {reason}")
            worst = 1
    return worst


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
