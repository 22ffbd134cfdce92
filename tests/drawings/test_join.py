"""Curves joined into loops; gaps below the tolerance are closed, wider ones named."""

import numpy as np
import pytest

from membrane.drawings.join import joined
from membrane.drawings.pieces import Arc, Bezier, Line
from membrane.drawings.sketch import Stroke
from membrane.errors import DrawingError

PI = np.pi


def strokes(*pieces, name=""):
    return [Stroke(name, piece, (name,)) for piece in pieces]


def sides(*corners):
    return [Line(a, b) for a, b in zip(corners, corners[1:] + corners[:1], strict=True)]


SQUARE = sides(0j, 1 + 0j, 1 + 1j, 1j)


def test_sides_in_any_order_and_sense():
    a, b, c, d = SQUARE
    (loop,) = joined(strokes(c.reversed(), a, d.reversed(), b), 1e-5)
    found = [stroke.piece for stroke in loop.strokes]
    assert len(found) == 4
    for one, other in zip(found, found[1:] + found[:1], strict=True):
        assert one.end == other.start
    assert loop.gaps == ()


def test_a_small_gap_is_closed_and_told():
    a, b, c, _ = SQUARE
    (loop,) = joined(strokes(a, b, c, Line(1j, 4e-6 + 0j)), 1e-5)
    assert [gap.width for gap in loop.gaps] == pytest.approx([4e-6])
    assert abs(loop.gaps[0].place) < 1e-5
    corners = [stroke.piece.start for stroke in loop.strokes]
    assert min(abs(corner - 2e-6) for corner in corners) < 1e-12


def test_a_wide_gap_is_an_error_that_gives_the_place():
    a, b, c, _ = SQUARE
    with pytest.raises(DrawingError) as caught:
        joined(strokes(a, b, c, Line(1j, 0.0003 + 0j)), 1e-5)
    said = str(caught.value)
    assert "x = 0 mm, y = 0 mm" in said
    assert "x = 0.3 mm, y = 0 mm" in said
    assert "0.3 mm is left" in said
    assert "tolerance of 0.01 mm" in said


def test_an_arc_that_closes_a_gap_stays_a_circle():
    halves = Arc.circle(0j, 1.0, 0.0, PI + 3e-6), Arc.circle(0j, 1.0, PI, 2 * PI)
    (loop,) = joined(strokes(*halves), 1e-5)
    assert all(stroke.piece.is_circle for stroke in loop.strokes)
    for one, other in zip(loop.strokes, loop.strokes[1:] + loop.strokes[:1], strict=True):
        assert abs(one.piece.end - other.piece.start) < 1e-15


def test_an_arc_all_but_whole_is_closed():
    (loop,) = joined(strokes(Arc.circle(0j, 1.0, 0.0, 2 * PI - 5e-6)), 1e-5)
    assert len(loop.strokes) == 3
    assert len(loop.gaps) == 1


def test_what_is_drawn_twice_counts_once():
    a, b, c, d = SQUARE
    assert len(joined(strokes(a, b, c, d, b.reversed(), c), 1e-5)) == 1


def test_a_dot_is_left_out():
    (loop,) = joined(strokes(*SQUARE, Line(1j, 1j + 1e-6)), 1e-5)
    assert len(loop.strokes) == 4


def test_three_curves_at_one_place():
    with pytest.raises(DrawingError, match="3 curves meet at x = 1000 mm, y = 0 mm"):
        joined(strokes(*SQUARE, Line(1 + 0j, 2 + 0j)), 1e-5)


def test_contours_of_two_layers_may_touch():
    inner = strokes(*sides(0j, 0.5 + 0j, 0.5j), name="patch")
    loops = joined([*strokes(*SQUARE, name="head"), *inner], 1e-5)
    assert sorted(len(loop.strokes) for loop in loops) == [3, 4]


def test_straight_runs_are_merged_but_not_across_names():
    _, b, c, d = SQUARE
    half, rest = Line(0j, 0.5 + 0j), Line(0.5 + 0j, 1 + 0j)
    (loop,) = joined(strokes(half, rest, b, c, d), 1e-5)
    assert len(loop.strokes) == 4
    mixed = [*strokes(half, b, c, d), *strokes(rest, name="free")]
    (loop,) = joined(mixed, 1e-5)
    assert len(loop.strokes) == 5


def test_a_fine_polygon_is_not_merged_into_a_coarse_one():
    corners = [np.exp(2j * PI * k / 500) for k in range(500)]
    (loop,) = joined(strokes(*sides(*map(complex, corners))), 1e-9)
    assert len(loop.strokes) == 500


def test_a_closed_bezier_is_a_loop_of_its_own():
    (loop,) = joined(strokes(Bezier((0j, 3 + 3j, -3 + 3j, 0j))), 1e-5)
    assert len(loop.strokes) == 2
