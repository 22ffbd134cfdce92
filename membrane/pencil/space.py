"""The finite-element space on a mesh and its dofs."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from skfem import FacetBasis, MeshTri
from skfem.assembly.basis import CellBasis
from skfem.assembly.dofs import Dofs

from membrane.pencil.element import element, reference_element
from membrane.pencil.mapping import CurvedMapping
from membrane.pencil.quadrature import line_rule, triangle_rule
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pencil import Space
from membrane.triangle import nodes, shapes


@dataclass(frozen=True)
class Discretisation:
    """A space together with the scikit-fem objects that integrate on it."""

    space: Space
    topology: MeshTri
    mapping: CurvedMapping
    dofs: Dofs

    def on_regions(self, names: tuple[str, ...], varying: bool = False) -> CellBasis:
        """Basis on the triangles of some regions, for a constant or a varying coefficient."""
        return CellBasis(
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
        return FacetBasis(
            self.topology,
            element(self.space.degree),
            self.mapping,
            quadrature=line_rule(self._order + self._more(varying)),
            facets=facets_on(self.topology, self.space.mesh, names),
            dofs=self.dofs,
            disable_doflocs=True,
        )

    @property
    def _order(self) -> int:
        # exact for the mass on curved triangles; the stiffness there is rational
        return 2 * self.space.degree + 2 * (self.space.mesh.order - 1)

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
    held = dofs.get_facet_dofs(facets_on(topology, mesh, fixed_edges)).flatten()
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


def facets_on(topology: Any, mesh: Mesh, edges: tuple[str, ...]) -> Ints:
    """Numbers of scikit-fem's facets on the named edges."""
    pairs = [mesh.edges[name] for name in edges]
    wanted = np.hstack([np.empty((2, 0), dtype=np.int64), *pairs])
    count = mesh.vertices.shape[1]
    known = topology.facets[0].astype(np.int64) * count + topology.facets[1]
    order = np.argsort(known)
    return np.asarray(order[np.searchsorted(known[order], wanted[0] * count + wanted[1])])


def _locations(mesh: Mesh, degree: int, local: Ints, count: int) -> Floats:
    values, _ = shapes(nodes(degree), mesh.order)
    locations = np.empty((2, count))
    locations[:, local] = np.einsum("dit,in->dnt", mesh.nodes, values)
    return locations
