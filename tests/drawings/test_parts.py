"""What the kernel gets: short arcs, lines for straight Béziers, no Bézier that stands still."""

from itertools import pairwise

import numpy as np
import pytest

from membrane.drawings.parts import parts
from membrane.drawings.pieces import Arc, Bezier, Line

T = np.linspace(0.0, 1.0, 50)


def test_a_circle_comes_in_thirds_that_meet():
    found = parts(Arc.circle(1j, 2.0, 0.0, 2 * np.pi), 1e-6)
    assert len(found) == 3
    for one, other in zip(found, found[1:] + found[:1], strict=True):
        assert abs(one.end - other.start) < 1e-14
        assert one.is_circle


def test_a_straight_bezier_is_a_line():
    assert parts(Bezier((0j, 1 + 1j, 1 + 1j, 3 + 3j)), 1e-6) == (Line(0j, 3 + 3j),)
    there_and_back = Bezier((0j, 4 + 4j, -1 - 1j, 3 + 3j))
    assert parts(there_and_back, 1e-6) == (there_and_back,)


def test_a_loop_is_halved():
    loop = Bezier((0j, 3 + 3j, -3 + 3j, 1e-9 + 0j))
    first, second = parts(loop, 1e-6)
    np.testing.assert_allclose(first.at(T), loop.at(0.5 * T), atol=1e-14)
    assert first.end == second.start


@pytest.mark.parametrize("turned", [False, True])
def test_a_retracted_handle(turned):
    """No piece keeps a parameter that stands still, and the curve hardly moves."""
    curve = Bezier((0j, 0j, 1 + 0j, 2 + 1j))
    found = parts(curve.reversed() if turned else curve, 1e-6)
    points = np.hstack([part.at(T) for part in found])
    far = abs(points[:, None] - curve.at(np.linspace(0, 1, 20001))[None, :]).min(axis=1).max()
    assert far < 1.2e-4  # half the distance between the points that it is compared with
    for one, other in pairwise(found):
        assert abs(one.end - other.start) < 1e-14
    for part in found:
        if isinstance(part, Bezier):
            assert abs(part.points[1] - part.start) > 1e-7
            assert abs(part.points[-2] - part.end) > 1e-7
    straight = [part for part in found if isinstance(part, Line)]
    assert len(straight) == 1
    assert abs(straight[0].end - straight[0].start) < 1e-4


def test_an_ellipse_comes_in_sixths():
    """Shorter than a circle's parts, for the kernel's areas: tests/geometries/test_file.py."""
    assert len(parts(Arc(0j, 2 + 0j, 1j, 0.3, 0.3 - 2 * np.pi), 1e-6)) == 6
