"""The finite-element space on a mesh and its dofs."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from skfem import FacetBasis, MeshTri
from skfem.assembly.basis import CellBasis
from skfem.assembly.dofs import Dofs

from membrane.pencil.element import element, reference_element
from membrane.pencil.mapping import CurvedMapping
from membrane.pencil.pattern import Pattern, pattern
from membrane.pencil.quadrature import line_rule, triangle_rule
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pencil import Space
from membrane.triangle import nodes, tabulated

MOST_FOR_CURVES = 6
"""Quadrature orders beyond the shapes' own 2p. On triangles with sides of order g the mass would
be exact with 2 (g - 1), and the stiffness, which is rational, with none; but bends are weak.
Measured on heads of many outlines, p = 4 to 12: eigenvalues move by less than 5e-13."""


STRAIGHT = 1e-15
"""Distance from the straight side, over the largest coordinate, that is rounding."""


class RegionBasis(CellBasis):  # type: ignore[misc]  # scikit-fem is untyped
    """A basis on triangles that works its matrices' pattern out once for all of them."""

    _last: tuple[Ints, Pattern] | None = None

    @cached_property
    def straight(self) -> Any:
        """(n_triangles,), whether the sides are straight and the jacobian a number."""
        mesh = self.mapping.mesh
        linear, _ = tabulated(nodes(mesh.order), 1)
        bends = mesh.nodes - np.matmul(linear.T, mesh.nodes[:, :3])
        rounding = STRAIGHT * np.abs(mesh.nodes).max()
        return (np.abs(bends).max(axis=(0, 1)) <= rounding)[self.tind]

    def pattern(self, free: Ints) -> Pattern:
        """Where the entries between the dofs ``free`` lie."""
        if self._last is None or self._last[0] is not free:
            self._last = (free, pattern(self, free))
        return self._last[1]


@dataclass(frozen=True)
class Discretisation:
    """A space together with the scikit-fem objects that integrate on it."""

    space: Space
    topology: MeshTri
    mapping: CurvedMapping
    dofs: Dofs

    def on_regions(self, names: tuple[str, ...], varying: bool = False) -> RegionBasis:
        """Basis on the triangles of some regions, for a constant or a varying coefficient."""
        return RegionBasis(
            self.topology,
            reference_element(self.space.degree),
            self.mapping,
            quadrature=triangle_rule(self._order + self._more(varying)),
            elements=triangles_in(self.space.mesh, names),
            dofs=self.dofs,
            disable_doflocs=True,
        )

    def on_edges(self, names: tuple[str, ...], varying: bool = False) -> FacetBasis:
        """Basis on the facets of some edges, for a constant or a varying coefficient."""
        return self._on_facets([self.space.mesh.edges[name] for name in names], varying)

    def on_lines(self, names: tuple[str, ...], varying: bool = False) -> FacetBasis:
        """Basis on the facets of some line loads, for a constant or a varying coefficient."""
        return self._on_facets([self.space.mesh.lines[name] for name in names], varying)

    def _on_facets(self, pairs: Sequence[Ints], varying: bool) -> FacetBasis:
        return FacetBasis(
            self.topology,
            element(self.space.degree),
            self.mapping,
            quadrature=line_rule(self._order + self._more(varying)),
            facets=facets_at(self.topology, pairs),
            dofs=self.dofs,
            disable_doflocs=True,
        )

    @property
    def _order(self) -> int:
        return 2 * self.space.degree + min(2 * (self.space.mesh.order - 1), MOST_FOR_CURVES)

    def _more(self, varying: bool) -> int:
        # a varying coefficient counts as a polynomial of the elements' own degree
        return self.space.degree if varying else 0


def build_space(mesh: Mesh, degree: int, fixed_edges: tuple[str, ...]) -> Discretisation:
    """Continuous piecewise polynomials of a degree, with the fixed edges' dofs set apart."""
    # scikit-fem copies arrays of another layout, and says so on stderr
    vertices, triangles = map(np.ascontiguousarray, (mesh.vertices, mesh.triangles))
    topology = MeshTri(vertices, triangles, sort_t=False)
    dofs = Dofs(topology, element(degree))
    local = np.asarray(dofs.element_dofs, dtype=np.int64)
    fixed = facets_at(topology, [mesh.edges[name] for name in fixed_edges])
    held = dofs.get_facet_dofs(fixed).flatten()
    space = Space(
        mesh=mesh,
        degree=degree,
        element_dofs=local,
        locations=_locations(mesh, degree, local, dofs.N),
        free=np.setdiff1d(np.arange(dofs.N), held),
    )
    return Discretisation(space, topology, CurvedMapping(mesh, topology), dofs)


def triangles_in(mesh: Mesh, regions: tuple[str, ...]) -> Ints:
    """Numbers of the triangles in the named regions."""
    wanted = [mesh.region_names.index(name) for name in regions]
    return np.nonzero(np.isin(mesh.region, wanted))[0]


def facets_at(topology: Any, pairs: Sequence[Ints]) -> Ints:
    """Numbers of scikit-fem's facets with the vertex pairs of the arrays (2, n)."""
    wanted = np.hstack([np.empty((2, 0), dtype=np.int64), *pairs])
    count = topology.p.shape[1]
    known = topology.facets[0].astype(np.int64) * count + topology.facets[1]
    order = np.argsort(known)
    return np.asarray(order[np.searchsorted(known[order], wanted[0] * count + wanted[1])])


def _locations(mesh: Mesh, degree: int, local: Ints, count: int) -> Floats:
    values, _ = tabulated(nodes(degree), mesh.order)
    locations = np.empty((2, count))
    locations[:, local] = np.matmul(values.T, mesh.nodes)
    return locations
