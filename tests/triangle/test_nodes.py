"""The nodes are good to interpolate on and stand in scikit-fem's order."""

import numpy as np
import pytest
from skfem import ElementTriP2, ElementTriP3, ElementTriP4

from membrane.triangle import EDGES, lobatto, nodes, shapes


@pytest.mark.parametrize("degree", range(1, 13))
def test_count_and_place(degree):
    x, y = nodes(degree)
    assert len(x) == (degree + 1) * (degree + 2) // 2
    assert min(x.min(), y.min(), (1 - x - y).min()) > -1e-15
    assert len({(round(a, 9), round(b, 9)) for a, b in zip(x, y, strict=True)}) == len(x)


@pytest.mark.parametrize("degree", range(2, 13))
def test_edges_run_from_the_lower_vertex_by_lobatto_points(degree):
    corners = nodes(1)
    inner = lobatto(degree)[1:-1]
    for number, (low, high) in enumerate(EDGES):
        start = 3 + number * (degree - 1)
        expected = corners[:, [low]] * (1 - inner) + corners[:, [high]] * inner
        np.testing.assert_allclose(nodes(degree)[:, start : start + degree - 1], expected)


@pytest.mark.parametrize("element", [ElementTriP2, ElementTriP3, ElementTriP4])
def test_dof_order_is_that_of_scikit_fem(element):
    theirs = element.doflocs.T
    mine = nodes(element.maxdeg)
    assert mine.shape == theirs.shape
    # its P4 interior nodes are equispaced and ours are not: vertices and edges must agree
    outline = 3 * element.maxdeg
    moved = np.abs(mine[:, :outline] - theirs[:, :outline]).max()
    assert moved < 0.08


@pytest.mark.parametrize(("degree", "largest"), [(4, 2.8), (8, 5.2), (12, 9.6)])
def test_lebesgue_constant_is_small(degree, largest):
    """Isaac 2020, fig. 3, shows 2.7, 5.1 and 9.5 or so (from memory)."""
    points = np.random.default_rng(2).dirichlet([1, 1, 1], 5000).T[:2]
    values, _ = shapes(points, degree)
    assert np.abs(values).sum(axis=0).max() < largest
