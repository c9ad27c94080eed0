"""The ten closed flat 3-manifolds. Gk = Z^2 x|_A Z for A of order 1, 2, 3, 4, 6; G6 Hantzsche-Wendt; B1..B4 over the Klein bottle.
H_1 of G3, G5, G6, B3, B4: Chelnokov and Mednykh, arXiv:1905.13558, 2009.06691, 2007.11367 (L); all else C."""

# name: (presentation, order of the holonomy, H_1, subgroups of index 1..8, classes of index 1..8)
FLAT_MANIFOLDS: dict[str, tuple[str, int, str, list[int], list[int]]] = {
    "G1": ("⟨x, y, t | [x,y], [x,t], [y,t]⟩", 1, "Z^3", [1, 7, 13, 35, 31, 91, 57, 155], [1, 7, 13, 35, 31, 91, 57, 155]),
    "G2": (
        "⟨x, y, t | [x,y], t x t^-1 = x^-1, t y t^-1 = y^-1⟩", 2, "Z × C2 × C2",
        [1, 7, 13, 35, 31, 91, 57, 155], [1, 7, 5, 23, 7, 39, 9, 65],
    ),
    "G3": ("⟨x, y, t | [x,y], t x t^-1 = y, t y t^-1 = x^-1y^-1⟩", 3, "Z × C3", [1, 1, 4, 5, 1, 10, 15, 5], [1, 1, 4, 2, 1, 6, 3, 2]),
    "G4": ("⟨x, y, t | [x,y], t x t^-1 = y, t y t^-1 = x^-1⟩", 4, "Z × C2", [1, 3, 1, 11, 11, 15, 1, 43], [1, 3, 1, 7, 3, 5, 1, 16]),
    "G5": ("⟨x, y, t | [x,y], t x t^-1 = y, t y t^-1 = x^-1y⟩", 6, "Z", [1, 1, 4, 5, 1, 10, 15, 5], [1, 1, 2, 2, 1, 5, 3, 2]),
    "G6": ("⟨x, y | x y^2 x^-1 y^2, y x^2 y^-1 x^2⟩", 4, "C4 × C4", [1, 3, 9, 19, 15, 39, 21, 91], [1, 3, 3, 13, 3, 12, 3, 31]),
    "B1": ("⟨x, y, t | x y x^-1 y, [t,y], [t,x]⟩", 2, "Z^2 × C2", [1, 7, 7, 27, 11, 55, 15, 91], [1, 7, 5, 23, 7, 39, 9, 65]),
    "B2": ("⟨x, y, t | x y x^-1 y, [t,y], t x t^-1 = x y⟩", 2, "Z^2", [1, 3, 7, 19, 11, 27, 15, 75], [1, 3, 5, 13, 7, 19, 9, 43]),
    "B3": ("⟨x, y, t | x y x^-1 y, [t,y], t x t^-1 = x^-1⟩", 4, "Z × C2 × C2", [1, 7, 7, 27, 11, 55, 15, 91], [1, 7, 3, 19, 3, 24, 3, 45]),
    "B4": ("⟨x, y, t | x y x^-1 y, [t,y], t x t^-1 = y^-1x^-1⟩", 4, "Z × C4", [1, 3, 7, 19, 11, 27, 15, 75], [1, 3, 3, 13, 3, 12, 3, 33]),
}

# ⟨x, y, z | x^p = y^q = z^r = xyz⟩, flat: counts to index 10 equal those of G5, G4, G3 (C)
FLAT_TRIANGLES = {(2, 3, 6): 6, (2, 4, 4): 4, (3, 3, 3): 3}


def flat_triangle(p: int, q: int, r: int) -> str:
    """The presentation, as text."""
    return f"⟨x, y, z | x^{p} = y^{q} = z^{r} = x y z⟩"
