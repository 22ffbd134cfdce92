"""Shapes that cannot be drawn are refused in one sentence."""

import numpy as np
import pytest

from membrane.geometries import (
    arc,
    fourier,
    polygon,
    polyline,
    regular_polygon,
    rounded_rectangle,
    sector,
    spline,
)

SQUARE = ((0.0, 0.0), (1.0, 0.0), (1.0, 1.0), (0.0, 1.0))


@pytest.mark.parametrize(
    ("corners", "sentence"),
    [
        (SQUARE[:2], "at least 3 corners, not 2"),
        ((*SQUARE, SQUARE[0]), "corners 1 and 5 are the same point"),
        ((SQUARE[0], SQUARE[0], *SQUARE[1:]), "corners 1 and 2 are the same point"),
        (((0.0, 0.0), (1.0, 1.0), (2.0, 2.0)), "lie on one line"),
        ((SQUARE[0], SQUARE[2], SQUARE[1], SQUARE[3]), "side1 and side3 meet"),
        (((0.0, 0.0), (2.0, 0.0), (2.0, 1.0), (1.0, 0.0), (0.0, 1.0)), "side1 and side3 meet"),
        (((0.0, 0.0), (2.0, 0.0), (1.0, 0.0), (1.0, 1.0)), "side1 and side2 meet"),
    ],
)
def test_a_bad_polygon(corners, sentence):
    with pytest.raises(ValueError, match=sentence):
        polygon.Options(corners)


def test_good_polygons_of_any_size_and_sense():
    for scale in (1e-4, 1.0, 100.0):
        corners = tuple((scale * x, scale * y) for x, y in SQUARE)
        assert polygon.Options(corners).corners == corners
        assert polygon.Options(corners[::-1]).corners == corners[::-1]


def test_a_polygon_far_from_the_origin_is_not_taken_for_flat():
    polygon.Options(tuple((x + 1e3, y - 1e3) for x, y in SQUARE))


def test_a_flat_polygon_far_from_the_origin_is_found():
    with pytest.raises(ValueError, match="lie on one line"):
        polygon.Options(((1e3, 1e3), (1e3 + 1, 1e3 + 1), (1e3 + 2, 1e3 + 2)))


def test_two_sides_are_no_polygon():
    with pytest.raises(ValueError, match="at least 3 sides, not 2"):
        regular_polygon.Options(sides=2, radius=1.0)


def test_a_full_turn_is_a_slit_disc():
    assert sector.Options(radius=1.0, angle=2 * np.pi).is_slit_disc
    assert not sector.Options(radius=1.0, angle=6.28).is_slit_disc


@pytest.mark.parametrize(
    ("points", "closed", "sentence"),
    [
        (SQUARE[:1], False, "at least 2 points, not 1"),
        (SQUARE[:2], True, "at least 3 points, not 2"),
        ((SQUARE[0], SQUARE[1], SQUARE[1]), False, "point 2 and the next one are the same"),
        ((*SQUARE, SQUARE[0]), True, "point 5 and the next one are the same"),
        (((0.0, 0.0), (1.0, 0.0), (0.5, 0.0)), False, "turns back on itself at point 2"),
    ],
)
def test_a_bad_polyline(points, closed, sentence):
    with pytest.raises(ValueError, match=sentence):
        polyline.Options(points, closed)


@pytest.mark.parametrize(("start", "end"), [(1.0, 1.0), (1.0, 0.5), (0.0, 2 * np.pi)])
def test_a_bad_arc(start, end):
    with pytest.raises(ValueError, match="between 0 and 360 deg after its start"):
        arc.Options(radius=1.0, start=start, end=end)


@pytest.mark.parametrize("angle", [0.0, -1.0, 7.0])
def test_an_angle_out_of_range(angle):
    with pytest.raises(ValueError, match="between 0 deg and 360 deg"):
        sector.Options(radius=1.0, angle=angle)


@pytest.mark.parametrize(("width", "height"), [(0.2, 0.4), (0.4, 0.2)])
def test_a_radius_too_large_for_its_rectangle(width, height):
    with pytest.raises(ValueError, match=r"110 mm, is more than half .* at most 100 mm"):
        rounded_rectangle.Options(width=width, height=height, radius=0.11)


@pytest.mark.parametrize(
    ("points", "sentence"),
    [
        (SQUARE[:2], "at least 3 points, not 2"),
        ((*SQUARE, SQUARE[0]), "points 1 and 5 are the same point"),
        ((SQUARE[0], SQUARE[2], SQUARE[1], SQUARE[3]), "crosses itself after point 1 and .* 3"),
        (((0, 0), (1, 1), (2, 2)), "crosses itself"),
    ],
)
def test_a_bad_spline(points, sentence):
    with pytest.raises(ValueError, match=sentence):
        spline.Options(tuple((float(x), float(y)) for x, y in points))


def test_good_splines_of_any_size_sense_and_start():
    star = [(r * np.cos(t), r * np.sin(t)) for t, r in zip(np.arange(12), [2, 1] * 6, strict=True)]
    star = sorted(star, key=lambda p: np.arctan2(p[1], p[0]))
    for scale in (1e-4, 1.0, 100.0):
        points = tuple((float(scale * x), float(scale * y)) for x, y in star)
        for turned in (points, points[::-1], points[5:] + points[:5]):
            assert spline.Options(turned).points == turned


@pytest.mark.parametrize(
    ("harmonics", "sentence"),
    [
        (((0, 0.1, 0.0),), "must be 1 or more, not 0; the mean belongs in mean_radius"),
        (((2, 0.1, 0.0), (2, 0.0, 0.1)), "harmonic 2 is given twice"),
        (((2, 1.1, 0.0),), "falls to -100 mm near 90 deg"),
        (((40, 0.0, 1.0),), "falls to 0 mm near"),
    ],
)
def test_a_bad_fourier_curve(harmonics, sentence):
    with pytest.raises(ValueError, match=sentence):
        fourier.Options(1.0, harmonics)
