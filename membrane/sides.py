"""The sides of a mesh's triangles: each side once, and which sides lie on which edge."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.mesh import Mesh
from membrane.triangle import EDGES


@dataclass(frozen=True)
class Sides:
    """Every side of a mesh.

    vertices : (2, n_sides), lower number first, each side once
    of_triangle : (3, n_triangles), numbers of its sides 0-1, 1-2 and 0-2
    """

    vertices: Ints
    of_triangle: Ints


def sides(mesh: Mesh) -> Sides:
    """Number the sides of a mesh. Two coincident sides of a slit are two sides."""
    pairs = np.stack([mesh.triangles[list(edge)] for edge in EDGES])
    keys = pairs[:, 0] * mesh.vertices.shape[1] + pairs[:, 1]
    found, numbers = np.unique(keys, return_inverse=True)
    vertices = np.stack(np.divmod(found, mesh.vertices.shape[1]))
    return Sides(vertices, numbers.reshape(keys.shape))


def lie_on(mesh: Mesh, edges: Iterable[str]) -> Bools:
    """(3, n_triangles): whether each side of each triangle lies on one of the named edges."""
    return _are_sides(mesh, [mesh.edges[name] for name in edges])


def lie_on_lines(mesh: Mesh) -> Bools:
    """(3, n_triangles): whether each side of each triangle lies on a line load."""
    return _are_sides(mesh, list(mesh.lines.values()))


def _are_sides(mesh: Mesh, found: Sequence[Ints]) -> Bools:
    count = mesh.vertices.shape[1]
    wanted = [low * count + high for low, high in found]
    pairs = np.stack([mesh.triangles[list(edge)] for edge in EDGES])
    keys = pairs[:, 0] * count + pairs[:, 1]
    return np.isin(keys, np.concatenate(wanted)) if wanted else np.zeros(keys.shape, dtype=bool)


def nodes_on(mesh: Mesh, on: Bools) -> Floats:
    """(2, m) geometry nodes of the sides marked in ``on`` (3, n_triangles), metres."""
    inner = mesh.order - 1
    found = []
    for side, ends in enumerate(EDGES):
        local = [*ends, *range(3 + side * inner, 3 + (side + 1) * inner)]
        found.append(mesh.nodes[:, local][:, :, on[side]].reshape(2, -1))
    return np.hstack(found)


def inner_borders(mesh: Mesh) -> Bools:
    """(3, n_triangles): whether a side parts two regions, marked in one of its triangles."""
    numbers = sides(mesh).of_triangle
    region = np.broadcast_to(mesh.region, numbers.shape)
    low, high = np.full(numbers.max() + 1, region.max()), np.zeros(numbers.max() + 1, dtype=int)
    np.minimum.at(low, numbers, region)
    np.maximum.at(high, numbers, region)
    parting = (low < high)[numbers]
    return np.asarray(parting & (region == low[numbers]))
