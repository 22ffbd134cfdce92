"""Lattice edges are counted once, and low places along them are noticed."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.nodal.edges import lattice_edges, mesh_edges
from membrane.subdivision import subdivide
from tests import zoo
from tests.synthetic import modes_of


@pytest.mark.parametrize("parts", [1, 2, 5])
def test_a_lattice_has_as_many_edges_as_euler_says(parts: int) -> None:
    found = lattice_edges(parts)
    points = (parts + 1) * (parts + 2) // 2
    assert found.ends.shape == (2, points + parts**2 - 1)
    assert (found.ends[0] < found.ends[1]).all()
    assert np.array_equal(np.unique(found.of_triangle), np.arange(found.ends.shape[1]))


def test_low_places_of_parabolas() -> None:
    functions = [
        lambda x, y: (x - 0.3) ** 2 + 0.01,  # least 0.01
        lambda x, y: (x - 0.3) ** 2 - 0.01,  # crosses twice
        lambda x, y: x - 0.3,  # crosses once
        lambda x, y: -1.0 - x,  # largest at the ends
    ]
    modes = modes_of(zoo.straight_square(), 4, functions)
    divided = subdivide(modes.space.mesh, 1)
    values = divided.values(modes.space, modes.vectors)
    found = mesh_edges(modes.space, modes.vectors, divided, values)
    (bottom,) = np.nonzero((found.ends == np.array([[0], [1]])).all(axis=0))[0]
    np.testing.assert_allclose(found.lowest[bottom], [0.01, 0.0, 0.0, 1.0], atol=1e-13)
    assert found.ends.shape == (2, 5)
