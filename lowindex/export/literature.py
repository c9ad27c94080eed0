"""The works that proofs cite."""

from __future__ import annotations

import re
from collections.abc import Iterable

from lowindex.export.document import Block, Paragraph, References

WORKS = {
    "Bass": "H. Bass, The degree of polynomial growth of finitely generated nilpotent groups, Proc. London Math. Soc. (3) 25 (1972), "
    "603--614.",
    "Guivarch": "Y. Guivarc'h, Croissance polynomiale et périodes des fonctions harmoniques, Bull. Soc. Math. France 101 (1973), 333--379.",
    "Gromov": "M. Gromov, Groups of polynomial growth and expanding maps, Publ. Math. IHÉS 53 (1981), 53--73.",
    "Wolf": "J. A. Wolf, Growth of finitely generated solvable groups and curvature of Riemannian manifolds, J. Differential Geometry 2 "
    "(1968), "
    "421--446.",
    "Schreier": "O. Schreier, Die Untergruppen der freien Gruppen, Abh. Math. Sem. Univ. Hamburg 5 (1927), 161--183.",
    "Reidemeister": "K. Reidemeister, Über unendliche diskrete Gruppen, Abh. Math. Sem. Univ. Hamburg 5 (1927), 33--39.",
    "Sims": "C. C. Sims, Verifying nilpotence, J. Symbolic Computation 3 (1987), 231--247.",
    "Milnor": "J. Milnor, Growth of finitely generated solvable groups, J. Differential Geometry 2 (1968), 447--449.",
    "Fox": "R. H. Fox, Free differential calculus I, Ann. of Math. (2) 57 (1953), 547--560.",
    "GolodShafarevich": "E. S. Golod and I. R. Shafarevich, On the class field tower, Izv. Akad. Nauk SSSR Ser. Mat. 28 (1964), 261--272.",
    "Lubotzky": "A. Lubotzky, Group presentation, p-adic analytic groups and lattices in $SL_{2}(C)$, Ann. of Math. (2) 118 (1983), "
    "115--130.",
    "LyndonSchupp": "R. C. Lyndon and P. E. Schupp, Combinatorial Group Theory, Springer, 1977.",
}


def references(blocks: Iterable[Block]) -> References:
    """The list of the works that these blocks cite."""
    texts = [text for block in blocks for text in ([block.text] if isinstance(block, Paragraph) else getattr(block, "texts", ()))]
    keys = {key for text in texts for key in re.findall(r"\\cite\{(.*?)\}", text)}
    return References(tuple((key, WORKS[key]) for key in sorted(keys)))
