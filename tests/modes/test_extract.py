"""Modes are found, counted, repaired when one is missing, and repeatable."""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy.sparse import diags_array, eye_array

from membrane import plugins
from membrane.eigensolvers import dense, shift_invert
from membrane.errors import SolveError
from membrane.modes import count_up_to, extract
from membrane.pencil import assemble
from membrane.records.pencil import Part, Pencil, Space
from tests import zoo


def pencil(keys, degree=6):
    ready = zoo.prepared(keys, degree)
    return assemble(ready.membrane, ready.mesh, degree)


@pytest.fixture(scope="module")
def square():
    return pencil(zoo.SQUARE)


@pytest.fixture(scope="module")
def free_square():
    free = {name: {"support": "free"} for name in ("left", "right", "bottom", "top")}
    return pencil({**zoo.SQUARE, "edges": free})


def exact_square(first):
    """pi^2 (m^2 + n^2), m and n from ``first``; elementary."""
    return np.sort([np.pi**2 * (m * m + n * n) for m, n in product(range(first, 30), repeat=2)])


@pytest.mark.parametrize("name", ["shift_invert", "arpack_superlu", "dense"])
def test_square_by_every_solver(square, name):
    modes = extract(square, 12, plugins.load("eigensolver", name).solve, 0.01)
    exact = exact_square(1)[: len(modes.eigenvalues)]
    np.testing.assert_allclose(modes.eigenvalues, exact, rtol=1e-7)
    assert modes.complete


def test_mass_normalised(square):
    modes = extract(square, 12, shift_invert.solve, 0.01)
    U = modes.vectors[square.space.free]
    np.testing.assert_allclose(U.T @ (square.M @ U), np.eye(U.shape[1]), atol=1e-12)


def test_the_last_cluster_is_whole(square):
    """Modes 2 and 3 of the square are a pair."""
    modes = extract(square, 2, shift_invert.solve, 0.01)
    assert modes.clusters.tolist() == [1, 2, 2]


def test_a_cluster_longer_than_the_extras_is_whole():
    """Ten equal eigenvalues after the first, of which the second is asked for."""
    values = np.array([1.0, *[2.0] * 10, 3.0, 4.0, 5.0, *np.arange(6.0, 40.0)])
    size = len(values)
    places = np.random.default_rng(0).random((2, size))
    space = Space(zoo.straight_square(), 1, np.empty((3, 2), dtype=int), places, np.arange(size))
    stiffness = Part("key", 1.0, diags_array(values).tocsc())
    mass = Part("key", 1.0, eye_array(size).tocsc())
    modes = extract(Pencil(space, (stiffness,), (mass,), False), 2, dense.solve, 0.01)
    np.testing.assert_allclose(modes.eigenvalues, values[:11], rtol=1e-12)


def test_free_head_has_one_rigid_mode(free_square):
    modes = extract(free_square, 8, shift_invert.solve, 0.01)
    exact = exact_square(0)[: len(modes.eigenvalues)]
    assert modes.eigenvalues[0] == 0.0
    assert (modes.eigenvalues[1:] > 1.0).all()
    assert np.ptp(modes.vectors[:, 0]) == 0.0
    np.testing.assert_allclose(modes.eigenvalues[1:], exact[1:], rtol=1e-7)


def forgetful(missing, times):
    """A solver that leaves out one mode the first few times."""
    calls = []

    def solve(K, M, count, shift):
        calls.append(count)
        if len(calls) > times:
            return dense.solve(K, M, count, shift)
        values, vectors = dense.solve(K, M, count + 1, shift)
        kept = np.delete(np.arange(count + 1), missing)
        return values[kept], vectors[:, kept]

    return solve


@pytest.mark.parametrize("missing", [0, 1, 2, 7])
def test_a_missing_mode_is_noticed_and_found(square, missing):
    modes = extract(square, 8, forgetful(missing, times=1), 0.01)
    exact = exact_square(1)[: len(modes.eigenvalues)]
    np.testing.assert_allclose(modes.eigenvalues, exact, rtol=1e-7)


def test_a_count_that_never_closes_is_an_error(square):
    with pytest.raises(SolveError, match="did not close"):
        extract(square, 8, forgetful(1, times=99), 0.01)


def test_repeatable_to_the_last_bit(square):
    one, two = (extract(square, 12, shift_invert.solve, 0.01) for _ in range(2))
    np.testing.assert_array_equal(one.vectors, two.vectors)


def test_count_up_to(square):
    """4 modes of the square lie below sqrt(8.5) pi / 2 pi Hz: (1,1), (1,2), (2,1), (2,2)."""
    assert count_up_to(square, np.sqrt(8.5) / 2) == 4


def test_too_many_modes_for_the_mesh():
    fields = replace(zoo.prepared(zoo.SQUARE).membrane, fixed_edges=("rim",))
    tiny = assemble(fields, zoo.straight_square(), 3)
    with pytest.raises(SolveError, match="carries only"):
        extract(tiny, 40, dense.solve, 0.01)
