"""Coset tables, Schreier trees, presentations of subgroups of finite index, coset enumeration."""

from lowindex.cosets.encoding import Columns, Encoding, plain_encoding
from lowindex.cosets.enumeration import Enumeration, EnumerationLog, enumerate_cosets, logged_enumeration
from lowindex.cosets.graph import LARGEST_PICTURE, graph_text, schreier_graph
from lowindex.cosets.operations import (
    abelian_table,
    compose,
    core,
    intersection,
    pull_back,
    regular_action,
    standard_form,
    vector_table,
)
from lowindex.cosets.reidemeister_schreier import SubgroupPresentation, subgroup_presentation
from lowindex.cosets.schreier import SchreierTree
from lowindex.cosets.table import CosetTable, column

__all__ = [
    "LARGEST_PICTURE",
    "Columns",
    "CosetTable",
    "Encoding",
    "Enumeration",
    "EnumerationLog",
    "SchreierTree",
    "SubgroupPresentation",
    "abelian_table",
    "column",
    "compose",
    "core",
    "enumerate_cosets",
    "graph_text",
    "intersection",
    "logged_enumeration",
    "plain_encoding",
    "pull_back",
    "regular_action",
    "schreier_graph",
    "standard_form",
    "subgroup_presentation",
    "vector_table",
]
