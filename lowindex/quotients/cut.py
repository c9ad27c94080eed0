"""Cuts: subgroups that contain what is nilpotent.

A cut of a group H is q^-1(Fit Q) for a finite quotient q: H -> Q that is not nilpotent. When H has a nilpotent subgroup of finite index,
every nilpotent normal subgroup of H lies in every cut of H (its image is a nilpotent normal subgroup of Q).
"""

from __future__ import annotations

from dataclasses import dataclass

from lowindex.cosets import CosetTable


@dataclass(frozen=True)
class Cut:
    """`table`: the action of H on the cosets of the cut (index > 1). `kind` and `detail` say which quotient it comes from."""

    table: CosetTable
    kind: str
    detail: str
