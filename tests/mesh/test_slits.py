"""A slit parts the triangles on its two sides, and nothing else."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.mesh.slits import opened
from membrane.records.raw_mesh import RawMesh
from membrane.sides import sides
from tests import zoo


def strip() -> RawMesh:
    """Four triangles around the middle of a square, with a slit from the left to the middle."""
    vertices = np.array([[0.0, 1.0, 1.0, 0.0, 0.5, 0.0], [0.0, 0.0, 1.0, 1.0, 0.5, 0.5]])
    triangles = np.array([[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 5, 4], [5, 0, 4]]).T
    segments = np.array([[0, 1], [1, 2], [2, 3], [3, 5], [0, 5], [4, 5]]).T
    parameters = np.array([[0.0] * 6, [1.0] * 6])
    face = np.zeros(5, dtype=np.int64)
    return RawMesh(vertices, triangles, face, segments, np.arange(6), parameters)


def test_without_slits_the_mesh_is_the_same():
    raw = strip()
    assert opened(raw, []) is raw


def test_the_tip_is_shared_and_the_mouth_opens():
    raw = opened(strip(), [5])
    places = sorted(map(tuple, raw.vertices.T))
    assert places.count((0.0, 0.5)) == 2
    assert places.count((0.5, 0.5)) == 1
    assert raw.areas.sum() == pytest.approx(1.0)
    assert (raw.segment_curve == 5).sum() == 2
    assert all((raw.segment_curve == curve).sum() == 1 for curve in range(5))


def test_segments_rise_and_keep_their_parameters():
    raw = opened(strip(), [5])
    assert (raw.segments[0] < raw.segments[1]).all()
    for pair, (start, stop) in zip(raw.segments.T, raw.segment_parameters.T, strict=True):
        ends = [tuple(raw.vertices[:, v]) for v in pair]
        if (0.5, 0.5) in ends:
            assert (0.0 if ends[0] == (0.5, 0.5) else 1.0) == start
        assert {start, stop} == {0.0, 1.0}


def test_a_slit_from_end_to_end_makes_two_pieces():
    raw = strip()
    raw = RawMesh(
        raw.vertices,
        raw.triangles,
        raw.face,
        np.hstack([raw.segments, [[2], [4]]]),
        np.arange(7),
        np.hstack([raw.segment_parameters, [[0.0], [1.0]]]),
    )
    assert opened(raw, [5, 6]).vertices.shape[1] == 6 + 3


CROSSED = {
    **zoo.DISC,
    "slits": [{"name": "cut", "points": [[-0.4, 0.0], [0.4, 0.0]], "support": "free"}],
    "line_loads": [
        {"name": "w", "shape": "polyline", "points": [[0, -0.5], [0, 0.5]], "line_density": 1.0}
    ],
}


def test_lips_lie_on_their_own_sides():
    mesh = zoo.prepared(CROSSED).mesh
    facets = sides(mesh)
    for lip, sign in (("cut.left", 1.0), ("cut.right", -1.0)):
        x, y = mesh.vertices[:, mesh.edges[lip]]
        assert np.allclose(y, 0.0)
        assert np.abs(np.diff(x, axis=0)).sum() == pytest.approx(0.8)
        keys = {tuple(pair) for pair in mesh.edges[lip].T}
        beside = [
            mesh.vertices[1, mesh.triangles[:, t]].mean()
            for t, numbers in enumerate(facets.of_triangle.T)
            for n in numbers
            if tuple(facets.vertices[:, n]) in keys
        ]
        assert len(beside) == len(keys)
        assert (np.array(beside) * sign > 0.0).all()


def test_a_line_load_goes_on_across_a_slit():
    mesh = zoo.prepared(CROSSED).mesh
    x, y = mesh.vertices[:, mesh.lines["w"]]
    assert np.allclose(x, 0.0)
    assert np.abs(np.diff(y, axis=0)).sum() == pytest.approx(1.0)
    at_the_cut = np.unique(mesh.lines["w"][np.abs(y) < 1e-12])
    assert len(at_the_cut) == 2
