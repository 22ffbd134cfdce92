"""Slits against Bessel functions of broken order and against mode matching."""

from __future__ import annotations

import numpy as np
import pytest
from mpmath import besseljzero

from tests.reference.mixed_side import MixedSide
from tests.reference.solve import DISC, FREE, eigenvalues, error

pytestmark = pytest.mark.slow

SLIT_DISC = {"shape": "sector", "radius": 1.0, "angle": "360 deg"}


def squared_zeros(orders):
    """j_{v,n}^2 of the given orders v (mpmath; DLMF 10.21)."""
    found = sorted(float(besseljzero(v, n)) ** 2 for v in orders for n in range(1, 6))
    return found[:20]


@pytest.mark.parametrize(
    ("edges", "orders"),
    [
        ({}, [k / 2 for k in range(1, 24)]),
        ({"start": FREE, "end": FREE}, [k / 2 for k in range(24)]),
        ({"end": FREE}, [(2 * k + 1) / 4 for k in range(24)]),
    ],
    ids=["fixed", "free", "mixed"],
)
def test_a_slit_disc(edges, orders):
    """sin(k theta/2), cos(k theta/2) and sin((2 k + 1) theta/4) around a full turn."""
    found = eigenvalues(SLIT_DISC, edges=edges)
    assert error(found, squared_zeros(orders)) < 1e-9


@pytest.mark.parametrize("degrees", [180, 270, 290, 330])
def test_a_sector_with_one_side_free(degrees):
    """sin((2 k + 1) pi theta/2 w): an apex with the exponent pi/2w."""
    orders = [(2 * k + 1) * 90 / degrees for k in range(24)]
    sector = {"shape": "sector", "radius": 1.0, "angle": f"{degrees} deg"}
    found = eigenvalues(sector, edges={"end": FREE}, modes={"bracket": False})
    assert error(found, squared_zeros(orders)) < 1e-9


@pytest.mark.parametrize("lips", ["fixed", "free"])
def test_a_slit_up_the_middle_of_a_rectangle(lips):
    """Half the modes are those of half the rectangle with a whole side, the others those
    with a side that is fixed on one part and free on the other."""
    slit = {"name": "cut", "points": [[1.0, -0.1], [1.0, 0.4]], "support": lips}
    found = eigenvalues({"shape": "rectangle", "width": 2.0, "height": 0.8}, slits=[slit])
    shift = 0.0 if lips == "fixed" else 0.5
    whole = [
        ((m + shift) * np.pi) ** 2 + (n * np.pi / 0.8) ** 2
        for m in range(0 if shift else 1, 9)
        for n in range(1, 9)
    ]
    side = MixedSide(1.0, 0.8, lips)

    def exact(value):
        nearest = min(whole, key=lambda known: abs(known - value))
        return nearest if abs(nearest / value - 1) < 1e-6 else side.eigenvalue(value)

    expected = [exact(value) for value in found]
    assert len(set(expected) & set(whole)) >= 6
    assert set(whole) & set(expected) == {w for w in whole if w < found[-1] * (1 + 1e-6)}
    assert error(found, expected) < 1e-9


def test_a_free_cross_keeps_the_modes_that_do_not_feel_it():
    """A slit along a diameter with free lips lets cos(m theta) pass, m even for a cross."""
    slits = [
        {"name": "level", "points": [[-0.5, 0.0], [0.5, 0.0]], "support": "free"},
        {"name": "upright", "points": [[0.0, -0.4], [0.0, 0.4]], "support": "free"},
    ]
    found = eigenvalues(DISC, slits=slits)
    for value in squared_zeros([0, 2, 4]):
        if value < found[-1]:
            assert np.abs(found / value - 1).min() < 1e-9
