"""How modes behave near a vertex: the exponents of r that are not smooth."""

from __future__ import annotations

from math import inf, pi

import numpy as np
from numpy.typing import ArrayLike

from membrane.mesh.corner import Term
from membrane.mesh.holds import Holds
from membrane.mesh.rays import Wedge
from membrane.records.arrays import Floats
from membrane.records.membrane import Field

WHOLE = 1e-7
"""Rounding allowed where an exponent or an angle is compared to a whole number."""

TENSION_JUMP = 0.5
"""Exponent assumed where tensions meet at a corner: the weakest that there can be."""

DENSITY_JUMP = 2.0
"""Exponent where densities meet at a corner, or a line bends: u has r^2 log r."""

LOAD_ENDS = 1.0
"""Exponent where springs or masses along a line end or bend: u has r log r.

The slope of u jumps by c u across a line with c = stiffness - lambda mass, like the
potential of a charge c u: that of a charged half line has r log r at its end.
"""

NEAR = 1e-6
"""How far off a line a vertex on it may be, in lengths of a segment beside it."""

ON_HEAD = (Field.AREAL_DENSITY, Field.BEDDING)
ON_EDGES = (Field.EDGE_STIFFNESS, Field.EDGE_MASS)
ON_LINES = (Field.LINE_STIFFNESS, Field.LINE_MASS)


class Exponents:
    """The terms of the modes near one vertex under a membrane; ``place`` is (2, 1)."""

    def __init__(self, holds: Holds, place: Floats) -> None:
        self.holds = holds
        self.membrane = holds.membrane
        self.place = place

    def terms(self, fan: list[Wedge]) -> list[Term]:
        """What is not smooth in a run of wedges without an edge between them."""
        tensions = [self.tension(wedge) for wedge in fan]
        breaks = any(self._breaks(Field.TENSION, wedge.region, fan) for wedge in fan)
        if breaks or any(not alike(tensions[0], other) for other in tensions):
            return [Term(TENSION_JUMP)]
        if not fan[0].first.parts:
            return self._inside(fan, tensions[0])
        return self._at_edge(fan, tensions[0])

    def tension(self, wedge: Wedge) -> Floats:
        """(2, 2), N/m, of a wedge at the vertex."""
        return self._here(Field.TENSION, wedge.region)

    def _inside(self, fan: list[Wedge], tension: Floats) -> list[Term]:
        """Around an inner vertex densities jump, u has r^2 log r; lines end, cross or bend."""
        densities = [float(self._here(Field.AREAL_DENSITY, wedge.region)) for wedge in fan]
        loads = [self.holds.loads(wedge.first) for wedge in fan]
        if not _balanced(loads, [wedge.first.tangent for wedge in fan], tension):
            return [Term(LOAD_ENDS)]
        lines = {line for wedge in fan for line in wedge.first.lines}
        if any(self._breaks(f, line, fan) for f in ON_LINES for line in lines):
            return [Term(LOAD_ENDS)]
        jumps = not alike(densities[0], densities)
        jumps = jumps or any(self._breaks(f, w.region, fan) for f in ON_HEAD for w in fan)
        return [Term(DENSITY_JUMP)] if jumps or np.any(loads) else []

    def _at_edge(self, fan: list[Wedge], tension: Floats) -> list[Term]:
        """Between two edges: the leading term, unless it is smooth, and what follows it."""
        first, last = fan[0].first.left, fan[-1].second.right
        held = {self.holds.fixed(edge) for edge in (first, last)}
        opening = _opening(fan, tension)
        leading = pi / opening if len(held) == 1 else pi / (2 * opening)
        smooth = abs(leading - round(leading)) <= WHOLE * leading
        terms = [] if smooth else [Term(leading, exact=True)]
        springs = [self.holds.springs(edge) for edge in (first, last)]
        loads = [self.holds.loads(wedge.first) for wedge in fan[1:]]
        straight = abs(opening - pi) < WHOLE
        breaks = any(self._breaks(f, edge, fan) for f in ON_EDGES for edge in (first, last))
        changing = straight and (breaks or springs[0] != springs[1])
        if held == {False} and (np.any(loads) or changing):
            return [*terms, Term(LOAD_ENDS)]
        weaker_by = self._weaker_by(fan, bool(np.any(springs)))
        return [*terms, Term(leading + weaker_by)] if weaker_by < inf else terms

    def _weaker_by(self, fan: list[Wedge], sprung: bool) -> float:
        """How much springs, bends and varying coefficients add to an exponent they spoil.

        Where u goes like r^k, grad T . grad u has terms r^k and rho u terms r^(k+1); each
        makes a term two orders higher, with a logarithm where that is a corner's own exponent.
        """
        bent = abs(fan[0].first.bend) + abs(fan[-1].second.bend) > 0.0
        if bent or sprung or len(fan) > 1:
            return 1.0
        region = str(fan[0].region)
        if self.membrane.varies(Field.TENSION, region):
            return 2.0
        others = (Field.AREAL_DENSITY, Field.BEDDING)
        return 3.0 if any(self.membrane.varies(field, region) for field in others) else inf

    def _breaks(self, field: Field, name: str | None, fan: list[Wedge]) -> bool:
        """Whether a field may jump or kink along a line through the vertex."""
        x, y = self.place[:, 0].tolist()
        return self.membrane.breaks_at(field, str(name), (x, y), NEAR * fan[0].first.length)

    def _here(self, field: Field, name: str | None) -> Floats:
        """A field of a region at the vertex, or its mean where it has no sound value there."""
        here = np.asarray(self.membrane.at(field, str(name), self.place)[0])
        sound = np.isfinite(here).all() and np.trace(np.atleast_2d(here)) > 0.0
        return here if sound else np.asarray(self.membrane.total(field, str(name)))


def alike(one: ArrayLike, other: ArrayLike) -> bool:
    """Whether two coefficients are the same up to rounding."""
    return np.allclose(one, other, rtol=1e-12)


def _balanced(loads: list[tuple[float, float]], directions: list[float], tension: Floats) -> bool:
    """Whether every load that arrives along one direction leaves along the opposite one.

    Then the r log r of the half lines cancel: their sum is c e/(e . T^-1 e) . T^-1 x log r
    over the loads c along the directions e.
    """
    e = np.array([np.cos(directions), np.sin(directions)])
    pull = e / np.einsum("in,ij,jn->n", e, np.linalg.inv(tension), e)
    sums = pull @ np.array(loads)
    return bool(np.all(np.abs(sums) <= WHOLE * (np.abs(pull) @ np.array(loads)).max(axis=0)))


def _opening(fan: list[Wedge], tension: Floats) -> float:
    """The fan's angle after the stretching that makes the tension the same both ways."""
    root = np.linalg.inv(np.linalg.cholesky(tension))
    start = fan[0].first.tangent
    turned = np.concatenate([[start], start + np.cumsum([wedge.angle for wedge in fan])])
    # a straight angle maps to a straight angle, so halves are mapped and then doubled up
    steps = np.interp(np.linspace(0, len(fan), 16 * len(fan) + 1), np.arange(len(fan) + 1), turned)
    x, y = root @ np.array([np.cos(steps), np.sin(steps)])
    return float(np.abs(np.diff(np.unwrap(np.arctan2(y, x)))).sum())
