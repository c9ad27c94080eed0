"""Abelian groups given by relation rows: rank and torsion by the Smith form, ranks modulo a prime."""

from __future__ import annotations

from .refused import require
from .words import Word

MOST_STEPS = 20_000_000
MOST_BITS = 4_000


def exponent_rows(words: list[Word]) -> list[dict[int, int]]:
    """For each word the sum of the exponents of each generator, zeros left out."""
    rows = []
    for word in words:
        row: dict[int, int] = {}
        for letter in word:
            row[abs(letter)] = row.get(abs(letter), 0) + (1 if letter > 0 else -1)
        rows.append({k: n for k, n in row.items() if n})
    return rows


def rank_mod(rows: list[dict[int, int]], p: int) -> int:
    """The rank of sparse rows modulo a prime p."""
    pivots: dict[int, dict[int, int]] = {}
    steps = 0
    for row in sorted(rows, key=len):
        row = {k: n % p for k, n in row.items() if n % p}
        while row:
            lead = min(row)
            if lead not in pivots:
                scale = pow(row[lead], -1, p)
                pivots[lead] = {k: n * scale % p for k, n in row.items()}
                break
            factor = row[lead]
            steps += len(row) + len(pivots[lead])
            require(steps <= MOST_STEPS, f"the rank modulo {p} takes more than {MOST_STEPS} steps")
            for k, n in pivots[lead].items():
                row[k] = (row.get(k, 0) - factor * n) % p
                if not row[k]:
                    del row[k]
    return len(pivots)


def abelian_invariants(rows: list[list[int]], size: int) -> tuple[int, list[int]]:
    """(rank, torsion d1 | d2 | ...) of Z^size modulo the rows: Smith form by row and column operations, smallest entry as pivot."""
    rows = [row[:] for row in rows if any(row)]
    torsion: list[int] = []
    rank = size
    steps = 0
    while rows:
        entries = [(abs(x), r, c) for r, row in enumerate(rows) for c, x in enumerate(row) if x]
        steps += len(rows) * size
        small = steps <= MOST_STEPS and max(entries)[0].bit_length() <= MOST_BITS
        require(small, f"the Smith form takes more than {MOST_STEPS} steps or numbers of {MOST_BITS} bits")
        _, i, j = min(entries)
        pivot = rows[i][j]
        for r, row in enumerate(rows):
            factor = row[j] // pivot if r != i else 0
            if factor:
                rows[r] = [x - factor * y for x, y in zip(row, rows[i])]
        for c in range(size):
            factor = rows[i][c] // pivot if c != j else 0
            if factor:
                for row in rows:
                    row[c] -= factor * row[j]
        if any(row[j] for r, row in enumerate(rows) if r != i) or any(x for c, x in enumerate(rows[i]) if c != j):
            continue
        bad = next((row for row in rows if any(x % pivot for x in row)), None)
        if bad is not None:
            rows[i] = [x + y for x, y in zip(rows[i], bad)]
            continue
        rank -= 1
        if abs(pivot) > 1:
            torsion.append(abs(pivot))
        rows = [row for r, row in enumerate(rows) if r != i and any(row)]
    return rank, torsion
