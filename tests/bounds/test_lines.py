"""Mass and springs on edges and lines: brackets against roots of Bessel functions."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.linalg import eigh, null_space
from scipy.special import jv, jvp, yv, yvp

from membrane import run, study_from
from membrane.bounds.crouzeix_raviart import LIU
from membrane.triangle import EDGES, collapsed_rule, nodes
from membrane.triangle.polynomials import orthonormal
from tests import zoo
from tests.bounds.heads import numbers, solved
from tests.bounds.test_crouzeix_raviart import counted
from tests.reference.solve import roots

ORDERS = range(12)


def spectrum_of(condition):
    """Squares of the roots of condition(m, k), twice for m > 0."""
    values = []
    for m in ORDERS:
        found = roots(lambda k, m=m: condition(m, k), 0.05, 14.0)
        values += [k**2 for k in found] * (1 if m == 0 else 2)
    return np.sort(values)


def rim(mass, stiffness):
    """u_r = (mu k^2 - beta) u at r = 1."""
    return lambda m, k: k * jvp(m, k) - (mass * k**2 - stiffness) * jv(m, k)


def ring(mass, stiffness):
    """On r = 1/2 the slope u_r jumps by (beta - mu k^2) u; u = 0 at r = 1.

    Outside, u = J_m(k r) Y_m(k) - J_m(k) Y_m(k r), over its value there.
    """

    def condition(m, k):
        x = k / 2
        outer = jv(m, x) * yv(m, k) - jv(m, k) * yv(m, x)
        slope = jvp(m, x) * yv(m, k) - jv(m, k) * yvp(m, x)
        jump = k * (slope * jv(m, x) - jvp(m, x) * outer)
        return jump - (stiffness - mass * k**2) * outer * jv(m, x)

    return condition


@pytest.mark.slow
@pytest.mark.parametrize(("mass", "stiffness"), [(0.3, 0.0), (0.05, 4.0), (0.0, 30.0)])
@pytest.mark.parametrize("where", ["edge", "line"])
def test_brackets_on_a_disc(where, mass, stiffness):
    if where == "edge":
        support = {"support": "elastic" if stiffness else "free"}
        loads = {"mass": mass, **({"stiffness": stiffness} if stiffness else {})}
        keys, exact = {"edges": {"rim": {**support, **loads}}}, spectrum_of(rim(mass, stiffness))
        exact = exact if stiffness else np.concatenate([[0.0], exact])
    else:
        load = {"name": "ring", "shape": "disc", "diameter": 1.0}
        keys = {"line_loads": [{**load, "line_density": mass, "line_stiffness": stiffness}]}
        exact = spectrum_of(ring(mass, stiffness))
    spectrum = run(study_from({**zoo.DISC, **keys, "modes": {"count": 15}}))
    assert spectrum.mesh_facts["accuracy_met"]
    for partial, value in zip(spectrum.partials, exact, strict=False):
        assert partial.bracket == "guaranteed"
        assert partial.low <= np.sqrt(value) / (2 * np.pi) * (1 + 1e-11)
        assert np.sqrt(value) / (2 * np.pi) <= partial.high * (1 + 1e-11)


@pytest.mark.slow
@settings(max_examples=8, deadline=None)
@given(numbers(0.01, 1.0), st.integers(2, 8), numbers(1.0, 3.0), st.sampled_from(["edge", "line"]))
def test_the_count_never_falls_short(mass, number, step, where):
    """Finite elements' values are upper bounds: those below the limit are all there."""
    line = {"name": "ring", "shape": "disc", "diameter": 1.0, "line_density": mass}
    keys = {
        "edge": {"edges": {"rim": {"support": "free", "mass": mass}}},
        "line": {"line_loads": [line]},
    }
    keys = {**zoo.DISC, **keys[where]}
    _, modes = solved(keys, 12)
    limit = float(modes.eigenvalues[number]) * 1.0001
    found = counted(keys, limit, step)
    assert found is None or found >= np.count_nonzero(modes.eigenvalues <= limit)


@settings(max_examples=40, deadline=None)
@given(st.tuples(numbers(0.0, 1.0), numbers(0.05, 1.0)), st.integers(0, 2))
def test_the_constant_on_a_side(apex, side):
    """The largest integral of w^2 on a side, of polynomials with no mean over any side."""
    corners = np.array([[0.0, 0.0], [1.0, 0.0], apex])
    points, weights = collapsed_rule(20)
    _, slopes = orthonormal(points, 9)
    matrix = np.stack([corners[1] - corners[0], corners[2] - corners[0]], axis=1)
    gradients = np.einsum("kd,kin->din", np.linalg.inv(matrix), slopes)
    x, line = np.polynomial.legendre.leggauss(12)
    along = []
    for low, high in EDGES:
        ends = nodes(1)[:, [low, high]]
        along.append(orthonormal(ends[:, [0]] + (ends[:, [1]] - ends[:, [0]]) * (1 + x) / 2, 9)[0])
    kept = null_space(np.array([each @ line for each in along]))
    lengths = [np.linalg.norm(corners[i] - corners[j]) for i, j in EDGES]
    area = abs(np.linalg.det(matrix)) / 2
    traced = lengths[side] / 2 * (along[side] * line) @ along[side].T
    energy = 2 * area * sum((g * weights) @ g.T for g in gradients)
    worst = eigh(kept.T @ traced @ kept, kept.T @ energy @ kept, eigvals_only=True)[-1]
    assert worst <= lengths[side] / area * (LIU**2 + LIU) * max(lengths) ** 2
