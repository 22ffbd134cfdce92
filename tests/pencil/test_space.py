"""Dofs are numbered once, placed right and held where the edge is fixed."""

import numpy as np
import pytest

from membrane.pencil import build_space
from tests import zoo


@pytest.mark.parametrize("degree", [1, 2, 5])
def test_dofs_of_two_triangles(degree):
    """A square of two triangles has (degree + 1)^2 dofs, of which (degree - 1)^2 inside."""
    space = build_space(zoo.straight_square(), degree, ("rim",)).space
    assert space.dofs == (degree + 1) ** 2
    assert len(space.free) == (degree - 1) ** 2
    inside = space.locations[:, space.free]
    assert ((inside > 0) & (inside < 1)).all()


def test_fixed_dofs_lie_on_the_rim_and_all_of_it():
    space = build_space(zoo.prepared(zoo.DISC).mesh, 6, ("rim",)).space
    radius = np.hypot(*space.locations)
    held = np.setdiff1d(np.arange(space.dofs), space.free)
    np.testing.assert_allclose(radius[held], 1.0, atol=1e-12)
    assert radius[space.free].max() < 1 - 1e-4
