"""Roots on lattice edges against numpy's polynomial roots."""

from __future__ import annotations

import numpy as np

from membrane.nodal.edges import lattice_edges
from membrane.nodal.roots import find_roots, on_each
from membrane.triangle import lattice, nodes

PARTS, DEGREE = 3, 5


def edge_between(first: tuple[float, float], last: tuple[float, float]) -> int:
    points = lattice(PARTS).points[:, lattice_edges(PARTS).ends]
    wanted = np.array([first, last]).T
    (number,) = np.nonzero(np.abs(points - wanted[:, :, None]).max(axis=(0, 1)) < 1e-12)[0]
    return int(number)


def sought(f, edge: int, start: bool, **more) -> np.ndarray:
    dofs = f(*nodes(DEGREE))[:, None]
    found = find_roots(dofs, np.array([edge]), PARTS, DEGREE, np.array([start]), **more)
    return found[:, 0]


def test_the_root_of_a_quintic() -> None:
    # numpy.roots, companion matrix eigenvalues
    coefficients = [2.0, -1.0, 0.5, 1.0, -3.0, 0.3]
    exact = [r.real for r in np.roots(coefficients) if abs(r.imag) < 1e-9 and 0 < r.real < 1 / 3]
    assert len(exact) == 1
    edge = edge_between((0.0, 0.0), (1 / 3, 0.0))
    found = sought(lambda x, y: np.polyval(coefficients, x), edge, start=True)
    np.testing.assert_allclose(found, [exact[0], 0.0], atol=1e-14)


def test_a_zero_at_a_held_end_is_not_the_root() -> None:
    edge = edge_between((1 / 3, 0.0), (1 / 3, 1 / 3))
    held = {"zero_at": np.array([[True], [False]])}
    found = sought(lambda x, y: y * (0.2 - y), edge, start=True, **held)
    np.testing.assert_allclose(found, [1 / 3, 0.2], atol=1e-13)


def test_on_a_fixed_side_the_slope_is_sought() -> None:
    edge = edge_between((1 / 3, 0.0), (2 / 3, 0.0))
    along = {"along": np.array([True])}
    found = sought(lambda x, y: y * (x - 0.45) + y**2, edge, start=False, **along)
    np.testing.assert_allclose(found, [0.45, 0.0], atol=1e-13)


def test_without_a_change_of_sign_the_end_that_disagrees_is_taken() -> None:
    edge = edge_between((0.0, 0.0), (1 / 3, 0.0))
    np.testing.assert_allclose(sought(lambda x, y: x + 1.0, edge, start=True), [1 / 3, 0.0])
    np.testing.assert_allclose(sought(lambda x, y: x + 1.0, edge, start=False), [0.0, 0.0])


def test_kinds_are_grouped() -> None:
    groups = {kind: members.tolist() for kind, members in on_each(np.array([2, 7, 2, 2, 5]))}
    assert groups == {2: [0, 2, 3], 5: [4], 7: [1]}
    assert on_each(np.array([], dtype=np.int64)) == []
