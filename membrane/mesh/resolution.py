"""How fine a mesh must be: element degree, edge lengths, and depth at the corners."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from math import ceil, factorial, pi, sqrt

import numpy as np

from membrane.errors import MeshError
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.membrane import Field, Membrane
from membrane.records.outline import Outline
from membrane.records.study import ModesWanted

LOWEST_DEGREE, HIGHEST_DEGREE = 4, 12
"""Degrees that are chosen where the user sets none."""

PROOFS = 300.0
"""How much more than in the modes corners may leave in the brackets around them."""

MOST_UNKNOWNS = 1_000_000
"""More than this takes hours and tens of gigabytes."""


@dataclass(frozen=True)
class Resolution:
    """A mesh and a degree to solve on.

    degree : of the elements; the geometry follows it
    phase : longest edge times the highest wanted wave number, dimensionless
    tolerance : relative error of an eigenvalue that the corners may leave
    degree_is_free : False where the user has set the degree
    """

    degree: int
    phase: float
    tolerance: float
    degree_is_free: bool = True

    @property
    def coarser_degree(self) -> int:
        """Degree of the second solve, which measures the error of the first."""
        return _coarser(self.degree)

    @property
    def of_proofs(self) -> Resolution:
        """For a mesh on which brackets are proven: they cannot show what its corners leave."""
        return replace(self, tolerance=PROOFS * self.tolerance)

    def finer(self, excess: float) -> Resolution:
        """The next to try, where the measured error was ``excess`` times the wanted one."""
        order = 2 * self.coarser_degree
        shrink = float(np.clip(0.9 * excess ** (-1.0 / order), 0.45, 0.85))
        drop = max(0.1 / excess, 1e-3)
        # in the layers around a corner only the degree helps, however small they begin
        degree = min(self.degree + 2, HIGHEST_DEGREE) if self.degree_is_free else self.degree
        return Resolution(degree, shrink * self.phase, drop * self.tolerance, self.degree_is_free)


def first_resolution(wanted: ModesWanted, degree: int | None = None) -> Resolution:
    """What should be fine enough for the wanted accuracy at the first try.

    degree : to use unless the user has set one; None lets the accuracy choose
    """
    relative = wanted.accuracy / CENTS_PER_EIGENVALUE
    degree = wanted.degree or degree or _degree_for(relative)
    phase = _phase_for(relative, _coarser(degree))
    return Resolution(degree, phase, 1e-4 * relative, wanted.degree is None)


def _coarser(degree: int) -> int:
    """Two degrees less, but one less of the lowest: of degree 2 the triangles are too many."""
    return degree - (2 if degree > LOWEST_DEGREE else 1)


def _degree_for(relative: float) -> int:
    """Two degrees more for every three digits, 8 at 0.01 cent: cheapest in our trials."""
    digits = -np.log10(relative)
    return int(np.clip(2 * round((digits + 7.0) / 3.0), LOWEST_DEGREE, HIGHEST_DEGREE))


def _phase_for(relative: float, degree: int) -> float:
    """Edge length times wave number at which the dispersion error is as wanted.

    In one dimension an eigenvalue is off by (p!/(2p)!)^2 (kh)^(2p) / (2p + 1), relative:
    M. Ainsworth, SIAM J. Numer. Anal. 42 (2004) 553 (from memory). On triangles the same
    figure comes out within a factor of about three; a tenth of it leaves room for curved
    sides and uneven triangles.
    """
    constant = (factorial(degree) / factorial(2 * degree)) ** 2 / (2 * degree + 1)
    return float((0.1 * relative / constant) ** (1.0 / (2 * degree)))


def region_sizes(
    outline: Outline, membrane: Membrane, wanted: ModesWanted, phase: float
) -> dict[str, float]:
    """Longest edge in each region, metres: ``phase`` over the local wave number."""
    omega = highest(outline, membrane, wanted)
    return {r.name: phase / (omega * slowness(membrane, r.name)) for r in outline.regions}


def highest(outline: Outline, membrane: Membrane, wanted: ModesWanted) -> float:
    """Angular frequency up to which modes are wanted, rad/s, or an estimate from above."""
    return 2 * pi * wanted.up_to if wanted.up_to else _weyl(outline, membrane, wanted.count)


def unknowns(outline: Outline, sizes: Mapping[str, float], degree: int) -> int:
    """About how many unknowns a mesh with these longest edges has.

    A triangle of edge h covers sqrt(3)/4 h^2 and brings degree^2/2 unknowns.
    """
    triangles = sum(r.area / (sqrt(3) / 4 * sizes[r.name] ** 2) for r in outline.regions)
    return ceil(triangles * degree**2 / 2)


def check_affordable(outline: Outline, sizes: Mapping[str, float], degree: int) -> None:
    """Raise MeshError where a mesh would have more unknowns than can be solved for."""
    count = unknowns(outline, sizes, degree)
    if count > MOST_UNKNOWNS:
        raise MeshError(
            f"the modes wanted need about {count:.1e} unknowns, more than {MOST_UNKNOWNS:.0e}; "
            "ask for fewer modes, a lower up_to, less accuracy or a higher degree."
        )


def _weyl(outline: Outline, membrane: Membrane, count: int) -> float:
    """Angular frequency of the mode number ``count``, rad/s, by Weyl's two-term law.

    count = A w^2/(4 pi) - L w/(4 pi), with area and fixed perimeter measured in travel
    time; H. Weyl 1911, second term after V. Ivrii 1980 (from memory).
    """
    area = sum(r.area * _travel_area(membrane, r.name) for r in outline.regions)
    slowest = max(slowness(membrane, region.name) for region in outline.regions)
    held = sum(outline.edge_length(name) for name in membrane.fixed_edges)
    length = slowest * (held + _sprung(outline, membrane))
    length = min(length, 2.0 * sqrt(pi * count * area))  # a comb's perimeter says nothing
    return float(length + sqrt(length**2 + 16 * pi * area * count)) / float(2 * area)


def _sprung(outline: Outline, membrane: Membrane) -> float:
    """Length of both sides of the lines with springs, which may be as good as fixed, metres."""
    stiff = [n for n in outline.lines if membrane.total(Field.LINE_STIFFNESS, n) > 0.0]
    return 2.0 * sum(outline.line_length(name) for name in stiff)


def slowness(membrane: Membrane, region: str) -> float:
    """Seconds per metre of the slowest wave in a region."""
    tension = membrane.sampled(Field.TENSION, region)
    density = membrane.sampled(Field.AREAL_DENSITY, region)
    return float(np.sqrt((density / np.linalg.eigvalsh(tension)[:, 0]).max()))


def _travel_area(membrane: Membrane, region: str) -> float:
    """Area in travel time squared, s^2, of a square metre of a region on the mean."""
    tension = membrane.sampled(Field.TENSION, region)
    density = membrane.sampled(Field.AREAL_DENSITY, region)
    local = density / np.sqrt(np.linalg.det(tension))
    return float(local @ membrane.samples[region].weights if local.size > 1 else local[0])
