"""Graded corners shrink geometrically, keep the area and stay conforming."""

from collections import Counter

import numpy as np
import pytest

from membrane import run, study_from
from membrane.mesh import grade
from membrane.mesh.corner import Corner, Term
from membrane.mesh.corners import corners
from membrane.mesh.depth import RATIO
from membrane.mesh.grade import WIDEST, WIDEST_STRONG, graded
from membrane.mesh.resolution import region_sizes
from tests import zoo


def meshes(keys, tolerance=1e-6):
    with zoo.drawn(keys) as (kernel, study, outline, membrane):
        raw = kernel.triangulate(outline, region_sizes(outline, membrane, study.modes, 3.0))
        singular = corners(kernel, outline, membrane, raw)
        return raw, singular, graded(kernel, raw, singular, tolerance, 8)


def angles_at(raw, vertex):
    """Angles of the triangles at a vertex, radians."""
    touching = raw.triangles[:, (raw.triangles == vertex).any(axis=0)]
    arms = raw.vertices[:, touching] - raw.vertices[:, vertex, None, None]
    directions = np.angle(arms[0] + 1j * arms[1])
    ends = directions.T[(touching != vertex).T].reshape(-1, 2)
    return np.abs((np.diff(ends, axis=1) + np.pi) % (2 * np.pi) - np.pi)


@pytest.mark.slow
def test_a_fine_polygon_costs_little_and_keeps_its_accuracy(monkeypatch):
    """Against as many layers as rounding allows, on the same mesh."""
    wanted = {"outline": {"shape": "regular_polygon", "sides": 20, "radius": 1.0}}
    study = study_from({**wanted, "head": zoo.HEAD, "modes": {"count": 6}})
    ours = run(study)
    monkeypatch.setattr(grade, "treatment", lambda *asked: (1, 12))
    exact = run(study)
    error = np.abs(ours.modes.eigenvalues / exact.modes.eigenvalues - 1)
    assert error.max() < 1e-9
    assert ours.mesh_facts["triangles"] < 0.6 * exact.mesh_facts["triangles"]


@pytest.mark.parametrize("keys", [zoo.L_SHAPE, zoo.SQUARE])
def test_area_is_kept(keys):
    before, _, (after, _) = meshes(keys)
    assert after.areas.min() > 0
    assert abs(after.areas.sum() / before.areas.sum() - 1) < 1e-13


@pytest.mark.parametrize("layers", [1, 3])
def test_nearest_vertices_are_as_close_as_asked(layers, monkeypatch):
    monkeypatch.setattr(grade, "treatment", lambda *asked: (3, layers))
    monkeypatch.setattr(grade, "WIDEST", np.pi)  # nothing is halved
    before, (corner,), (after, (fan,)) = meshes(zoo.L_SHAPE)

    def nearest(raw):
        touching = raw.triangles[:, (raw.triangles == corner.vertex).any(axis=0)]
        ends = np.setdiff1d(touching, [corner.vertex])
        return np.linalg.norm(raw.vertices[:, ends], axis=0).min()

    assert fan.power == 3
    assert abs(nearest(after) / (nearest(before) * RATIO**layers) - 1) < 1e-9


def test_no_fan_is_so_wide_that_the_triangle_beyond_it_could_fold():
    before, (corner,), (after, (fan,)) = meshes(zoo.L_SHAPE)
    assert fan.power > 1
    assert angles_at(before, corner.vertex).max() > WIDEST
    assert angles_at(after, corner.vertex).max() <= WIDEST
    assert angles_at(after, corner.vertex).sum() == pytest.approx(1.5 * np.pi)


def test_every_side_is_shared_by_two_triangles_or_on_an_edge():
    _, _, (after, _) = meshes(zoo.L_SHAPE)
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
        every = tuple(Corner(v, (Term(0.5),)) for v in range(raw.vertices.shape[1]))
        after, _ = graded(kernel, raw, every, 1e-4, 8)
    assert after.areas.min() > 0
    assert abs(after.areas.sum() - 1.0) < 1e-12


def test_new_vertices_lie_on_the_curve():
    """The stadium's corners lie between an arc and a straight side."""
    stadium = {"shape": "stadium", "straight": 2.0, "width": 2.0}
    _, singular, (after, _) = meshes({"outline": stadium, "head": zoo.HEAD})
    x, y = after.vertices[:, np.unique(after.segments)]
    off = np.where(np.abs(x) > 1, np.hypot(np.abs(x) - 1, y) - 1, np.abs(y) - 1)
    assert len(singular) == 4
    assert np.abs(off).max() < 1e-12


def test_wide_triangles_at_a_strong_corner_are_halved():
    slit = {"name": "cut", "points": [[1.0, -0.1], [1.0, 0.4]]}
    box = {"shape": "rectangle", "width": 2.0, "height": 0.8}
    before, singular, (after, _) = meshes({**zoo.SQUARE, "outline": box, "slits": [slit]})
    (corner,) = (c for c in singular if c.exponent == 0.5)
    assert (
        angles_at(after, corner.vertex).max()
        <= WIDEST_STRONG
        < angles_at(before, corner.vertex).max()
    )
