"""Rounded, spline and fourier outlines against exact spectra and an independent method."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from scipy.linalg import qr, svdvals
from scipy.special import jv

from membrane import run, study_from
from tests import zoo

pytestmark = pytest.mark.slow

SPECTRA = json.loads((Path(__file__).parents[1] / "reference" / "spectra.json").read_text())


def published(name):
    return np.array([float(v) for v in SPECTRA["cases"][name]["values"]][:20])


def spectrum(shape, count=20, **options):
    study = {"outline": {"shape": shape, **options}, "head": zoo.HEAD, "modes": {"count": count}}
    return run(study_from(study))


def values(shape, count=20, **options):
    return spectrum(shape, count, **options).modes.eigenvalues[:count]


def test_no_harmonics_make_a_disc():
    found = values("fourier", mean_radius=1.0)
    np.testing.assert_allclose(found, published("disc_fixed"), rtol=1e-9)


def test_arcs_that_meet_make_a_stadium():
    found = values("rounded_rectangle", width=4.0, height=2.0, radius=1.0)
    np.testing.assert_allclose(found, published("stadium_a1_r1_fixed"), rtol=1e-9)


def test_arcs_that_meet_all_round_make_a_disc():
    found = values("rounded_rectangle", width=2.0, height=2.0, radius=1.0)
    np.testing.assert_allclose(found, published("disc_fixed"), rtol=1e-9)


def test_small_corners_tend_to_the_rectangle():
    """Near a corner u = c x y, so by Hadamard's formula what is cut off counts as r^4."""
    exact = published("rect_0p618_fixed")[:6]
    more, less = (
        values("rounded_rectangle", 6, width=1.0, height=0.618, radius=r) / exact - 1
        for r in (0.04, 0.02)
    )
    assert (less > 0.0).all()
    np.testing.assert_allclose(more / less, 16.0, rtol=0.05)


class Collocation:
    """The method of particular solutions for u = 0 on r(theta) = 1 + harmonics.

    sigma(k) is the least norm on the edge of a unit combination of J_m(k r) cos, sin m theta;
    its zeros are the square roots of the eigenvalues. T. Betcke & L. N. Trefethen, Reviving
    the method of particular solutions, SIAM Review 47 (2005) 469.
    """

    def __init__(self, harmonics, orders):
        self.theta = np.linspace(0.0, 2 * np.pi, 8 * orders, endpoint=False)
        self.radius = 1.0 + sum(
            a * np.cos(k * self.theta) + b * np.sin(k * self.theta) for k, a, b in harmonics
        )
        rng = np.random.default_rng(3)
        self.inside = rng.uniform(0, 0.7, 3 * orders), rng.uniform(0, 2 * np.pi, 3 * orders)
        self.orders = orders

    def basis(self, k, r, theta):
        even = [jv(m, k * r) * np.cos(m * theta) for m in range(self.orders)]
        odd = [jv(m, k * r) * np.sin(m * theta) for m in range(1, self.orders)]
        return np.array([*even, *odd]).T

    def sigma(self, k):
        edge = self.basis(k, self.radius, self.theta)
        inner = self.basis(k, *self.inside)
        stacked = np.vstack([edge, inner])
        Q, _ = qr(stacked / np.linalg.norm(stacked, axis=0), mode="economic")
        return svdvals(Q[: len(edge)])[-1]

    def root(self, near, step=1e-6):
        """The zero next to a wave number: sigma squared is a parabola about it."""
        low, here, high = (self.sigma(near * (1 + shift)) ** 2 for shift in (-step, 0.0, step))
        return near * (1 + step * (low - high) / (low - 2 * here + high) / 2)


@pytest.mark.parametrize("harmonics", [((2, 0.15, 0.0),), ((2, 0.1, 0.05), (3, 0.02, -0.01))])
def test_fourier_curves_against_bessel_functions(harmonics):
    ours = values("fourier", 12, mean_radius=1.0, harmonics=[list(h) for h in harmonics])
    method = Collocation(harmonics, 60)
    roots = np.array([method.root(k) for k in np.sqrt(ours)])
    assert max(method.sigma(k) for k in roots) < 1e-9
    assert np.diff(roots).min() > 1e-4
    np.testing.assert_allclose(ours, roots**2, rtol=1e-9)


def test_a_small_harmonic_shifts_the_first_mode_by_rayleighs_second_order():
    """k/k0 = 1 + e^2 (1/4 + k0 J2'(k0)/(2 J2(k0))) for r = 1 + e cos 2 theta.

    Lord Rayleigh, Theory of Sound I, 1894, section 209; for a fixed mean radius it follows
    from u = J0(kr) + b J2(kr) cos 2 theta to second order in e.
    """
    k0 = 2.404825557695773
    slope = k0 * (jv(1, k0) - jv(3, k0)) / 2 / jv(2, k0)
    second = 0.25 + slope / 2
    for e in (0.01, 0.02):
        (found,) = np.sqrt(values("fourier", 1, mean_radius=1.0, harmonics=[[2, e, 0.0]]))
        assert found / k0 - 1 == pytest.approx(e**2 * second, rel=40 * e**2)


def points_on_ellipse(count):
    t = 2 * np.pi * np.arange(count) / count
    return np.array([1.5 * np.cos(t), np.sin(t)]).T.tolist()


def test_a_spline_tends_to_its_ellipse_like_the_fourth_power():
    """de Boor, A Practical Guide to Splines: h^4/384 of the fourth derivative."""
    exact = published("ellipse_a1p5_b1")
    few, many = (values("spline", points=points_on_ellipse(n)) / exact - 1 for n in (32, 64))
    assert np.abs(many).max() < (2 * np.pi / 64) ** 4 / 384 * 2 * 2
    assert np.linalg.norm(few) / np.linalg.norm(many) == pytest.approx(16.0, rel=0.15)


def test_a_spline_does_not_depend_on_where_its_list_starts():
    points = points_on_ellipse(9)
    points[2][0] += 0.2
    found = [values("spline", 8, points=points[k:] + points[:k]) for k in (0, 4)]
    found.append(values("spline", 8, points=points[::-1]))
    np.testing.assert_allclose(found[1:], [found[0]] * 2, rtol=1e-9)
