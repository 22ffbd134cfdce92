"""Bézier pieces follow a smooth curve, and end where its pieces do."""

import numpy as np
import pytest

from membrane.beziers import DEGREE, evaluate, follow


def spiral(t, order):
    """exp((0.1 + i) t) and its derivatives."""
    z = (0.1 + 1j) ** order * np.exp((0.1 + 1j) * t)
    return np.array([z.real, z.imag])


def kinked(t, order):
    """(t, |t|^3), whose third derivative jumps at 0."""
    y = [np.abs(t) ** 3, 3 * t * np.abs(t), 6 * np.abs(t)][order]
    return np.array([[t, np.ones_like(t), np.zeros_like(t)][order], y])


def off(curve, piece, start, stop):
    s = np.linspace(0.0, 1.0, 101)
    return np.abs(evaluate(piece, s) - curve(start + (stop - start) * s, 0)).max()


def test_an_analytic_curve_needs_few_pieces():
    knots = np.linspace(0.0, 6.0, 25)
    pieces = follow(spiral, knots, 1e-12)
    assert 2 <= len(pieces) <= 4
    for k, piece in enumerate(pieces):
        start, stop = 6.0 * k / len(pieces), 6.0 * (k + 1) / len(pieces)
        assert off(spiral, piece, start, stop) < 2e-12


def test_pieces_meet_with_two_derivatives():
    one, other = follow(spiral, np.array([0.0, 1.5, 3.0]), 0.0)
    scales = 1.0, DEGREE / 1.5, DEGREE * (DEGREE - 1) / 1.5**2
    for order, scale in enumerate(scales):
        exact = spiral(np.array([1.5]), order)[:, 0]
        np.testing.assert_allclose(scale * np.diff(one, order)[:, -1], exact, atol=1e-12)
        np.testing.assert_allclose(scale * np.diff(other, order)[:, 0], exact, atol=1e-12)


@pytest.mark.parametrize(("tolerance", "count"), [(1e-12, 2), (1.0, 1)])
def test_a_kink_is_cut_only_where_it_matters(tolerance, count):
    pieces = follow(kinked, np.array([-1.0, 0.0, 1.0]), tolerance)
    assert len(pieces) == count
    if count == 2:
        assert max(off(kinked, pieces[0], -1.0, 0.0), off(kinked, pieces[1], 0.0, 1.0)) < 1e-12
