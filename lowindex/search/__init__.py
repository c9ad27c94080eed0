"""Low-index subgroups."""

from lowindex.search.progress import SearchProgress
from lowindex.search.search import (
    Block,
    SubgroupClass,
    SubgroupCounts,
    SubgroupSearch,
    count_classes,
    subgroups,
    subgroups_by_index,
    written_best,
)
from lowindex.search.task import ROOT, Conditions, Place, Task
from lowindex.search.walk import Part, walk

__all__ = [
    "ROOT",
    "Block",
    "Conditions",
    "Part",
    "Place",
    "SearchProgress",
    "SubgroupClass",
    "SubgroupCounts",
    "SubgroupSearch",
    "Task",
    "count_classes",
    "subgroups",
    "subgroups_by_index",
    "walk",
    "written_best",
]
