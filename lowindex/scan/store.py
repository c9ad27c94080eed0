"""The store of scans: one SQLite file that knows text and numbers, no mathematics.

    groups    digest, text                                   presentations
    members   scan, place, name, parameters, digest          which presentations a scan goes through, in order
    runs      digest, task, effort, version, ...             one result for every presentation, task and effort
    checkpoints  digest, task, state                         where a search that was not finished stands, for a later run with more effort

Every result is one short transaction in write-ahead mode, so a killed scan loses at most what was in flight, and readers may look while
a scan writes.
"""

from __future__ import annotations

import json
import os
import sqlite3
import time
import zlib
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from lowindex.errors import InputError

APPLICATION = 0x6C6F7769
MIGRATIONS = (
    """
    CREATE TABLE groups (digest TEXT PRIMARY KEY, text TEXT NOT NULL) WITHOUT ROWID;
    CREATE TABLE members (scan TEXT NOT NULL, place INTEGER NOT NULL, name TEXT, parameters TEXT NOT NULL, digest TEXT NOT NULL,
                          PRIMARY KEY (scan, place)) WITHOUT ROWID;
    CREATE TABLE runs (digest TEXT NOT NULL, task TEXT NOT NULL, effort INTEGER NOT NULL, version TEXT NOT NULL, verdict TEXT NOT NULL,
                       facts TEXT NOT NULL, seconds REAL NOT NULL, witness BLOB, PRIMARY KEY (digest, task, effort));
    """,
    """
    CREATE TABLE checkpoints (digest TEXT NOT NULL, task TEXT NOT NULL, state BLOB NOT NULL, PRIMARY KEY (digest, task)) WITHOUT ROWID;
    """,
)
"""Statements that take the file from one schema version to the next."""

UNDECIDED = "undecided"
BUSY_SECONDS = 30


@dataclass(frozen=True)
class Item:
    """A member of a scan: its place, name, parameters and presentation as text."""

    place: int
    name: str
    parameters: dict[str, int]
    digest: str
    text: str


@dataclass(frozen=True)
class Result:
    """What a run found. `facts`: numbers and short texts, as JSON can hold them; `verdict` "error" when the run failed; `checkpoint`: where
    an unfinished search stands."""

    task: str
    effort: int
    version: str
    verdict: str
    facts: dict[str, Any]
    seconds: float
    witness: str | None = None
    checkpoint: str | None = None


class Store:
    """An open store. InputError, in one line, when the file is not one or cannot be used."""

    def __init__(self, path: str | Path, *, create: bool = False) -> None:
        self.path = Path(path)
        if not create and not os.path.isfile(path):
            raise InputError(f"{str(path)[:80]!r} is not a store; make one with lowindex scan --store")
        with self._clear_errors():
            self._connection = sqlite3.connect(self.path, timeout=BUSY_SECONDS, isolation_level=None)
            self._prepare(create)

    def _prepare(self, create: bool) -> None:
        self._connection.execute("BEGIN")  # one snapshot: another scan may be making the tables just now
        version = int(self._connection.execute("PRAGMA user_version").fetchone()[0])
        application = int(self._connection.execute("PRAGMA application_id").fetchone()[0])
        tables = int(self._connection.execute("SELECT count(*) FROM sqlite_master").fetchone()[0])
        self._connection.execute("COMMIT")
        if (tables and application != APPLICATION) or (not tables and not create):
            raise InputError(f"{str(self.path)[:80]!r} is not a store of scans; name another file")
        if version > len(MIGRATIONS):
            raise InputError(f"{str(self.path)[:80]!r} was written by a newer version; update lowindex to read it")
        if create:
            self._write_ahead()
        if version < len(MIGRATIONS):
            self._connection.execute("BEGIN IMMEDIATE")
            version = int(self._connection.execute("PRAGMA user_version").fetchone()[0])
            for script in MIGRATIONS[version:]:
                for statement in script.split(";"):
                    if statement.strip():
                        self._connection.execute(statement)
            self._connection.execute(f"PRAGMA application_id = {APPLICATION}")
            self._connection.execute(f"PRAGMA user_version = {len(MIGRATIONS)}")
            self._connection.execute("COMMIT")

    def _write_ahead(self) -> None:
        """Turn on write-ahead mode; SQLite does not wait for other connections there, so this does."""
        deadline = time.monotonic() + BUSY_SECONDS
        while True:
            try:
                self._connection.execute("PRAGMA journal_mode = WAL")
                break
            except sqlite3.OperationalError as error:
                if not error.sqlite_errorname.startswith("SQLITE_BUSY") or time.monotonic() > deadline:
                    raise
                time.sleep(0.01)
        self._connection.execute("PRAGMA synchronous = NORMAL")

    @contextmanager
    def _clear_errors(self) -> Iterator[None]:
        try:
            yield
        except (sqlite3.DatabaseError, zlib.error) as error:
            raise InputError(f"the store {str(self.path)[:80]!r} cannot be used: {error}; what was stored before is kept") from None

    @contextmanager
    def _writing(self) -> Iterator[None]:
        """One transaction."""
        with self._clear_errors():
            self._connection.execute("BEGIN IMMEDIATE")
            try:
                yield
                self._connection.execute("COMMIT")
            except BaseException:
                if self._connection.in_transaction:
                    self._connection.execute("ROLLBACK")
                raise

    def close(self) -> None:
        """Close the file."""
        self._connection.close()

    def __enter__(self) -> Store:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    def enter(self, scan: str, items: Sequence[Item]) -> None:
        """Say what a scan goes through; what it went through before under this name is replaced, results are kept."""
        with self._writing():
            self._connection.executemany("INSERT OR IGNORE INTO groups VALUES (?, ?)", ((item.digest, item.text) for item in items))
            self._connection.execute("DELETE FROM members WHERE scan = ?", (scan,))
            self._connection.executemany(
                "INSERT INTO members VALUES (?, ?, ?, ?, ?)",
                ((scan, item.place, item.name or None, json.dumps(item.parameters), item.digest) for item in items),
            )

    def record(self, digest: str, result: Result) -> None:
        """Keep a result; one of the same task and effort is replaced. Its checkpoint, or its having none, replaces the one
        kept, unless the run failed."""
        witness = None if result.witness is None else zlib.compress(result.witness.encode(), 9)
        facts = json.dumps(result.facts, ensure_ascii=False)
        row = (digest, result.task, result.effort, result.version, result.verdict, facts, result.seconds, witness)
        with self._writing():
            self._connection.execute("INSERT OR REPLACE INTO runs VALUES (?, ?, ?, ?, ?, ?, ?, ?)", row)
            if result.verdict != "error":
                self._connection.execute("DELETE FROM checkpoints WHERE digest = ? AND task = ?", row[:2])
            if result.checkpoint is not None:
                state = zlib.compress(result.checkpoint.encode(), 9)
                self._connection.execute("INSERT INTO checkpoints VALUES (?, ?, ?)", (*row[:2], state))

    def checkpoint(self, digest: str, task: str) -> str | None:
        """Where an unfinished search stands, as text."""
        query = "SELECT state FROM checkpoints WHERE digest = ? AND task = ?"
        with self._clear_errors():
            row = self._connection.execute(query, (digest, task)).fetchone()
            return None if row is None else zlib.decompress(row[0]).decode()

    def pending(self, scan: str, task: str, effort: int, *, again: bool) -> list[Item]:
        """The members without a result: none at all; with `again`, also the undecided ones and errors of smaller efforts. A presentation
        that occurs twice is listed once."""
        found: dict[str, Item] = {}
        for item, result in self.results(scan, task):
            open_again = again and result is not None and result.verdict in (UNDECIDED, "error") and result.effort < effort
            if result is None or open_again:
                found.setdefault(item.digest, item)
        return list(found.values())

    def results(self, scan: str, task: str, *, witnesses: bool = False) -> Iterator[tuple[Item, Result | None]]:
        """Every member in order with its best result: a decided one first, else the one of the highest effort."""
        blob = "runs.witness" if witnesses else "NULL"
        query = f"""
            SELECT members.place, members.name, members.parameters, members.digest, groups.text,
                   runs.effort, runs.version, runs.verdict, runs.facts, runs.seconds, {blob}
            FROM members JOIN groups USING (digest) LEFT JOIN runs ON runs.digest = members.digest AND runs.task = ?
            WHERE members.scan = ? ORDER BY members.place, runs.verdict IN ('undecided', 'error'), runs.effort DESC"""
        with self._clear_errors():
            last = None
            for row in self._connection.execute(query, (task, scan)).fetchall():
                if row[0] == last:
                    continue
                last = row[0]
                item = Item(row[0], row[1] or "", json.loads(row[2]), row[3], row[4])
                if row[5] is None:
                    yield item, None
                    continue
                witness = None if row[10] is None else zlib.decompress(row[10]).decode()
                yield item, Result(task, row[5], row[6], row[7], json.loads(row[8]), row[9], witness)

    def scans(self) -> list[str]:
        """The names of the scans in the file."""
        with self._clear_errors():
            return [row[0] for row in self._connection.execute("SELECT DISTINCT scan FROM members ORDER BY scan")]

    def tasks(self, scan: str) -> list[str]:
        """The tasks with results for a scan."""
        query = "SELECT DISTINCT task FROM runs JOIN members USING (digest) WHERE scan = ? ORDER BY task"
        with self._clear_errors():
            return [row[0] for row in self._connection.execute(query, (scan,))]
