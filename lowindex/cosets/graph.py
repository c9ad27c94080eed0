"""Schreier graphs as networkx graphs."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from lowindex.cosets.table import CosetTable


def schreier_graph(table: CosetTable, names: Sequence[str]) -> Any:
    """The networkx.MultiDiGraph with an edge i -> i · x_k, keyed by the name of x_k, for every point i and generator x_k."""
    import networkx

    graph = networkx.MultiDiGraph()
    graph.add_nodes_from(range(table.index))
    for k, name in enumerate(names, 1):
        graph.add_edges_from((i, j, name) for i, j in enumerate(table.permutation(k)))
    return graph
