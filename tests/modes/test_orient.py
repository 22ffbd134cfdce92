"""Signs and pairs come out the same whatever the solver did."""

import numpy as np
import pytest

from membrane.eigensolvers import dense
from membrane.modes import extract
from membrane.pencil import assemble
from tests import zoo


@pytest.fixture(scope="module")
def pencil():
    ready = zoo.prepared(zoo.DISC)
    return assemble(ready.membrane, ready.mesh, 6)


def scrambled(seed):
    """A solver that turns each pair and flips signs at random."""
    rng = np.random.default_rng(seed)

    def solve(K, M, count, shift):
        values, vectors = dense.solve(K, M, count, shift)
        for first, second in ((1, 2), (3, 4)):
            angle = 2 * np.pi * rng.random()
            turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
            vectors[:, [first, second]] = vectors[:, [first, second]] @ turn
        return values, vectors * rng.choice([-1.0, 1.0], count)

    return solve


def test_same_modes_from_scrambled_ones(pencil):
    straight = extract(pencil, 6, dense.solve, 0.01)
    for seed in range(3):
        other = extract(pencil, 6, scrambled(seed), 0.01)
        np.testing.assert_allclose(other.vectors, straight.vectors, atol=1e-6)


def test_pairs_stand_on_the_x_axis(pencil):
    """Of each pair on a disc the first is even in y and the second odd."""
    modes = extract(pencil, 5, dense.solve, 0.01)
    points = 0.7 * np.array([[0.3, 0.8, -0.5], [0.6, 0.2, 0.4]])
    mirrored = points * np.array([[1.0], [-1.0]])
    above, below = modes.at(points), modes.at(mirrored)
    for even, odd in ((1, 2), (3, 4)):
        np.testing.assert_allclose(above[even], below[even], atol=1e-5)
        np.testing.assert_allclose(above[odd], -below[odd], atol=1e-5)
