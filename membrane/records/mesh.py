"""The mesh: curved triangles of any order with named regions and edges."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Mesh:
    """A conforming mesh of curved triangles.

    vertices : (2, n_vertices), metres
    triangles : (3, n_triangles), vertex numbers rising down each column
    nodes : (2, n_nodes, n_triangles), metres; the geometry nodes of each triangle,
        ordered as ``membrane.triangle.nodes(order)``
    order : polynomial order of the geometry
    region_names : names of the regions
    region : (n_triangles,), index into ``region_names``
    edges : edge name -> (2, n), the vertex pairs of its facets, lower number first
    lines : the same for the line loads, whose facets lie within the head or on edges
    departure : (n_triangles,) or one number; a map of the mesh onto the true outline stretches
        a triangle by no less than 1 - departure and no more than 1 + departure; infinite with
        fans, of which nothing is proven
    """

    vertices: Floats
    triangles: Ints
    nodes: Floats
    order: int
    region_names: tuple[str, ...]
    region: Ints
    edges: Mapping[str, Ints]
    lines: Mapping[str, Ints] = field(default_factory=dict)
    departure: Floats | float = 0.0

    @property
    def has_fans(self) -> bool:
        """Whether triangles at corners are drawn in, so that their jacobian is 0 there."""
        return bool(np.isinf(self.departure).any())

    @property
    def size(self) -> int:
        """How many triangles there are."""
        return int(self.triangles.shape[1])
