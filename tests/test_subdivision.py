"""A lattice on a whole mesh: welded by identity, exact on curved triangles."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from membrane.sides import lie_on
from membrane.subdivision import subdivide
from membrane.triangle import shapes
from tests import zoo
from tests.synthetic import modes_of


@pytest.mark.parametrize("parts", [1, 2, 3, 7])
def test_every_number_is_used_and_every_point_has_one_place(parts: int) -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    divided = subdivide(mesh, parts)
    assert np.array_equal(np.unique(divided.numbers), np.arange(divided.count))
    positions = divided.positions(mesh)
    phi, _ = shapes(divided.lattice.points, mesh.order)
    for triangle in range(mesh.size):
        here = mesh.nodes[:, :, triangle] @ phi
        np.testing.assert_allclose(positions[:, divided.numbers[:, triangle]], here, atol=1e-14)


def test_euler_holds_for_the_small_triangles() -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    divided = subdivide(mesh, 3)
    assert divided.triangles.shape[1] == 9 * mesh.size
    edges = {tuple(sorted(e)) for t in divided.triangles.T for e in (t[:2], t[1:], t[::2])}
    assert divided.count - len(edges) + 9 * mesh.size == 1


def test_values_are_those_of_the_function() -> None:
    modes = modes_of(zoo.prepared(zoo.DISC).mesh, 6, [lambda x, y: 3 * x - y, lambda x, y: x + 1])
    divided = subdivide(modes.space.mesh, 5)
    x, y = divided.positions(modes.space.mesh)
    expected = np.stack([3 * x - y, x + 1], axis=1)
    np.testing.assert_allclose(divided.values(modes.space, modes.vectors), expected, atol=1e-13)


def test_points_along_the_rim_lie_on_it_in_order() -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    divided = subdivide(mesh, 4)
    rim = divided.positions(mesh)[:, divided.along(lie_on(mesh, ["rim"]))]
    np.testing.assert_allclose(np.hypot(*rim), 1.0, atol=1e-7)
    steps = np.hypot(*np.diff(rim, axis=1))
    assert steps.max() < 1.5 * steps.mean()
    assert rim.shape[1:] == (5, mesh.edges["rim"].shape[1])


def test_the_two_lips_of_a_slit_are_not_welded() -> None:
    # two triangles that touch along x = 0 but share only the vertex 0 there
    vertices = np.array([[0.0, 0.0, 0.0, 1.0, -1.0], [0.0, 1.0, 1.0, 0.0, 0.0]])
    triangles = np.array([[0, 0], [1, 2], [3, 4]])
    mesh = replace(
        zoo.straight_square(),
        vertices=vertices,
        triangles=triangles,
        nodes=vertices[:, triangles],
        edges={"left": np.array([[0], [2]]), "right": np.array([[0], [1]])},
    )
    divided = subdivide(mesh, 3)
    left, right = (divided.along(lie_on(mesh, [name])).ravel() for name in ("left", "right"))
    positions = divided.positions(mesh)
    np.testing.assert_allclose(positions[:, left], positions[:, right], atol=1e-15)
    assert np.intersect1d(left, right).tolist() == [0]
