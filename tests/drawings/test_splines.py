"""B-splines cut at their knots, against scipy's own evaluation."""

import numpy as np
import pytest
from scipy.interpolate import BSpline

from membrane.drawings.splines import beziers

POINTS = [0j, 1 + 2j, 3 + 1j, 4 - 1j, 6 + 0j, 7 + 2j]
CLAMPED = [0, 0, 0, 0, 0.4, 1.5, 2, 2, 2, 2]
LOOSE = [-1, -0.5, 0, 0.7, 1, 1.8, 2, 2.5, 3, 3.5]
DOUBLE = [0, 0, 0, 0, 1, 1, 2, 2, 2, 2]
T = np.linspace(0.0, 1.0, 9)


@pytest.mark.parametrize("knots", [CLAMPED, LOOSE, DOUBLE])
@pytest.mark.parametrize("weights", [[], [1.0, 2.0, 0.5, 1.0, 3.0, 1.0]])
def test_the_pieces_are_the_spline(knots, weights):
    w = np.array(weights or np.ones(6))
    above = BSpline(np.array(knots, float), w * np.array(POINTS), 3)
    below = BSpline(np.array(knots, float), w, 3)
    inner = np.unique(knots[3:-3])
    pieces = beziers(POINTS, weights, knots, 3)
    assert len(pieces) == len(inner) - 1
    for piece, low, high in zip(pieces, inner, inner[1:], strict=False):
        at = low + T * (high - low)
        np.testing.assert_allclose(piece.at(T), above(at) / below(at), atol=1e-13)


@pytest.mark.parametrize(
    ("count", "knots", "weights"),
    [(3, [0] * 7, []), (6, CLAMPED[:-1], []), (6, CLAMPED, [1.0]), (6, CLAMPED[::-1], [])],
)
def test_numbers_that_do_not_fit(count, knots, weights):
    with pytest.raises(ValueError, match="a spline has"):
        beziers(POINTS[:count], weights, knots, 3)
