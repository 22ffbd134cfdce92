"""Heads whose tension, density, bed or edge vary, against one-dimensional computations."""

from __future__ import annotations

import csv
import json
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from mpmath import besseljzero
from scipy.optimize import brentq
from scipy.special import jn_zeros, jv, jvp

from membrane import run, study_from
from tests.reference import ritz
from tests.reference.cases import DISC, RECTANGLE, case

pytestmark = pytest.mark.slow

SPECTRA = json.loads(Path(__file__).with_name("spectra.json").read_text())["cases"]
HEIGHT = 0.618
COUNT = 20


def by(formula, **more):
    return {"formula": formula, **more}


def head(density=1.0, tension=1.0, **more):
    return {"areal_density": density, "tension": tension, **more}


def found(keys, count=COUNT):
    spectrum = run(study_from({**keys, "modes": {"count": count}, "products": {"write": []}}))
    assert spectrum.complete
    assert spectrum.mesh_facts["accuracy_met"]
    return spectrum.modes.eigenvalues[:count]


def off(values, exact):
    return np.abs(values / exact[: len(values)] - 1).max()


def one(x):
    return np.ones_like(x)


def of_rectangle(p, q, w, panels=(0.0, 1.0)):
    """Sine by sine in y, a string in x: q is multiplied by the sine's own curvature."""
    values = [
        ritz.string(p, lambda x, k=k: (k * np.pi / HEIGHT) ** 2 * q(x), w, panels)[:COUNT]
        for k in range(1, 12)
    ]
    return np.sort(np.concatenate(values))


def test_the_ritz_strings_and_discs_themselves():
    """k^2 pi^2, and the squares of j_{m,n} (DLMF 10.21)."""
    strings = ritz.string(one, np.zeros_like, one, (0.0, 0.3, 1.0))
    assert off(strings[:10], (np.arange(1, 11) * np.pi) ** 2) < 1e-11
    zeros = [z for m in range(20) for z in list(jn_zeros(m, 9)) * (1 if m == 0 else 2)]
    assert off(ritz.disc(one, one, COUNT), np.sort(zeros) ** 2) < 1e-11


@pytest.mark.parametrize(("formula", "power"), [("r", 1.0), ("sqrt(r)", 0.5), ("1/sqrt(r)", -0.5)])
def test_density_with_a_cusp_or_a_pole(formula, power):
    """rho = r^n: s = r^(n/2 + 1) makes Bessel's equation of order 2m/(n + 2), so that
    lambda = (n/2 + 1)^2 j_{2m/(n+2), k}^2; zeros by mpmath."""
    exact = []
    for m in range(16):
        zeros = [float(besseljzero(2 * m / (power + 2), k)) for k in range(1, 7)]
        exact += [(power / 2 + 1) ** 2 * zero**2 for zero in zeros] * (1 if m == 0 else 2)
    assert off(found(case(DISC, head(by(formula)))), np.sort(exact)) < 1e-9


@pytest.mark.parametrize(
    ("tension", "density"),
    [
        ("1 + 0.5*r**2", "1 + x**2 + y**2"),
        ("1 + 0.5*r", "2 - r"),
        ("exp(-r**2)", "1 + 0.3*cos(3*r)"),
    ],
)
def test_tension_and_density_of_the_radius(tension, density):
    """Against Rayleigh-Ritz in r for each number of nodal diameters."""
    functions = {
        "1 + 0.5*r**2": lambda r: 1 + 0.5 * r**2,
        "1 + x**2 + y**2": lambda r: 1 + r**2,
        "1 + 0.5*r": lambda r: 1 + 0.5 * r,
        "2 - r": lambda r: 2 - r,
        "exp(-r**2)": lambda r: np.exp(-(r**2)),
        "1 + 0.3*cos(3*r)": lambda r: 1 + 0.3 * np.cos(3 * r),
    }
    exact = ritz.disc(functions[tension], functions[density], COUNT)
    assert off(found(case(DISC, head(by(density), by(tension)))), exact) < 1e-9


def test_one_component_of_the_tension_varies():
    """T = diag(1 + x, 2): -((1 + x) X')' + 2 (k pi/b)^2 X = lambda X in x."""
    woven = {"xx": by("1 + x"), "xy": 0.0, "yy": 2.0}
    exact = of_rectangle(lambda x: 1 + x, lambda x: 2 + 0 * x, one)
    assert off(found(case(RECTANGLE, head(tension=woven))), exact) < 1e-9


def test_a_woven_tension_alike_both_ways_is_a_plain_one():
    alike = {"along": by("1 + x"), "across": by("1 + x"), "angle": "30 deg"}
    one, other = (found(case(RECTANGLE, head(tension=t))) for t in (alike, by("1 + x")))
    assert off(one, other) < 1e-11


def jumping(x, left, right):
    return np.where(x < 0.3, left, right)


@pytest.mark.parametrize(
    ("given", "tension", "bedding", "density"),
    [
        ({"density": by("1 + abs(x - 0.3)")}, one, 0.0, lambda x: 1 + np.abs(x - 0.3)),
        ({"density": by("where(x < 0.3, 4, 1)")}, one, 0.0, lambda x: jumping(x, 4.0, 1.0)),
        ({"tension": by("max(1, 0.7 + x)")}, lambda x: np.maximum(1, 0.7 + x), 0.0, one),
        ({"bedding": by("where(0.3 > x, 90, 0)")}, one, lambda x: jumping(x, 90.0, 0.0), one),
    ],
    ids=["kink", "jump", "tension", "bedding"],
)
def test_kinks_and_jumps_along_a_line(given, tension, bedding, density):
    """Strings in x with a node at x = 0.3; the mesh has to follow that line."""
    values = []
    for k in range(1, 12):
        wave = (k * np.pi / HEIGHT) ** 2

        def stiffness(x, wave=wave):
            return wave * tension(x) + (bedding(x) if bedding else 0.0)

        values.append(ritz.string(tension, stiffness, density, (0.0, 0.3, 1.0))[:COUNT])
    exact = np.sort(np.concatenate(values))
    assert off(found(case(RECTANGLE, head(**given))), exact) < 1e-9


def test_a_jump_along_a_circle_is_a_patch():
    exact = [float(v) for v in SPECTRA["composite_patch_0p4_9p765625"]["values"]]
    values = found(case(DISC, head(by("where(r < 0.4, 9.765625, 1)"))))
    assert off(values, np.array(exact)[:COUNT]) < 1e-9


def test_a_formula_that_breaks_along_another_line_says_so():
    """Along the border of a patch the mesh follows it all the same."""
    formula = by("where(x**2/4 + y**2 < 0.01, 2, 1)")
    ellipse = {"name": "e", "shape": "ellipse", "width": 0.4, "height": 0.2}
    marked = case(DISC, head(formula), patches=[{**ellipse, "added_density": 0.0}])
    drawn = case(DISC, patches=[{**ellipse, "areal_density": 2.0}])
    assert off(found(marked), found(drawn)) < 1e-10
    alone = case(DISC, head(formula), modes={"count": 6}, products={"write": []})
    spectrum = run(study_from(alone))
    assert any("x ** 2 / 4 + y ** 2 = 0.01" in note for note in spectrum.notes)
    assert not spectrum.mesh_facts["accuracy_met"]
    exact = np.sqrt(found(drawn)[:6]) / (2 * np.pi)
    assert all(p.low < f < p.high for p, f in zip(spectrum.partials, exact, strict=True))


def test_places_count_from_the_outlines_own_origin():
    moved = {**DISC, "at": [0.3, -0.2]}
    here, there = (found(case(o, head(by("1 + x + r**2")))) for o in (DISC, moved))
    assert off(there, here) < 1e-10


# A uniform bed adds kappa/rho to every eigenvalue: K + kappa M/rho.


@pytest.mark.parametrize(
    ("density", "bedding"),
    [(2.0, 6.0), (2.0, by("6 + 0*x")), (by("1 + x"), by("3 + 3*x"))],
)
def test_a_bed_in_proportion_to_the_density_shifts_every_eigenvalue(density, bedding):
    without, bedded = (
        found(case(RECTANGLE, head(density, **bed))) for bed in ({}, {"bedding": bedding})
    )
    assert np.abs(bedded - without - 3.0).max() < 1e-10 * without[-1]


def elastic(stiffness, **more):
    return case(DISC, edges={"rim": {"support": "elastic", "stiffness": stiffness, **more}})


def test_a_constant_formula_of_an_edge_is_the_constant():
    one, other = found(elastic(3.0, mass=0.2)), found(elastic(by("3 + 0*x"), mass=by("0.2")))
    assert off(one, other) < 1e-10


def robin_roots(fourier, sines, top=9.5, size=24):
    """k of u = sum a_m J_m(k r) cos(m t), or sin(m t), with u_r + beta u = 0 at r = 1.

    fourier : beta = b0 + b1 cos t, which couples neighbouring m
    """
    orders = np.arange(1 if sines else 0, size)
    b0, b1 = fourier
    couple = np.diag(np.full(orders.size, b0)) + 0.5 * b1 * (
        np.eye(orders.size, k=1) + np.eye(orders.size, k=-1)
    )
    if not sines:
        couple[1, 0] *= 2.0  # cos(0) times cos(t) is all of cos(t)

    def sign(k):
        values, slopes = jv(orders, k), k * jvp(orders, k)
        size = np.hypot(values, slopes)
        sign, log = np.linalg.slogdet(np.diag(slopes / size) + couple * (values / size))
        return sign * np.exp(log)

    scan = np.linspace(0.05, top, 4000)
    signs = [sign(k) for k in scan]
    brackets = [(a, b) for (a, s), (b, t) in pairwise(zip(scan, signs, strict=True)) if s * t < 0]
    return [brentq(sign, a, b, xtol=1e-14, rtol=1e-14) for a, b in brackets]


def test_a_rim_whose_stiffness_goes_round():
    """beta = 3 + 2 cos theta against a Fourier-Bessel series of its own."""
    roots = np.sort(robin_roots((3.0, 2.0), False) + robin_roots((3.0, 2.0), True))
    assert off(found(elastic(by("3 + 2*cos(theta)"))), roots**2) < 1e-9


def test_the_fourier_bessel_series_itself():
    """beta = 1 everywhere: k J_m'(k) + J_m(k) = 0 order by order."""
    roots = np.sort(robin_roots((1.0, 0.0), False) + robin_roots((1.0, 0.0), True))
    alone = brentq(lambda k: k * jvp(0, k) + jv(0, k), 0.5, 2.0, xtol=1e-14)
    assert abs(roots[0] - alone) < 1e-12
    assert np.allclose(roots[1:3], jn_zeros(0, 1))  # k J_1' + J_1 = k J_0


# The same linear density by other means.


def linear():
    return of_rectangle(one, one, lambda x: 1 + x)


def test_scattered_points(tmp_path):
    """A plane through the points comes out exactly, so 1 + x does."""
    places = np.random.default_rng(1).uniform(0, 1, (60, 2)) * [1.0, HEIGHT]
    corners = [[0, 0], [1, 0], [1, HEIGHT], [0, HEIGHT]]
    with (tmp_path / "density.csv").open("w", newline="") as file:
        rows = csv.writer(file)
        rows.writerow(["x", "y", "value"])
        rows.writerows([x, y, 1000 * (1 + x)] for x, y in [*corners, *places.tolist()])
    points = {"csv": str(tmp_path / "density.csv"), "unit": "g/m^2"}
    assert off(found(case(RECTANGLE, head(points))), linear()) < 1e-9


def test_a_function_of_a_script(tmp_path):
    (tmp_path / "fields.py").write_text("def density(x, y):\n    return 1 + x\n")
    given = {"function": "density", "script": str(tmp_path / "fields.py")}
    assert off(found(case(RECTANGLE, head(given))), linear()) < 1e-9
