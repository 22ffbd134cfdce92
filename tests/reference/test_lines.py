"""Masses and springs along lines against Bessel functions and strings."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.special import jv, jvp, yv

from membrane import run, study_from
from tests.reference.solve import DISC, FREE, eigenvalues, error, roots

pytestmark = pytest.mark.slow


def ring_spectrum(radius, mass, stiffness):
    """Unit disc, fixed, with a loaded ring.

    Within the ring J_m(k r); the ring adds (stiffness - mass k^2) u to the slope, so that
    the rim sees J_m(k) + that x (pi r0/2) J_m(k r0) [J_m(k r0) Y_m(k) - Y_m(k r0) J_m(k)],
    by the Wronskian 2/(pi z) (DLMF 10.5.2); derived here.
    """
    found = []
    for m in range(40):

        def rim(k, m=m):
            inner, load = jv(m, k * radius), stiffness - mass * k**2
            cross = inner * yv(m, k) - yv(m, k * radius) * jv(m, k)
            return jv(m, k) + load * inner * 0.5 * np.pi * radius * cross

        found += [k**2 for k in roots(rim, 0.05, 13.0)] * (1 if m == 0 else 2)
    return sorted(found)[:20]


@pytest.mark.parametrize(
    ("radius", "mass", "stiffness"),
    [(0.73, 0.05, 0.0), (0.31, 2.0, 0.0), (0.5, 0.0, 10.0), (0.8, 0.0, 1e3), (0.6, 0.4, 7.0)],
)
def test_a_loaded_ring(radius, mass, stiffness):
    ring = {"name": "ring", "shape": "disc", "diameter": 2 * radius}
    ring |= {"line_density": mass, "line_stiffness": stiffness}
    found = eigenvalues(DISC, line_loads=[ring])
    assert error(found, ring_spectrum(radius, mass, stiffness)) < 1e-9


BOX = {"shape": "rectangle", "width": 1.0, "height": 0.7}
LOW_Y = [(n * np.pi / 0.7) ** 2 for n in range(1, 30)]


def wire(name, start, end, **loads):
    return {"name": name, "shape": "polyline", "points": [start, end], **loads}


def test_a_heavy_wire_from_edge_to_edge():
    """X'' = -k^2 X with a jump of slope -mass lambda X at 0.3, lambda = k^2 + (n pi/b)^2:
    sin k = mass lambda/k sin(0.3 k) sin(0.7 k), also for imaginary k; elementary."""
    mass, exact = 0.4, []
    for low in LOW_Y:

        def end(value, low=low):
            k = np.sqrt(value - low + 0j)
            load = mass * value * np.sin(0.3 * k) * np.sin(0.7 * k) / k
            return np.real((np.sin(k) - load) / k)

        exact += roots(end, 1.0, 500.0)
    found = eigenvalues(BOX, line_loads=[wire("w", [0.3, 0.0], [0.3, 0.7], line_density=mass)])
    assert error(found, exact) < 1e-9


def test_two_crossing_springs():
    """Springs along x = 0.3 and y = 0.2 leave x and y apart: two loaded strings."""

    def string(length, place, stiffness):
        def end(k):
            there = np.sin(k * place) * np.sin(k * (length - place))
            return np.sin(k * length) + stiffness * there / k

        return [k**2 for k in roots(end, 0.01, 40.0)]

    exact = [x + y for x in string(1.0, 0.3, 12.0) for y in string(0.7, 0.2, 5.0)]
    loads = [
        wire("upright", [0.3, 0.0], [0.3, 0.7], line_stiffness=12.0),
        wire("level", [0.0, 0.2], [1.0, 0.2], line_stiffness=5.0),
    ]
    assert error(eigenvalues(BOX, line_loads=loads), exact) < 1e-9


def test_a_line_along_a_free_rim_is_rim_mass():
    ring = {"name": "ring", **DISC, "line_density": 0.3}
    rim = {"rim": {**FREE, "mass": 0.3}}
    on_rim = eigenvalues(DISC, line_loads=[ring], edges={"rim": FREE})
    assert error(on_rim, eigenvalues(DISC, edges=rim)) < 1e-9


@pytest.mark.parametrize(
    "lines",
    [
        [wire("ends_within", [-0.5, 0.0], [0.4, 0.3], line_density=0.3)],
        [{**wire("bent", [-0.5, 0.1], [0.4, 0.3], line_stiffness=9.0), "closed": False}],
        [
            wire("one", [-0.5, 0.0], [0.4, 0.3], line_density=0.3),
            wire("other", [-0.2, -0.5], [0.1, 0.6], line_stiffness=9.0),
        ],
    ],
    ids=["mass", "springs", "crossing"],
)
def test_open_lines_converge(lines):
    """No closed form: the shortest study against one that asks for a thousandth of the error."""
    finer = eigenvalues(DISC, line_loads=lines, modes={"accuracy": 1e-5})
    assert error(eigenvalues(DISC, line_loads=lines), finer) < 2e-9


def going_round(radius, mass, stiffness, top=8.5, size=22):
    """Unit disc, fixed, with a ring whose mass and stiffness are even functions of theta.

    The ring's jump of slope couples the orders m of the series a_m J_m(k r) cos(m theta), or
    sin, in the equation of the rim above: diag(J_m(k)) a + cross (load) J(k r0) a = 0. Rows
    and columns are scaled so that no order outweighs another. Derived here.
    """
    angles = np.linspace(0.0, 2 * np.pi, 4 * size, endpoint=False)
    found = []
    for wave, first, parity in [(np.cos, 0, 0), (np.cos, 0, 1), (np.sin, 1, 0), (np.sin, 1, 1)]:
        orders = np.array([m for m in range(first, size) if m % 2 == parity])
        shapes = wave(np.outer(orders, angles))
        norms = (shapes**2).sum(axis=1)
        masses, springs = (
            (shapes * f(angles)) @ shapes.T / norms[:, None] for f in (mass, stiffness)
        )

        def determinant(k, orders=orders, masses=masses, springs=springs):
            there, rim, slope = jv(orders, k * radius), jv(orders, k), jvp(orders, k)
            cross = there * yv(orders, k) - yv(orders, k * radius) * rim
            rows = radius ** orders.astype(float)
            columns = 1.0 / (rows * np.hypot(rim, slope))
            load = (0.5 * np.pi * radius * cross)[:, None] * (springs - k**2 * masses) * there
            return np.linalg.det(rows[:, None] * (np.diag(rim) + load) * columns)

        found += [k**2 for k in roots(np.vectorize(determinant), 0.5, top, 1500)]
    return np.sort(found)[:20]


RING = {"name": "ring", "shape": "disc", "diameter": 1.2}


def test_the_series_of_a_ring_itself():
    """A ring that is alike all round: order by order, as above."""
    alike = going_round(0.6, lambda t: 0.4 + 0 * t, lambda t: 7.0 + 0 * t)
    assert error(alike, ring_spectrum(0.6, 0.4, 7.0)) < 1e-10


def test_a_ring_whose_mass_and_stiffness_go_round():
    loads = {
        "line_density": {"formula": "0.3*(1 + 0.8*cos(2*theta))"},
        "line_stiffness": {"formula": "5 + 4*cos(2*theta)"},
    }
    exact = going_round(
        0.6, lambda t: 0.3 * (1 + 0.8 * np.cos(2 * t)), lambda t: 5 + 4 * np.cos(2 * t)
    )
    assert error(eigenvalues(DISC, line_loads=[{**RING, **loads}]), exact) < 1e-9


def test_a_constant_formula_of_a_line_is_the_constant():
    by_formula = {"line_density": {"formula": "300 + 0*x", "unit": "g/m"}}
    one = eigenvalues(DISC, line_loads=[{**RING, **by_formula}])
    assert error(one, ring_spectrum(0.6, 0.3, 0.0)) < 1e-9


def test_springs_in_proportion_to_all_mass_shift_every_eigenvalue():
    """K + c M has the eigenvalues of K, each raised by c; here along a straight wire."""
    line = wire("w", [0.2, 0.1], [0.8, 0.6], line_density={"formula": "0.2 + x*y"})
    plain = eigenvalues(BOX, line_loads=[line])
    sprung = {**line, "line_stiffness": {"formula": "3*(0.2 + x*y)"}}
    bedded = {"areal_density": 1.0, "tension": 1.0, "bedding": 3.0}
    shifted = run(study_from({"outline": BOX, "head": bedded, "line_loads": [sprung]}))
    assert error(shifted.modes.eigenvalues[:20] - 3.0, plain) < 1e-9
