"""Heads of numbers drawn at random against Bessel functions and sines."""

from __future__ import annotations

import numpy as np
import pytest
from mpmath import besseljzero
from scipy.special import jv, jvp, yv, yvp

from tests.reference.solve import DISC, FREE, HEAD, eigenvalues, error, roots

pytestmark = pytest.mark.slow

DRAWN = np.random.default_rng(20)


def drawn(low, high, logarithmic=False):
    """A number between two, to four digits."""
    ends = np.log([low, high]) if logarithmic else (low, high)
    number = DRAWN.uniform(*ends)
    return float(f"{np.exp(number) if logarithmic else number:.4g}")


RATIOS = [drawn(0.03, 0.6) for _ in range(2)]
STIFF = [drawn(1e-3, 1e6, True) for _ in range(3)]
ZONES = [(drawn(0.05, 0.7), drawn(2.0, 40.0)) for _ in range(2)]
ANGLES = [drawn(30.0, 358.0) for _ in range(3)]
POWERS = [drawn(-0.4, 3.0) for _ in range(2)]
SIDES = [(1.0, drawn(0.05, 1.0), drawn(0.3, 3.0)) for _ in range(2)]


def by_order(rim, top, orders=40):
    """k^2 of rim(m, k) = 0, those of m > 0 twice."""
    found = []
    for m in range(orders):
        found += [k**2 for k in roots(lambda k, m=m: rim(m, k), 1e-3, top)] * (1 if m == 0 else 2)
    return sorted(found)[:20]


@pytest.mark.parametrize("ratio", RATIOS)
def test_annuli_with_a_free_hole(ratio):
    def rim(m, k):
        inner, outer = jvp(m, k * ratio), yvp(m, k * ratio)
        return (inner * yv(m, k) - outer * jv(m, k)) / abs(outer)

    hole = {"name": "hole", "shape": "disc", "diameter": 2 * ratio, **FREE}
    assert error(eigenvalues(DISC, holes=[hole]), by_order(rim, 14.0)) < 1e-9


@pytest.mark.parametrize("stiffness", STIFF)
def test_elastic_rims(stiffness):
    edge = {"support": "elastic", "stiffness": stiffness}
    exact = by_order(lambda m, k: k * jvp(m, k) + stiffness * jv(m, k), 13.0)
    assert error(eigenvalues(DISC, edges={"rim": edge}), exact) < 1e-9


@pytest.mark.parametrize(("radius", "density"), ZONES)
def test_heavy_centres(radius, density):
    def rim(m, k):
        n, x = np.sqrt(density) * k, k * radius
        value, slope = jv(m, n * radius), n * jvp(m, n * radius)
        outer = jv(m, x) * yv(m, k) - yv(m, x) * jv(m, k)
        steep = k * (jvp(m, x) * yv(m, k) - yvp(m, x) * jv(m, k))
        return (value * steep - slope * outer) * radius**m

    patch = {"name": "p", "shape": "disc", "diameter": 2 * radius, "areal_density": density}
    assert error(eigenvalues(DISC, patches=[patch]), by_order(rim, 13.0)) < 1e-9


@pytest.mark.parametrize("angle", ANGLES)
def test_sectors(angle):
    orders = [180.0 * m / angle for m in range(1, 40)]
    exact = [float(besseljzero(nu, k)) ** 2 for nu in orders if nu < 36 for k in range(1, 10)]
    sector = {"shape": "sector", "radius": 1.0, "angle": f"{angle} deg"}
    assert error(eigenvalues(sector), exact) < 1e-9


@pytest.mark.parametrize("power", POWERS)
def test_powers_of_the_radius(power):
    """rho = r^n: lambda = (n/2 + 1)^2 j_{2m/(n+2), k}^2."""
    half = power / 2 + 1
    exact = []
    for m in range(30):
        zeros = [float(besseljzero(m / half, k)) for k in range(1, 7)]
        exact += [(half * zero) ** 2 for zero in zeros] * (1 if m == 0 else 2)
    head = {**HEAD, "areal_density": {"formula": f"r**({power})"}}
    assert error(eigenvalues(DISC, head=head), exact) < 1e-8


@pytest.mark.parametrize(("width", "height", "across"), SIDES)
def test_woven_rectangles(width, height, across):
    k, n = np.meshgrid(range(1, 60), range(1, 60))
    exact = (k * np.pi / width) ** 2 + across * (n * np.pi / height) ** 2
    head = {"areal_density": 1.0, "tension": {"along": 1.0, "across": across, "angle": 0.0}}
    box = {"shape": "rectangle", "width": width, "height": height}
    assert error(eigenvalues(box, head=head), exact.ravel().tolist()) < 1e-9
