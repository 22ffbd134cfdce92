"""Lines, arcs and Béziers: exact under maps, cuts and small moves of their ends."""

import numpy as np
import pytest

from membrane.drawings.pieces import Affine, Arc, Bezier, Line, fitted

T = np.linspace(0.0, 1.0, 21)
SKEWED = Affine.matrix(1.2, 0.3, -0.5, 0.8, 3.0, -1.0)
PIECES = [
    Line(1 + 2j, 3 - 1j),
    Arc.circle(1 + 1j, 2.0, 0.3, 2.0),
    Arc(1j, 2 + 1j, -0.5 + 1j, 1.0, -1.5),
    Bezier((0j, 1 + 2j, 3 + 0j, 4 + 1j)),
    Bezier((0j, 1 + 2j, 3 + 0j), (1.0, 0.7, 2.0)),
]


def test_an_affine_map_is_its_matrix():
    x, y = 0.7, -1.3
    expected = complex(1.2 * x - 0.5 * y + 3.0, 0.3 * x + 0.8 * y - 1.0)
    assert SKEWED(complex(x, y)) == pytest.approx(expected, rel=1e-15)


@pytest.mark.parametrize("piece", PIECES)
def test_an_image_is_the_image_of_every_point(piece):
    np.testing.assert_allclose(piece.mapped(SKEWED).at(T), SKEWED(piece.at(T)), atol=1e-14)


@pytest.mark.parametrize("piece", PIECES)
def test_backwards_is_the_same_curve(piece):
    np.testing.assert_allclose(piece.reversed().at(T), piece.at(1 - T), atol=1e-14)
    assert abs(piece.start - piece.at(np.array(0.0))) < 1e-14
    assert abs(piece.reversed().start - piece.end) < 1e-14


@pytest.mark.parametrize("piece", PIECES[1:])
def test_a_part_is_the_same_curve(piece):
    part = piece.between(0.2, 0.7)
    np.testing.assert_allclose(part.at(T), piece.at(0.2 + 0.5 * T), atol=1e-14)


@pytest.mark.parametrize("piece", PIECES)
def test_fitted_ends_where_it_should(piece):
    start, end = piece.start + 1e-3, piece.end - 1e-3j
    moved = fitted(piece, start, end)
    assert abs(moved.start - start) + abs(moved.end - end) < 1e-14
    assert abs(moved.at(T) - piece.at(T)).max() < 5e-3
    assert fitted(piece, piece.start, piece.end) is piece


def test_a_circle_fitted_is_a_circle_and_a_skewed_one_is_not():
    circle = PIECES[1]
    assert circle.is_circle
    assert fitted(circle, circle.start + 0.01, circle.end).is_circle
    assert not circle.mapped(SKEWED).is_circle


@pytest.mark.parametrize("arc", [PIECES[1], PIECES[2], PIECES[1].mapped(SKEWED)])
def test_the_conic_is_the_arc(arc):
    """At the ends and the middle, and elsewhere on the unit circle of the arc's own frame."""
    np.testing.assert_allclose(arc.conic.at(T[[0, 10, 20]]), arc.at(T[[0, 10, 20]]), atol=1e-14)
    z = arc.conic.at(T) - arc.centre
    frame = np.array([[arc.a.real, arc.b.real], [arc.a.imag, arc.b.imag]])
    np.testing.assert_allclose(np.hypot(*np.linalg.solve(frame, [z.real, z.imag])), 1.0, rtol=1e-14)


@pytest.mark.parametrize("bulge", [1.0, -1.0, 0.4, -2.5])
def test_a_bulge_is_the_height_of_the_arc_over_half_its_chord(bulge):
    """The DXF reference: bulge = tan(angle / 4), so the sagitta is bulge x half chord."""
    arc = Arc.bulged(0j, 2 + 0j, bulge)
    assert abs(arc.start) + abs(arc.end - 2) < 1e-14
    assert complex(arc.at(np.array(0.5))) == pytest.approx(1 - 1j * bulge, abs=1e-14)
    assert arc.is_circle


def test_a_rational_quadratic_draws_a_quarter_circle():
    """Weights 1, 1/sqrt 2, 1 (Piegl & Tiller, The NURBS Book, from memory)."""
    quarter = Bezier((1 + 0j, 1 + 1j, 1j), (1.0, 0.5**0.5, 1.0))
    np.testing.assert_allclose(abs(quarter.at(T)), 1.0, rtol=1e-15)
    np.testing.assert_allclose(abs(quarter.between(0.1, 0.6).at(T)), 1.0, rtol=1e-15)
