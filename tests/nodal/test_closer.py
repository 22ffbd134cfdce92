"""Lines that cross between the lattice points are drawn through their crossing."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.nodal import nodal_patterns
from membrane.nodal.closer import PARTS, _places_on_sides
from membrane.nodal.edges import lattice_edges
from membrane.records.study import Edge, Support
from membrane.triangle import lattice
from tests import zoo
from tests.synthetic import modes_of

FREE = {"rim": Edge(Support.FREE)}


@pytest.mark.parametrize("seed", range(8))
def test_two_lines_cross_anywhere_in_a_square(seed: int) -> None:
    a, b = np.random.default_rng(seed).random(2)
    modes = modes_of(zoo.straight_square(), 6, [lambda x, y: (x - a) * (y - b)])
    (pattern,) = nodal_patterns(modes, FREE)
    # the two lines are 1 long each; at most a corner of the smallest triangles is cut
    assert abs(pattern.length - 2.0) < 1.0 / (6 * PARTS)
    points = np.hstack(pattern.lines)
    nearest = np.hypot(points[0] - a, points[1] - b).min()
    assert nearest < 1.0 / (6 * PARTS)
    assert np.abs((points[0] - a) * (points[1] - b)).max() < 1e-13


@pytest.mark.parametrize("gap", [1e-2, 1e-3, 1e-4, 1e-6])
def test_lines_that_nearly_touch_keep_apart(gap: float) -> None:
    modes = modes_of(zoo.straight_square(), 6, [lambda x, y: (x - 0.41) * (y - 0.37) - gap**2])
    (pattern,) = nodal_patterns(modes, FREE)
    assert len(pattern.lines) == 2
    for line in pattern.lines:
        sides = np.sign(line[0] - 0.41)
        assert np.abs((line[0] - 0.41) * (line[1] - 0.37) - gap**2).max() < 1e-13
        assert gap < 1e-4 or len(set(sides.tolist())) == 1


def test_every_chain_is_whole() -> None:
    def rosette(x, y):
        z = x + 1j * y
        return np.real(z**3) * (np.abs(z) ** 2 - 0.3) * (x - 0.11)

    mesh = zoo.prepared(zoo.DISC).mesh
    (pattern,) = nodal_patterns(modes_of(mesh, 6, [rosette]), FREE)
    loose = [
        end
        for line in pattern.lines
        if not np.array_equal(line[:, 0], line[:, -1])
        for end in line[:, [0, -1]].T
    ]
    np.testing.assert_allclose(np.hypot(*np.array(loose).T), 1.0, atol=1e-6)
    assert len(loose) == 2 * 3 + 2


def test_edges_on_the_sides_of_a_small_triangle_are_known() -> None:
    side, step = _places_on_sides()
    middle = lattice(PARTS).points[:, lattice_edges(PARTS).ends].mean(axis=1)
    assert np.bincount(side + 1).tolist()[1:] == [PARTS] * 3
    starts = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
    for number in np.nonzero(side >= 0)[0]:
        a, b = starts[:, side[number]], starts[:, (side[number] + 1) % 3]
        np.testing.assert_allclose(middle[:, number], a + (step[number] + 0.5) / PARTS * (b - a))
