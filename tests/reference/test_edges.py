"""Rim mass and elastic edges, alone and mixed, against Bessel functions and strings."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.special import jv, jvp

from tests.reference.solve import DISC, FREE, eigenvalues, error, roots

pytestmark = pytest.mark.slow


def rim_spectrum(mass, stiffness):
    """J_m(k r) with k J_m'(k) + (stiffness - mass k^2) J_m(k) = 0 at the rim r = 1."""
    found = [] if stiffness else [0.0]
    for m in range(60):

        def rim(k, m=m):
            return k * jvp(m, k) + (stiffness - mass * k**2) * jv(m, k)

        found += [k**2 for k in roots(rim, 0.005, 13.0)] * (1 if m == 0 else 2)
    return sorted(found)[:20]


@pytest.mark.parametrize(("mass", "stiffness"), [(0.3, 0.0), (3.0, 0.0), (0.1, 5.0)])
def test_a_disc_with_rim_mass(mass, stiffness):
    rim = {**FREE, "mass": mass}
    if stiffness:
        rim = {"support": "elastic", "stiffness": stiffness, "mass": mass}
    found = eigenvalues(DISC, edges={"rim": rim})
    assert error(found, rim_spectrum(mass, stiffness)) < 1e-9


def test_all_kinds_of_edges_on_one_outline():
    """Elastic with mass at x = 0, free with mass at x = 1, fixed below and free above:
    X' = (5 - 0.2 lambda) X at 0, X' = 0.3 lambda X at 1, lambda = k^2 + ((n + 1/2) pi/b)^2."""
    exact = []
    for low in [((n + 0.5) * np.pi / 0.7) ** 2 for n in range(9)]:

        def end(value, low=low):
            k = np.sqrt(value - low + 0j)
            slope = 5.0 - 0.2 * value
            there = np.cos(k) + slope * np.sin(k) / k
            return np.real(-k * np.sin(k) + slope * np.cos(k) - 0.3 * value * there)

        exact += roots(end, 0.1, 500.0)
    found = eigenvalues(
        {"shape": "rectangle", "width": 1.0, "height": 0.7},
        edges={
            "left": {"support": "elastic", "stiffness": 5.0, "mass": 0.2},
            "right": {**FREE, "mass": 0.3},
            "top": FREE,
        },
    )
    assert error(found, exact) < 1e-9
