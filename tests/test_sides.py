"""Sides are numbered once and known by the edges that they lie on."""

from __future__ import annotations

import numpy as np

from membrane.sides import inner_borders, lie_on, lie_on_lines, nodes_on, sides
from tests import zoo


def test_two_triangles_share_one_of_five_sides() -> None:
    found = sides(zoo.straight_square())
    assert found.vertices.shape == (2, 5)
    shared = set(found.of_triangle[:, 0]) & set(found.of_triangle[:, 1])
    assert [tuple(found.vertices[:, side]) for side in shared] == [(1, 2)]


def test_euler_holds_on_a_disc() -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    found = sides(mesh)
    assert mesh.vertices.shape[1] - found.vertices.shape[1] + mesh.size == 1


def test_sides_on_an_edge_are_those_of_the_mesh() -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    on = lie_on(mesh, ["rim"])
    assert on.sum() == mesh.edges["rim"].shape[1]
    assert not lie_on(mesh, []).any()
    np.testing.assert_allclose(np.hypot(*nodes_on(mesh, on)), 1.0, rtol=1e-12)


def test_the_border_of_a_patch_is_marked_once() -> None:
    mesh = zoo.prepared(zoo.PATCHED).mesh
    on = inner_borders(mesh)
    np.testing.assert_allclose(np.hypot(*nodes_on(mesh, on)), 0.4, rtol=1e-12)
    chosen = sides(mesh).of_triangle[on]
    assert chosen.size == np.unique(chosen).size > 0


def test_a_plain_head_has_no_inner_border() -> None:
    assert not inner_borders(zoo.prepared(zoo.DISC).mesh).any()


def test_sides_on_a_line_load_are_marked_in_both_triangles() -> None:
    ring = {"name": "ring", "shape": "disc", "diameter": 1.0, "line_density": 1.0}
    mesh = zoo.prepared({**zoo.DISC, "line_loads": [ring]}).mesh
    on = lie_on_lines(mesh)
    assert on.sum() == 2 * mesh.lines["ring"].shape[1]
    assert np.allclose(np.hypot(*nodes_on(mesh, on)), 0.5)
    assert not lie_on_lines(zoo.prepared(zoo.DISC).mesh).any()
