"""How far the straight leaves have to be bent to fill the curved mesh.

A leaf with sides on a curve is mapped onto the curved mesh by x + sum over those sides of
l_a l_b q(s), where d(s) = s (1 - s) q(s) is the curve's departure from the chord, s =
(1 + l_b - l_a)/2, and l_a, l_b are barycentric coordinates: on the side it is the curve, on the
other two nothing. The map's derivative is 1 + D with

    |D| <= max |q| max(|grad l_a|, |grad l_b|) + max |q'| |grad (l_b - l_a)| / 8,

since l_a + l_b <= 1 and l_a l_b <= 1/4. Vectors are measured by T^-1 and slopes by T, so that
with e = |D| < 1 the singular values of the map lie between 1 - e and 1 + e in the metric of the
waves: pulled back to the leaf the tension is at least T (1 - e)/(1 + e), the density at most
rho (1 + e)^2, bedding at least kappa (1 - e)^2 and springs at least beta (1 - e).
"""

from __future__ import annotations

import numpy as np
from numpy.polynomial.chebyshev import chebder, chebval, chebvander

from membrane.bounds.head import Head
from membrane.bounds.leaves import Leaves, placed
from membrane.records.arrays import Floats, Ints
from membrane.triangle import EDGES

SAMPLES = 8
"""Points for each degree of q: between them it rises by less than 1/cos(pi/16), 2 percent
(Ehlich & Zeller 1964, from memory)."""

RISE = 1 / np.cos(np.pi / (2 * SAMPLES))


def bends(head: Head, leaf: Leaves, owners: Ints, gradients: Floats) -> Floats:
    """(n,): e of each leaf.

    owners : (3, n), as from ``owner_of``
    gradients : (2, 3, n), of the leaves' barycentric coordinates, per metre
    """
    e = np.zeros(leaf.parent.size)
    for side, (a, b) in enumerate(EDGES):
        some = np.nonzero((owners[side] >= 0) & head.bent[owners[side]])[0]
        if not some.size:
            continue
        T = head.tension[leaf.parent[some]]
        q, slope = _steepest(head, leaf, some, (a, b), np.asarray(np.linalg.inv(T)))
        la, lb = gradients[:, a, some], gradients[:, b, some]
        reach = np.maximum(_norm(la[..., None], T), _norm(lb[..., None], T))[:, 0]
        e[some] += q * reach + slope * _norm((lb - la)[..., None], T)[:, 0] / 8
    return e


def _steepest(
    head: Head, leaf: Leaves, some: Ints, ends: tuple[int, int], metric: Floats
) -> tuple[Floats, Floats]:
    """Bounds (n,) on |q| and |q'| along a side of some leaves."""
    degree = max(head.mesh.order - 2, 0)
    z = np.cos(np.pi * (np.arange(degree + 1) + 0.5) / (degree + 1))
    s = (1 + z) / 2
    start, stop = (leaf.corners[:, end, some][..., None] for end in ends)
    points = (start + (stop - start) * s).reshape(2, -1)
    parents = np.repeat(leaf.parent[some], s.size)
    curve = placed(head.mesh, parents, points).reshape(2, some.size, s.size)
    low, high = (leaf.vertices[:, leaf.triangles[end, some]][..., None] for end in ends)
    q = (curve - (low + (high - low) * s)) / (s * (1 - s))
    series = np.linalg.solve(chebvander(z, degree), np.moveaxis(q, 2, 0).reshape(degree + 1, -1))
    dense = np.cos(np.pi * (np.arange(SAMPLES * (degree + 1)) + 0.5) / (SAMPLES * (degree + 1)))
    sizes = []
    for each in (series, 2 * chebder(series) if degree else np.zeros_like(series)):
        values = chebval(dense, each).reshape(2, some.size, -1)
        sizes.append(RISE * _norm(values, metric).max(axis=1))
    return sizes[0], sizes[1]


def _norm(vectors: Floats, metric: Floats) -> Floats:
    """(n, m): lengths of ``vectors`` (2, n, m) by a metric (n, 2, 2)."""
    return np.asarray(np.sqrt(np.einsum("dnm,nde,enm->nm", vectors, metric, vectors)))
