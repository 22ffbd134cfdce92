"""Sides follow the outline exactly, and the mesh converges to it at its order's rate."""

import numpy as np
import pytest

from membrane.mesh import make
from membrane.triangle import EDGES, shapes
from tests import zoo


def side_points(mesh, name):
    """Points along all sides of an edge, from the curved geometry."""
    s = np.linspace(0, 1, 9)
    corners = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
    wanted = {tuple(sorted(map(int, pair))) for pair in mesh.edges[name].T}
    points = []
    for number, triangle in enumerate(mesh.triangles.T):
        for low, high in EDGES:
            if (int(triangle[low]), int(triangle[high])) in wanted:
                along = corners[:, [low]] * (1 - s) + corners[:, [high]] * s
                values, _ = shapes(along, mesh.order)
                points.append(mesh.nodes[:, :, number] @ values)
    return np.hstack(points)


def test_a_polygon_without_fans_stays_of_order_one():
    assert zoo.prepared(zoo.SQUARE).mesh.order == 1


def test_rim_and_patch_border_are_circles():
    mesh = zoo.prepared(zoo.PATCHED, degree=8).mesh
    assert mesh.order == 8
    np.testing.assert_allclose(np.hypot(*side_points(mesh, "rim")), 1.0, atol=1e-8)


def area(mesh):
    from membrane.mesh.checks import _areas

    return _areas(mesh).sum()


@pytest.mark.parametrize("order", [3, 4])
def test_area_converges_at_twice_the_order(monkeypatch, order):
    """The boundary is interpolated at Lobatto points: area error like h^(2 order)."""
    monkeypatch.setattr(make, "LEAST_ORDER", 1)
    sizes = np.array([3.0, 1.5])
    errors = [abs(area(zoo.prepared(zoo.DISC, order, phase).mesh) - np.pi) for phase in sizes]
    counts = [zoo.prepared(zoo.DISC, order, p).mesh.edges["rim"].shape[1] for p in sizes]
    rate = np.log(errors[0] / errors[1]) / np.log(counts[1] / counts[0])
    assert rate > 2 * order - 1


def test_circles_are_followed_closely_by_elements_of_a_low_degree():
    assert abs(area(zoo.prepared(zoo.DISC, 2, 1.5).mesh) - np.pi) < 1e-12


def test_regions_and_edges_are_named():
    mesh = zoo.prepared(zoo.PATCHED).mesh
    assert mesh.region_names == ("head", "paste")
    assert set(mesh.edges) == {"rim"}
    centres = mesh.vertices[:, mesh.triangles].mean(axis=1)
    inside = np.hypot(*centres) < 0.4
    np.testing.assert_array_equal(mesh.region == 1, inside)


def test_triangles_rise():
    triangles = zoo.prepared(zoo.PATCHED).mesh.triangles
    assert (np.diff(triangles, axis=0) > 0).all()
