"""The count of modes below a limit, by Crouzeix-Raviart elements: the proof that none is missing.

Let I u have the mean of u over each side of each triangle K, and w = u - I u. With T constant on K

    integral of T grad u . grad u = the same of I u + the same of w,
    integral of w^2 <= c^2 integral of T grad w . grad w,  c = 0.1893 h,

h the longest side by T^-1: X. Liu, Appl. Math. Comput. 267 (2015) 341 (from memory). For any
g >= 0 with g c^2 < 1, and (x + y)^2 <= x^2/(1 - g c^2) + y^2/(g c^2),

    integral of T |grad u|^2 - g u^2 >= the same of I u with g/(1 - g c^2) for g.

Take g = max(s rho - kappa, 0) on each triangle, and on a sprung side, whose beta u^2 integrates
to at least beta times its length times the mean squared, just that. Summed up: a(u, u) - s b(u, u)
>= the discrete form of I u. If that has j negative and no zero eigenvalues, at most j exact ones
lie at or below s: on their span the left side is not positive, and I is one to one there, since
I u = 0 leaves (1 - g c^2) T |grad w|^2, which is positive unless u = 0.

A side e with mass, opposite the corner P of K, takes a part of T |grad w|^2 for w on it: from

    the divergence of (x - P) w^2,
    integral of w^2 on e = |e|/|K| integral of w^2 + w (x - P) . grad w,

and so, by T^-1, integral of w^2 on e <= d^2 integral of T grad w . grad w, with d^2 =
|e|/|K| (0.1893^2 + 0.1893) h^2, |e| and |K| in metres. The side then has mu/(1 - s mu d^2/y)
for mu, where y is its part and 1 - the sum of all y what is left for g: g/(1 - g c^2/(1 - sum)).
Where there is mass it takes half; of a line each of the triangles beside it bears half.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from scipy.sparse import coo_array, csr_array, diags_array

from membrane.bounds.bend import bends
from membrane.bounds.facets import Facets, facets_of
from membrane.bounds.head import Head
from membrane.bounds.leaves import Leaves, owner_of
from membrane.cholesky import negative_count
from membrane.errors import SolveError
from membrane.records.arrays import Bools, Floats, Ints
from membrane.triangle import EDGES

LIU = 0.1893
"""Liu's constant."""


@dataclass(frozen=True)
class CrouzeixRaviart:
    """Coefficients on straight triangles, each on the safe side of the curved head's.

    gradients : (2, 3, n), of the barycentric coordinates
    areas : (n,)
    tension : (n, 2, 2), at most; density : (n,), at least; bedding : (n,), at most
    spring : (n_facets,), N/m, at most, times the length
    mass : (3, n), kg, at least, on each side of each triangle, times the length
    """

    facets: Facets
    fixed: Bools
    gradients: Floats
    areas: Floats
    tension: Floats
    density: Floats
    bedding: Floats
    spring: Floats
    mass: Floats
    fills: bool

    def count(self, s: float) -> int | None:
        """How many eigenvalues at most lie at or below ``s``; None where the mesh cannot tell."""
        g = np.maximum(s * self.density - self.bedding, 0.0)
        square = self._longest**2
        heavy = self.mass > 0.0
        part = heavy / (2 * np.maximum(heavy.sum(axis=0), 1))
        loss = g * LIU**2 * square / (1 - part.sum(axis=0))
        along = s * self.mass * (LIU**2 + LIU) * square / self.areas
        if not self.fills or loss.max() >= 1.0 or (along >= part)[heavy].any():
            return None
        load = np.tile(self.areas / 3 * g / (1 - loss), 3)
        load = np.bincount(self.facets.of_triangle.ravel(), load, self.facets.size)
        rest = np.where(heavy, 1 - along / np.where(heavy, part, 1.0), 1.0)
        form = self._stiffness - diags_array(load) - self._on_sides(s * self.mass / rest)
        free = ~self.fixed
        try:
            return negative_count(csr_array(form)[free][:, free])
        except SolveError:  # a zero pivot proves nothing
            return None

    def _on_sides(self, load: Floats) -> Any:
        """The mass of loaded sides (3, n): shapes are 1 on their own side, and 1 - 2 t from one
        end and from the other on the two beside it."""
        sides = self.facets.of_triangle
        own = [(sides[i], sides[i], load[i]) for i in range(3)]
        for i in range(3):
            j, k = (i + 1) % 3, (i + 2) % 3
            third = load[i] / 3
            own += [(sides[j], sides[j], third), (sides[k], sides[k], third)]
            own += [(sides[j], sides[k], -third), (sides[k], sides[j], -third)]
        rows, columns, data = (np.concatenate(each) for each in zip(*own, strict=True))
        return coo_array((data, (rows, columns)), shape=(self.facets.size,) * 2).tocsr()

    @cached_property
    def _longest(self) -> Floats:
        """(n,): longest side of each triangle by T^-1."""
        # the side opposite a vertex is its height's inverse turned: |side|_(T^-1) =
        # 2 area |grad l|_T / det(T)^(1/2)
        slopes = np.sqrt(np.einsum("din,nde,ein->in", self.gradients, self.tension, self.gradients))
        return np.asarray(
            2 * self.areas * slopes.max(axis=0) / np.sqrt(np.linalg.det(self.tension))
        )

    @cached_property
    def _stiffness(self) -> Any:
        # the shape of a side is 1 - 2 l of the vertex opposite
        opposite = [3 - a - b for a, b in EDGES]
        slopes = -2 * self.gradients[:, opposite]
        local = np.einsum("din,nde,ejn,n->ijn", slopes, self.tension, slopes, self.areas)
        rows, columns = np.broadcast_arrays(
            self.facets.of_triangle[:, None], self.facets.of_triangle[None]
        )
        size = (self.facets.size,) * 2
        K = coo_array((local.ravel(), (rows.ravel(), columns.ravel())), shape=size)
        return (K + diags_array(self.spring)).tocsr()


def longest_along(head: Head, s: float, step: float) -> Floats:
    """(n_facets,), metres: parts of sides with mass that cost the count to ``s`` no more, as a
    share, than triangles of the travel time ``step`` do; infinite elsewhere."""
    share = s * LIU**2 * step**2
    tension = np.linalg.eigvalsh(head.tension)[:, 0].min()
    # on an equilateral triangle d^2 is about half its side
    with np.errstate(divide="ignore"):
        return np.asarray(share * tension / (s * head.mass))


def crouzeix_raviart(head: Head, leaf: Leaves) -> CrouzeixRaviart:
    """The safe coefficients of a head on leaves of its mesh."""
    gradients, signed = _gradients(leaf)
    owners = owner_of(head, leaf)
    e = bends(head, leaf, owners, gradients)
    fills = bool((e < 1.0).all() and (signed * _turned(head, leaf) > 0.0).all())
    e = np.minimum(e, 0.999)
    facets = facets_of(leaf.triangles)
    return CrouzeixRaviart(
        facets=facets,
        fixed=_on_facets(facets, owners, head.fixed.astype(float)) > 0.0,
        gradients=gradients,
        areas=np.abs(signed),
        tension=head.tension[leaf.parent] * ((1 - e) / (1 + e))[:, None, None],
        density=head.density[leaf.parent] * (1 + e) ** 2,
        bedding=head.bedding[leaf.parent] * (1 - e) ** 2,
        spring=_on_facets(facets, owners, head.spring, 1 - e) * facets.lengths(leaf.vertices),
        mass=_masses(head, facets, leaf, owners) * (1 + e),
        fills=fills,
    )


def _masses(head: Head, facets: Facets, leaf: Leaves, owners: Ints) -> Floats:
    """(3, n), kg, on the sides of the leaves; those within the head share it."""
    share = head.mass / np.where(head.border, 1.0, 2.0)
    lengths = facets.lengths(leaf.vertices)[facets.of_triangle]
    return np.asarray(np.where(owners >= 0, share[owners], 0.0) * lengths)


def _gradients(leaf: Leaves) -> tuple[Floats, Floats]:
    """Gradients (2, 3, n) of barycentric coordinates, and signed areas (n,)."""
    places = leaf.vertices[:, leaf.triangles]
    sides = np.roll(places, -2, axis=1) - np.roll(places, -1, axis=1)  # opposite each vertex
    twice = sides[0, 2] * -sides[1, 1] + sides[1, 2] * sides[0, 1]
    return np.stack([-sides[1], sides[0]]) / twice, twice / 2


def _turned(head: Head, leaf: Leaves) -> Floats:
    """(n,): 1 or -1, which way round the leaves should run."""
    x, y = leaf.corners
    way = (x[1] - x[0]) * (y[2] - y[0]) - (x[2] - x[0]) * (y[1] - y[0])
    return np.asarray(np.sign(way) * head.turning[leaf.parent])


def _on_facets(
    facets: Facets, owners: Ints, values: Floats, factor: Floats | None = None
) -> Floats:
    """(n_facets,): the mesh's values on the leaves' sides; 0 on those within a triangle.

    factor : (n,), of each leaf, by which its values are multiplied
    """
    found = np.zeros(facets.size)
    side, triangle = np.nonzero(owners >= 0)
    here = values[owners[side, triangle]]
    found[facets.of_triangle[side, triangle]] = here if factor is None else here * factor[triangle]
    return found
