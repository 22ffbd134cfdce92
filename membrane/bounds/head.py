"""The head as numbers: one of each coefficient for each triangle and each side."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from membrane.bounds.facets import Facets, facets_of
from membrane.records.arrays import Bools, Floats
from membrane.records.membrane import Field, Membrane
from membrane.records.mesh import Mesh
from membrane.triangle import EDGES, nodes, shapes

STRAIGHT, ROUNDING = 1e-13, 1e-15
"""Departure of a straight side's nodes from the chord, relative to the side and to the vertices'
coordinates: rounding, which would make the smallest triangles seem bent."""


@dataclass(frozen=True)
class Head:
    """A membrane on a mesh.

    tension : (n_triangles, 2, 2), N/m
    density : (n_triangles,), kg/m^2
    bedding : (n_triangles,), N/m^3
    facets : the sides of the triangles
    fixed : (n_facets,), whether a side is held at zero
    spring : (n_facets,), N/m^2, on edges and lines; 0 on fixed sides
    mass : (n_facets,), kg/m, likewise
    """

    mesh: Mesh
    tension: Floats
    density: Floats
    bedding: Floats
    facets: Facets
    fixed: Bools
    spring: Floats
    mass: Floats

    @cached_property
    def border(self) -> Bools:
        """(n_facets,): which sides have a triangle on one hand only."""
        count = np.bincount(self.facets.of_triangle.ravel(), minlength=self.facets.size)
        return np.asarray(count == 1)

    @cached_property
    def free(self) -> Bools:
        """(n_facets,): which sides of the border bear nothing and nothing holds."""
        return np.asarray(self.border & ~self.fixed & ~self.loaded)

    @property
    def loaded(self) -> Bools:
        """(n_facets,): which sides bear springs or mass."""
        return np.asarray((self.spring > 0.0) | (self.mass > 0.0))

    @cached_property
    def bent(self) -> Bools:
        """(n_facets,): which sides are not straight."""
        away, size = self._sides
        rounding = ROUNDING * np.abs(self.mesh.vertices).max()
        bent = np.zeros(self.facets.size, dtype=bool)
        bent[self.facets.of_triangle[away > np.maximum(STRAIGHT * size, rounding)]] = True
        return bent

    @cached_property
    def flattened(self) -> Floats:
        """(n_triangles,): how far sides that are taken for straight are not, over their lengths."""
        away, size = self._sides
        return np.asarray((away / size * ~self.bent[self.facets.of_triangle]).max(axis=0))

    @cached_property
    def _sides(self) -> tuple[Floats, Floats]:
        """(3, n_triangles) each: departures of the sides' nodes from their chords, and lengths."""
        places = self.mesh.nodes
        x, y = nodes(self.mesh.order)
        along = np.array([1 - x - y, x, y])[..., None]
        away, size = np.empty((2, 3, self.mesh.size))
        for side, (low, high) in enumerate(EDGES):
            on = np.abs(along[low, :, 0] + along[high, :, 0] - 1) < 1e-12
            chord = places[:, [low]] * along[low] + places[:, [high]] * along[high]
            away[side] = np.abs((places - chord)[:, on]).max(axis=(0, 1))
            size[side] = np.abs(places[:, high] - places[:, low]).max(axis=0)
        return away, size

    @cached_property
    def curved(self) -> Bools:
        """(n_triangles,): which triangles have a bent side, and so a map that is not affine."""
        return np.asarray(self.bent[self.facets.of_triangle].any(axis=0))

    @cached_property
    def turning(self) -> Floats:
        """(n_triangles,): 1 where the vertices run counter-clockwise, else -1."""
        _, slopes = shapes(np.array([[1 / 3], [1 / 3]]), self.mesh.order)
        (a, b), (c, d) = np.einsum("dit,ki->dkt", self.mesh.nodes, slopes[:, :, 0])
        return np.asarray(np.sign(a * d - b * c))


def head_of(membrane: Membrane, mesh: Mesh) -> Head:
    """The coefficients of a membrane, all of them constant on regions and edges, on a mesh."""
    facets = facets_of(mesh.triangles)
    values = {
        field: np.stack([np.asarray(membrane.total(field, name)) for name in mesh.region_names])
        for field in (Field.TENSION, Field.AREAL_DENSITY, Field.BEDDING)
    }
    fixed = facets.among(mesh.edges[name] for name in membrane.fixed_edges)
    springs = _borne(membrane, mesh, facets, Field.EDGE_STIFFNESS, Field.LINE_STIFFNESS)
    masses = _borne(membrane, mesh, facets, Field.EDGE_MASS, Field.LINE_MASS)
    return Head(
        mesh=mesh,
        tension=values[Field.TENSION][mesh.region],
        density=values[Field.AREAL_DENSITY][mesh.region],
        bedding=values[Field.BEDDING][mesh.region],
        facets=facets,
        fixed=fixed,
        spring=np.where(fixed, 0.0, springs),
        mass=np.where(fixed, 0.0, masses),
    )


def _borne(
    membrane: Membrane, mesh: Mesh, facets: Facets, on_edges: Field, on_lines: Field
) -> Floats:
    """(n_facets,): what edges and lines put on the sides along them."""
    found = np.zeros(facets.size)
    for field, named in ((on_edges, mesh.edges), (on_lines, mesh.lines)):
        for name, pairs in named.items():
            found[facets.among([pairs])] += float(membrane.total(field, name))
    return found
