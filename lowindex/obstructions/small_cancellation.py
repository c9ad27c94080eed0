"""The small cancellation obstruction: C'(1/6), no proper powers, neither trivial nor infinite cyclic.

The symmetrised relators of such a presentation make H torsion-free hyperbolic with an aspherical presentation complex (R. C. Lyndon and
P. E. Schupp, Combinatorial Group Theory, chapter V), so H is trivial, infinite cyclic or contains a free group of rank 2. The checker lists
the pieces; there is nothing to search here.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class SmallCancellation:
    """The relators of H, as the checker shortens them, satisfy C'(1/6)."""
