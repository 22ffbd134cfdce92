"""Nodal lines on fixed, free and curved heads."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.nodal import nodal_patterns
from membrane.records.study import Edge, Support
from tests import zoo
from tests.synthetic import modes_of


@pytest.mark.parametrize("parts", [(1, 2), (3, 1), (2, 2)])
def test_lines_end_on_fixed_sides_where_the_slope_changes_sign(parts: tuple[int, int]) -> None:
    k, n = parts
    mesh = zoo.prepared(zoo.SQUARE).mesh
    fixed = tuple(mesh.edges)

    def f(x, y):
        # zero on all four sides and on lines that meet them at right angles
        return x * (1 - x) * y * (1 - y) * (x - 0.3) ** (k - 1) * (y - 0.6) ** (n - 1)

    (pattern,) = nodal_patterns(modes_of(mesh, 8, [f], fixed), {})
    expected = {(1, 2): 1.0, (3, 1): 0.0, (2, 2): 2.0}[parts]  # a double root is no line
    assert abs(pattern.length - expected) < 1e-2
    assert len(pattern.lines) >= round(expected)
    x, y = np.hstack([line[:, [0, -1]] for line in pattern.lines] or [np.empty((2, 0))])
    on_side = np.min([x, 1 - x, y, 1 - y], axis=0) < 1e-12
    assert np.count_nonzero(on_side) == 2 * round(expected)


def test_fixed_edges_are_no_lines_but_free_ones_may_be() -> None:
    mesh = zoo.prepared(zoo.SQUARE).mesh
    modes = modes_of(mesh, 4, [lambda x, y: x * (1 - x) * y * (1 - y)], tuple(mesh.edges))
    (pattern,) = nodal_patterns(modes, {})
    assert (pattern.lines, pattern.length, pattern.domains) == ((), 0.0, 1)


def test_an_ellipse_inside_a_disc() -> None:
    # perimeter 4 a E(1 - b^2/a^2), scipy's ellipe; DLMF 19.9.9
    from scipy.special import ellipe

    a, b = 0.7, 0.4
    mesh = zoo.prepared(zoo.DISC).mesh
    modes = modes_of(mesh, 6, [lambda x, y: (x / a) ** 2 + (y / b) ** 2 - 1.0])
    (pattern,) = nodal_patterns(modes, {"rim": Edge(Support.FREE)})
    (line,) = pattern.lines
    assert np.array_equal(line[:, 0], line[:, -1])
    assert np.abs((line[0] / a) ** 2 + (line[1] / b) ** 2 - 1.0).max() < 1e-12
    assert abs(pattern.length / (4 * a * ellipe(1 - (b / a) ** 2)) - 1.0) < 1e-5


def test_a_line_along_mesh_sides_is_one_line() -> None:
    modes = modes_of(zoo.straight_square(), 5, [lambda x, y: x + y - 1.0])
    (pattern,) = nodal_patterns(modes, {"rim": Edge(Support.FREE)})
    assert len(pattern.lines) == 1
    assert abs(pattern.length - np.sqrt(2.0)) < 1e-12
