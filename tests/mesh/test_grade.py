"""Graded corners shrink geometrically, keep the area and stay conforming."""

from collections import Counter

import numpy as np
import pytest

from membrane import run, study_from
from membrane.mesh import grade
from membrane.mesh.corner import Corner
from membrane.mesh.corners import corners
from membrane.mesh.grade import SMALLEST, WIDEST, depth, graded, layers, ratio
from membrane.mesh.resolution import region_sizes
from tests import zoo


def meshes(keys, tolerance=1e-6):
    with zoo.drawn(keys) as (kernel, study, outline, membrane):
        raw = kernel.triangulate(outline, region_sizes(outline, membrane, study.modes, 3.0))
        singular = corners(kernel, outline, membrane, raw)
        return raw, singular, graded(kernel, raw, singular, tolerance)


def test_layers_meet_the_tolerance():
    for exponent in (0.5, 2 / 3, 2.0):
        depth = layers(exponent, 1e-7)
        shrink = ratio(exponent)
        assert shrink ** (2 * exponent * depth) <= 1e-7 < shrink ** (2 * exponent * (depth - 1))


def test_a_whole_exponent_gets_the_layers_of_its_logarithm():
    assert depth(2.0, 0.01, 1e-9) == layers(2.0, 1e-9)


@pytest.mark.parametrize("share", [1e-4, 0.05])
def test_the_straighter_and_smaller_a_corner_the_fewer_its_layers(share):
    cuts = [depth(1.0 + off, share, 1e-9) for off in (0.4, 0.1, 1e-2, 1e-3, 1e-5)]
    assert cuts == sorted(cuts, reverse=True)
    assert cuts[0] > cuts[-1] + 1
    assert depth(2 / 3, share, 1e-9) <= depth(2 / 3, 2 * share, 1e-9) <= layers(2 / 3, 1e-9)


@pytest.mark.slow
def test_a_fine_polygon_costs_little_and_keeps_its_accuracy(monkeypatch):
    """Against as many layers as rounding allows, on the same mesh."""
    wanted = {"outline": {"shape": "regular_polygon", "sides": 20, "radius": 1.0}}
    study = study_from({**wanted, "head": zoo.HEAD, "modes": {"count": 6}})
    ours = run(study)
    monkeypatch.setattr(grade, "depth", lambda exponent, share, tolerance, degree: 10)
    exact = run(study)
    error = np.abs(ours.modes.eigenvalues / exact.modes.eigenvalues - 1)
    assert error.max() < 1e-9
    assert ours.mesh_facts["triangles"] < 0.6 * exact.mesh_facts["triangles"]


@pytest.mark.parametrize("keys", [zoo.L_SHAPE, zoo.SQUARE])
def test_area_is_kept(keys):
    before, _, after = meshes(keys)
    assert after.areas.min() > 0
    assert abs(after.areas.sum() / before.areas.sum() - 1) < 1e-13


def test_nearest_vertices_are_as_close_as_asked():
    before, (corner,), after = meshes(zoo.L_SHAPE)
    touching = before.vertices[:, before.triangles[:, (before.triangles == corner.vertex).any(0)]]
    longest = max(np.hypot(*(touching - np.roll(touching, 1, axis=1))).ravel())
    cuts = depth(corner.exponent, longest**2 / 3.0, 1e-6)
    assert 2 <= cuts <= layers(corner.exponent, 1e-6)
    for raw, factor in ((before, 1.0), (after, ratio(corner.exponent) ** cuts)):
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
        after = graded(kernel, raw, every, 1e-4)
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


def test_wide_triangles_at_a_strong_corner_are_halved():
    slit = {"name": "cut", "points": [[1.0, -0.1], [1.0, 0.4]]}
    box = {"shape": "rectangle", "width": 2.0, "height": 0.8}
    before, singular, after = meshes({**zoo.SQUARE, "outline": box, "slits": [slit]})
    (corner,) = (c for c in singular if c.exponent == 0.5)
    place = before.vertices[:, corner.vertex]

    def widest(raw):
        touching = raw.triangles[:, (raw.triangles == corner.vertex).any(axis=0)]
        arms = raw.vertices[:, touching] - place[:, None, None]
        directions = np.angle(arms[0] + 1j * arms[1])
        away = touching != corner.vertex
        ends = directions.T[away.T].reshape(-1, 2)
        return np.abs((np.diff(ends, axis=1) + np.pi) % (2 * np.pi) - np.pi).max()

    assert widest(after) <= WIDEST < widest(before)


def test_layers_stop_above_the_rounding_of_the_coordinates():
    """A tip with mixed lips asks for more layers than its place leaves room for."""
    slit = {"name": "cut", "points": [[0.3, 0.5], [0.7, 0.5]], "left": {"support": "free"}}
    _, singular, after = meshes({**zoo.SQUARE, "slits": [slit]}, 1e-9)
    for corner in singular:
        place = after.vertices[:, corner.vertex]
        touching = after.triangles[:, (after.triangles == corner.vertex).any(axis=0)]
        ends = np.setdiff1d(touching, [corner.vertex])
        nearest = np.linalg.norm(after.vertices[:, ends] - place[:, None], axis=0).min()
        assert nearest > 0.3 * SMALLEST * np.linalg.norm(place)
