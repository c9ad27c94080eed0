"""Groups that are not virtually nilpotent: no search may ever say they are."""

NEVER = {
    "free of rank 2": "⟨a, b | ⟩",
    "BS(1,2)": "⟨a, t | t a t^-1 = a^2⟩",  # Milnor 1968, Wolf 1968: exponential growth
    "trefoil group": "⟨a, b | a^2 = b^3⟩",
    "genus 2 surface": "⟨a, b, c, d | [a,b][c,d]⟩",
    "Higman": "⟨a, b, c, d | a^-1 b a = b^2, b^-1 c b = c^2, c^-1 d c = d^2, d^-1 a d = a^2⟩",  # G. Higman 1951 (L)
    "Thompson's F": "⟨a, b | [a b^-1, a^-1 b a], [a b^-1, a^-2 b a^2]⟩",  # Bleak, Wassink, arXiv:0711.1014 (L)
    "Sol, trace 3": "⟨x, y, t | [x,y], t x t^-1 = x^2 y, t y t^-1 = x y⟩",  # Wolf 1968
    "C2 * C3": "⟨a, b | a^2, b^3⟩",
    "(2,3,7)": "⟨a, b | a^2, b^3, (ab)^7⟩",
}
