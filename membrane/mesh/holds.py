"""What edges and lines do to the head beside them."""

from __future__ import annotations

from math import pi

from membrane.mesh.rays import Ray
from membrane.records.membrane import Field, Membrane

STEADY = 1e-5
"""Jump of curvature, times the segments beside it, that no mode can tell from none."""

TURNED = 1e-7
"""Rounding allowed where two tangents are one."""


class Holds:
    """How edges and lines of a membrane are held and loaded."""

    def __init__(self, membrane: Membrane) -> None:
        self.membrane = membrane

    def fixed(self, edge: str | None) -> bool:
        return edge in self.membrane.fixed_edges

    def springs(self, edge: str | None) -> tuple[float, float]:
        """Stiffness and mass along an edge, nothing where it is fixed."""
        if edge is None or self.fixed(edge):
            return 0.0, 0.0
        total = self.membrane.total
        return float(total(Field.EDGE_STIFFNESS, edge)), float(total(Field.EDGE_MASS, edge))

    def loads(self, ray: Ray) -> tuple[float, float]:
        """Stiffness and mass of all line loads along a ray."""
        total, lines = self.membrane.total, ray.lines
        stiffness = sum(float(total(Field.LINE_STIFFNESS, line)) for line in lines)
        return stiffness, sum(float(total(Field.LINE_MASS, line)) for line in lines)

    def alike(self, one: str | None, other: str | None) -> bool:
        """Whether two edges are held in the same way."""
        same_kind = (one is None) == (other is None) and self.fixed(one) == self.fixed(other)
        return same_kind and self.springs(one) == self.springs(other)


def passes_smoothly(rays: list[Ray], holds: Holds) -> bool:
    """True where two curves are one smooth curve under one support and one load."""
    if len(rays) != 2:
        return False
    first, second = rays
    turn = (second.tangent - first.tangent) % (2 * pi)
    # leaving the vertex both ways, a steady curve bends to the left once, to the right once
    steady = abs(first.bend + second.bend) * max(first.length, second.length) <= STEADY
    alike = (
        holds.alike(first.left, second.right)
        and holds.alike(first.right, second.left)
        and holds.loads(first) == holds.loads(second)
    )
    return abs(turn - pi) < TURNED and steady and alike
