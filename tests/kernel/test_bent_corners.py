"""Triangles that curved sides would spoil are found, and no others."""

import numpy as np

from membrane.kernel.bent_corners import spoilt
from membrane.records.raw_mesh import RawMesh


def round_mesh(count, triangles, hub=False, reach=1.0):
    """Triangles on ``count`` points of a circle (the last vertex its centre, with a hub)."""
    angles = 2 * np.pi * np.arange(count + 1) / count
    circle = np.array([np.cos(angles[:-1]), np.sin(angles[:-1])])
    centre = np.zeros((2, 1)) if hub else np.empty((2, 0))
    ends = np.array([angles[:-1], angles[1:]])
    raw = RawMesh(
        vertices=np.hstack([circle, centre]),
        triangles=np.array(triangles).T,
        face=np.zeros(len(triangles), dtype=np.int64),
        segments=np.array([np.arange(count), (np.arange(count) + 1) % count]),
        segment_curve=np.zeros(count, dtype=np.int64),
        segment_parameters=ends,
    )
    return raw, np.array([-np.sin(ends), np.cos(ends)])


def test_two_sides_on_one_circle_are_found():
    raw, tangents = round_mesh(6, [(0, 1, 2), (2, 3, 4), (4, 5, 0), (0, 2, 4)])
    assert spoilt(raw, tangents).tolist() == [True, True, True, False]


def test_triangles_around_a_hub_are_sound():
    raw, tangents = round_mesh(6, [(k, (k + 1) % 6, 6) for k in range(6)], hub=True)
    assert not spoilt(raw, tangents).any()


def test_a_side_that_bulges_into_its_triangle_is_found():
    raw, tangents = round_mesh(6, [(1, 0, 6)], hub=True)
    far = np.array([[1.6], [1.0]])  # outside the circle: the arc from 0 to 1 bulges towards it
    vertices = np.hstack([raw.vertices[:, :6], 0.9 * far])
    near = RawMesh(
        vertices,
        raw.triangles,
        raw.face,
        raw.segments,
        raw.segment_curve,
        raw.segment_parameters,
    )
    assert near.areas[0] > 0
    assert not spoilt(near, tangents).any()
    flat = np.hstack([raw.vertices[:, :6], np.array([[0.96], [0.55]])])
    low = RawMesh(
        flat,
        raw.triangles,
        raw.face,
        raw.segments,
        raw.segment_curve,
        raw.segment_parameters,
    )
    assert low.areas[0] > 0
    assert spoilt(low, tangents).all()
