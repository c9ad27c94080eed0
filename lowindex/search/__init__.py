"""Low-index subgroups."""

from lowindex.search.search import SubgroupClass, SubgroupCounts, SubgroupSearch, count_classes, subgroups, subgroups_by_index

__all__ = ["SubgroupClass", "SubgroupCounts", "SubgroupSearch", "count_classes", "subgroups", "subgroups_by_index"]
