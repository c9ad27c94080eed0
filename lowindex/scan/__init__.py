"""Scans: one task on many presentations, stored as it goes."""

from lowindex.scan.runner import Job, guarded_task, run_scan
from lowindex.scan.store import Item, Result, Store
from lowindex.scan.table import FORMATS, columns_of, grid, rendered, rows_of, selected, summary
from lowindex.scan.tasks import check_task, run_task

__all__ = [
    "FORMATS",
    "Item",
    "Job",
    "Result",
    "Store",
    "check_task",
    "columns_of",
    "grid",
    "guarded_task",
    "rendered",
    "rows_of",
    "run_scan",
    "run_task",
    "selected",
    "summary",
]
