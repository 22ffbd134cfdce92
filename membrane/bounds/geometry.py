"""From the mesh to the true outline: heads on the mesh whose eigenvalues lie on either side.

Let a map of the mesh onto the outline have singular values between 1 - e and 1 + e on a triangle,
measured by T^-1, and so a jacobian between (1 - e)^2 and (1 + e)^2. Carried over by it, a
function's energy on the triangle lies, by its tension, between (1 - e)/(1 + e) and
(1 + e)/(1 - e) of what it was, since in the plane the jacobian cancels one of the two singular
values; by its bedding, as its mass, between (1 - e)^2 and (1 + e)^2; and what its sides bear
between 1 - e and 1 + e. Put to the triangles' coefficients, these factors make heads on the mesh
with energies below and masses above, or the other way round, and so by min-max with eigenvalues
below, or above, those of the true outline.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from membrane.bounds.head import Head
from membrane.errors import BracketError
from membrane.records.arrays import Floats

FLATTENED = 16.0
"""Bound on e by the departure from the chord, over its length, of a side that is taken for
straight: all but a parabola, whose q is four times that, sqrt(2) for the slope of l_a l_b, and the
rest for triangles as flat as meshes have."""

LARGEST = 0.05
"""Largest e that is still worth a bracket."""


def below(head: Head) -> Head:
    """The head on the mesh with eigenvalues at most those on the true outline."""
    return _changed(head, -1.0)


def above(head: Head) -> Head:
    """The head on the mesh with eigenvalues at least those on the true outline."""
    return _changed(head, 1.0)


def _changed(head: Head, way: float) -> Head:
    """Energies as large as e can make them, and masses as small; the reverse if ``way`` is -1."""
    e = way * _stretch(head)
    side = np.zeros(head.facets.size)
    np.maximum.at(side, head.facets.of_triangle, np.broadcast_to(way * e, (3, e.size)))
    return replace(
        head,
        tension=head.tension * ((1 + e) / (1 - e))[:, None, None],
        density=head.density * (1 - e) ** 2,
        bedding=head.bedding * (1 + e) ** 2,
        spring=head.spring * (1 + way * side),
        mass=head.mass * (1 - way * side),
    )


def _stretch(head: Head) -> Floats:
    """(n_triangles,): e. Raises BracketError where the mesh is too far from the outline."""
    least, most = np.linalg.eigvalsh(head.tension).T
    e = (head.mesh.departure + FLATTENED * head.flattened) * np.sqrt(most / least)
    if not (e < LARGEST).all():
        raise BracketError("the mesh departs too far from the outline's curves")
    return np.asarray(e)
