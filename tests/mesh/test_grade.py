"""Graded corners shrink geometrically, keep the area and stay conforming."""

from collections import Counter

import numpy as np
import pytest

from membrane.mesh.corners import Corner, corners
from membrane.mesh.grade import RATIO, graded, layers
from membrane.mesh.resolution import region_sizes
from tests import zoo


def meshes(keys, tolerance=1e-6):
    with zoo.drawn(keys) as (kernel, study, outline, membrane):
        raw = kernel.triangulate(outline, region_sizes(outline, membrane, study.modes, 3.0))
        singular = corners(kernel, outline, membrane, raw)
        return raw, singular, graded(kernel, raw, singular, tolerance, 1)


def test_layers_meet_the_tolerance():
    for exponent in (0.5, 2 / 3, 2.0):
        depth = layers(exponent, 1e-7, 1)
        assert RATIO ** (2 * exponent * depth) <= 1e-7 < RATIO ** (2 * exponent * (depth - 1))


def test_higher_degrees_need_fewer_layers():
    """64 times less energy is missed at exponent 1/2 by degree 8: worth two layers of 1/8."""
    assert [layers(0.5, 1e-7, p) for p in (1, 8)] == [16, 12]
    assert layers(3.0, 1e-7, 8) == 0


@pytest.mark.parametrize("keys", [zoo.L_SHAPE, zoo.SQUARE])
def test_area_is_kept(keys):
    before, _, after = meshes(keys)
    assert after.areas.min() > 0
    assert abs(after.areas.sum() / before.areas.sum() - 1) < 1e-13


def test_nearest_vertices_are_as_close_as_asked():
    before, (corner,), after = meshes(zoo.L_SHAPE)
    depth = layers(corner.exponent, 1e-6, 1)
    for raw, factor in ((before, 1.0), (after, RATIO**depth)):
        touching = raw.triangles[:, (raw.triangles == corner.vertex).any(axis=0)]
        ends = np.setdiff1d(touching, [corner.vertex])
        nearest = np.linalg.norm(raw.vertices[:, ends], axis=0).min()
        if factor == 1.0:
            start = nearest
        else:
            assert abs(nearest / (start * factor) - 1) < 1e-9


def test_every_side_is_shared_by_two_triangles_or_on_an_edge():
    _, _, after = meshes(zoo.L_SHAPE)
    sides = Counter(
        frozenset((int(t[i]), int(t[j])))
        for t in after.triangles.T
        for i, j in ((0, 1), (1, 2), (2, 0))
    )
    outer = {frozenset(map(int, pair)) for pair in after.segments.T}
    assert {side for side, count in sides.items() if count == 1} == outer
    assert set(sides.values()) == {1, 2}


def test_two_corners_of_one_triangle():
    """Every vertex of a coarse triangle may be singular; each is graded in turn."""
    with zoo.drawn(zoo.SQUARE) as (kernel, _study, outline, _membrane):
        raw = kernel.triangulate(outline, {"head": 2.0})
        every = tuple(Corner(v, 0.5) for v in range(raw.vertices.shape[1]))
        after = graded(kernel, raw, every, 1e-4, 1)
    assert after.areas.min() > 0
    assert abs(after.areas.sum() - 1.0) < 1e-12


def test_new_vertices_lie_on_the_curve():
    """The stadium's corners lie between an arc and a straight side."""
    stadium = {"shape": "stadium", "straight": 2.0, "width": 2.0}
    _, singular, after = meshes({"outline": stadium, "head": zoo.HEAD})
    x, y = after.vertices[:, np.unique(after.segments)]
    off = np.where(np.abs(x) > 1, np.hypot(np.abs(x) - 1, y) - 1, np.abs(y) - 1)
    assert len(singular) == 4
    assert np.abs(off).max() < 1e-12
