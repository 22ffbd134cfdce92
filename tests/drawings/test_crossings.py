"""A contour that crosses itself is refused with the place; one that nearly does is not."""

import numpy as np
import pytest

from membrane.drawings.contours import Contour
from membrane.drawings.crossings import check_simple
from membrane.drawings.pieces import Arc, Bezier, Line
from membrane.drawings.sketch import WHOLE, Stroke
from membrane.errors import DrawingError


def contour(*pieces):
    return Contour(tuple(Stroke("", piece) for piece in pieces), WHOLE)


def polygon(*corners):
    pairs = zip(corners, corners[1:] + corners[:1], strict=True)
    return contour(*(Line(complex(a), complex(b)) for a, b in pairs))


def test_a_bow_tie():
    with pytest.raises(DrawingError, match="crosses itself at x = 500 mm, y = 500 mm"):
        check_simple(polygon(0, 1 + 1j, 1, 1j))


def test_a_corner_that_lies_on_another_side():
    with pytest.raises(DrawingError, match="crosses itself at x = 1000 mm, y = 0 mm"):
        check_simple(polygon(0, 2, 2 + 1j, 1, 1j))


def test_a_bezier_with_a_loop_in_it():
    looped = Bezier((0j, 3 + 2j, -2 + 2j, 1 + 0j))
    with pytest.raises(DrawingError, match="crosses itself at x = 500 mm, y = 375 mm"):
        check_simple(contour(looped, Line(1 + 0j, 1 - 1j), Line(1 - 1j, -1j), Line(-1j, 0j)))


def lens(gap):
    """Two arcs of radius 1, one above the other, as far apart as ``gap`` all along."""
    upper = Arc.circle(1j * gap, 1.0, 0.3, np.pi - 0.3)
    lower = Arc.circle(0j, 1.0, np.pi - 0.3, 0.3)
    return contour(upper, Line(upper.end, lower.start), lower, Line(lower.end, upper.start))


def test_arcs_close_together_do_not_cross():
    check_simple(lens(1e-5))
    wide, narrow = Arc.circle(0j, 1.0, 0.3, np.pi - 0.3), Arc.circle(0.5j, 0.6, np.pi, 0.0)
    left, right = Line(wide.end, narrow.start), Line(narrow.end, wide.start)
    with pytest.raises(DrawingError, match="crosses itself"):
        check_simple(contour(wide, left, narrow, right))


def test_sound_contours():
    check_simple(polygon(0, 1, 1 + 1j, 1j))
    check_simple(polygon(*(np.exp(2j * np.pi * k / 300) for k in range(300))))
    check_simple(
        contour(*(Arc.circle(0j, 1.0, a, a + 2.0943951) for a in (0.0, 2.0943951, 4.1887902)))
    )
