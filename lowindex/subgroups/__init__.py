"""Low-index subgroups."""

from lowindex.subgroups.search import SubgroupClass, SubgroupCounts, SubgroupSearch, count_classes, subgroups_by_index

__all__ = ["SubgroupClass", "SubgroupCounts", "SubgroupSearch", "count_classes", "subgroups_by_index"]
