"""How far a search is that is done part by part: totals, what is left, and a file to go on from."""

from __future__ import annotations

import base64
import json
import os
import zlib
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import numpy as np

from lowindex.errors import InputError
from lowindex.search.encoding import encodings
from lowindex.search.search import Block, SubgroupClass
from lowindex.search.task import ROOT, Place, Task
from lowindex.search.walk import Part

FORMAT = "lowindex search 1"
LARGEST_FILE = 2_000_000_000


class SearchProgress:
    """The sum of the parts that are done. `places`: what is left, in serial order; `counts`: as in a search."""

    def __init__(self, task: Task, *, listing: bool) -> None:
        self.task = task
        self.listing = listing
        self.places = [ROOT]
        self.counts = np.zeros((3, task.index + 1), np.int64)
        self.nodes = 0
        self.trials = 0
        self.blocks: list[Block] = []

    @property
    def finished(self) -> bool:
        """Whether nothing is left."""
        return not self.places

    def add(self, part: Part, left: list[Place]) -> None:
        """Take up a part and the places left after it."""
        self.counts += part.counts
        self.nodes += part.nodes
        self.trials += part.trials
        self.blocks += part.blocks
        self.places = left

    def classes(self) -> Iterator[SubgroupClass]:
        """The subgroups listed so far."""
        for block in self.blocks:
            yield from block

    def save(self, path: str | Path) -> None:
        """Write the file in one step: a kill leaves the old one or the new one. InputError when it cannot be written."""
        beside = Path(f"{path}.new")
        try:
            with open(beside, "w", encoding="utf-8") as file:
                file.write(self.text())
                file.flush()
                os.fsync(file.fileno())
            os.replace(beside, path)
        except OSError as error:
            raise InputError(f"{str(path)!r} cannot be written: {error.strerror}; name another file") from None

    def text(self) -> str:
        """The whole state as text."""
        return json.dumps({**self._title(), **self._content()}, ensure_ascii=False)

    @classmethod
    def load(cls, path: str | Path, task: Task, *, listing: bool) -> SearchProgress:
        """Read a file of the same search. InputError when it is another one or damaged."""
        named = repr(str(path)[:80])
        try:
            if os.path.getsize(path) > LARGEST_FILE:
                raise ValueError
            return cls.read(Path(path).read_text(encoding="utf-8"), task, listing=listing, named=named)
        except OSError as error:
            raise InputError(f"{named} cannot be read: {error.strerror}") from None
        except ValueError:
            raise InputError(f"{named} is no file of an interrupted search; name another file") from None

    @classmethod
    def read(cls, text: str, task: Task, *, listing: bool, named: str) -> SearchProgress:
        """Read the state of the same search from text. InputError when it is another one or damaged; it says `named`."""
        progress = cls(task, listing=listing)
        try:
            value = json.loads(text)
            title = {key: value[key] for key in progress._title()}
        except (ValueError, TypeError, KeyError, RecursionError):
            raise InputError(f"{named} is no file of an interrupted search; name another file") from None
        if title != progress._title():
            raise InputError(f"{named} belongs to another search (group, index or conditions differ); name another file")
        try:
            progress._restore(value)
        except (ValueError, TypeError, KeyError, IndexError, zlib.error):
            raise InputError(f"{named} is damaged; remove it and search again") from None
        return progress

    def _title(self) -> dict[str, Any]:
        """What says which search it is."""
        c = self.task.conditions
        words = [[list(word) for word in words] for words in (c.containing, c.avoiding, c.fixed_point_free)]
        conditions = [c.normal, c.up_to_symmetry, *words]
        group = str(self.task.presentation)
        return {"format": FORMAT, "group": group, "index": self.task.index, "conditions": conditions, "listing": self.listing}

    def _content(self) -> dict[str, Any]:
        ways = list(encodings(Task.plain(self.task.presentation, self.task.index, self.task.conditions).encoding))
        return {
            "encoding": ways.index(self.task.encoding) if self.task.encoding in ways else -1,
            "left": [[list(place.path), place.floor] for place in self.places],
            "counts": self.counts.tolist(),
            "nodes": self.nodes,
            "trials": self.trials,
            "found": [[block.indices.tolist(), block.lengths.tolist(), _packed(block)] for block in self.blocks],
        }

    def _restore(self, value: dict[str, Any]) -> None:
        task = self.task
        way = int(value["encoding"])
        self.task = task if way < 0 else task.encoded(list(encodings(task.encoding))[way])
        self.places = [Place(tuple(map(int, path)), int(floor)) for path, floor in value["left"]]
        self.counts = np.array(value["counts"], np.int64)
        if self.counts.shape != (3, task.index + 1):
            raise ValueError
        self.nodes, self.trials = int(value["nodes"]), int(value["trials"])
        shape = (-1, task.index, 2 * task.presentation.rank)
        for indices, lengths, packed in value["found"]:
            images = np.frombuffer(zlib.decompress(base64.b64decode(packed)), np.dtype("<i2")).reshape(shape).astype(np.int16)
            self.blocks.append(Block(np.array(indices, np.int64), np.array(lengths, np.int64), images))


def _packed(block: Block) -> str:
    return base64.b64encode(zlib.compress(block.images.astype("<i2").tobytes())).decode()
