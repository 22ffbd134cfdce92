"""The count never falls below the exact one, whatever the mesh; its constant is Liu's."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.linalg import eigh, null_space
from scipy.special import jn_zeros, jnp_zeros

from membrane.bounds.crouzeix_raviart import LIU, crouzeix_raviart, longest_along
from membrane.bounds.head import head_of
from membrane.bounds.leaves import leaves
from membrane.triangle import EDGES, collapsed_rule, nodes
from membrane.triangle.polynomials import orthonormal
from tests import zoo
from tests.bounds.heads import numbers, rectangles


def counted(keys, limit, step, **resolution):
    here = zoo.prepared(keys, fans=False, **resolution)
    head = head_of(here.membrane, here.mesh)
    step /= np.sqrt(limit)
    leaf = leaves(head, step, longest_along(head, limit, step), 100_000)
    return None if leaf is None else crouzeix_raviart(head, leaf).count(limit)


@pytest.mark.slow
@settings(max_examples=40, deadline=None)
@given(rectangles(), st.integers(1, 14), numbers(0.05, 0.95), numbers(0.3, 2.5))
def test_never_fewer_than_there_are(rectangle, number, place, step):
    exact = rectangle.exact(16)
    limit = exact[number - 1] + place * (exact[number] - exact[number - 1])
    if limit <= 0.0:
        return
    found = counted(rectangle.keys, limit, step)
    assert found is None or found >= np.count_nonzero(exact < limit * (1 - 1e-9))


@pytest.mark.parametrize("support", ["fixed", "free"])
def test_it_closes_on_a_disc(support):
    """Zeros of J_m and of J_m': DLMF 10.21 by scipy."""
    zeros = {"fixed": jn_zeros, "free": jnp_zeros}[support]
    exact = [z**2 for m in range(9) for z in list(zeros(m, 4)) * (1 if m == 0 else 2)]
    exact = np.sort([0.0, *exact] if support == "free" else exact)
    gap = int(np.argmax(np.diff(exact[8:20]))) + 9
    limit = (exact[gap - 1] + exact[gap]) / 2
    keys = {**zoo.DISC, "edges": {"rim": {"support": support}}}
    assert counted(keys, limit, 0.3) == gap
    for step in (0.5, 1.0, 2.0):
        coarse = counted(keys, limit, step)
        assert coarse is None or coarse >= gap


def test_a_heavy_patch_with_a_bent_border():
    """Of 20 finite elements' values below the limit, which are upper bounds, none is missed."""
    from tests.bounds.heads import solved

    _, modes = solved(zoo.PATCHED, 20)
    for number in (6, 12):
        limit = float(modes.eigenvalues[number - 1]) * 1.0001
        for step in (0.3, 1.0, 2.0):
            found = counted(zoo.PATCHED, limit, step)
            assert found is None or found >= np.count_nonzero(modes.eigenvalues <= limit)


def worst_ratio(corners):
    """The largest |w| / |grad w| over a triangle of polynomials with no mean over any side."""
    points, weights = collapsed_rule(20)
    values, slopes = orthonormal(points, 9)
    a, b, c = corners
    matrix = np.stack([b - a, c - a], axis=1)
    gradients = np.einsum("kd,kin->din", np.linalg.inv(matrix), slopes)
    x, side_weights = np.polynomial.legendre.leggauss(6)
    means = []
    for low, high in EDGES:
        ends = nodes(1)[:, [low, high]]
        along = ends[:, [0]] + (ends[:, [1]] - ends[:, [0]]) * (1 + x) / 2
        means.append(orthonormal(along, 9)[0] @ side_weights)
    kept = null_space(np.array(means))
    mass = (values * weights) @ values.T
    energy = sum((g * weights) @ g.T for g in gradients)
    ratio = eigh(kept.T @ mass @ kept, kept.T @ energy @ kept, eigvals_only=True)[-1]
    longest = max(np.linalg.norm(corners[i] - corners[j]) for i, j in EDGES)
    return np.sqrt(ratio) / longest


@settings(max_examples=60, deadline=None)
@given(st.tuples(numbers(0.0, 1.0), numbers(0.05, 1.0)))
def test_the_constant_holds_on_every_triangle(apex):
    corners = np.array([[0.0, 0.0], [1.0, 0.0], apex])
    assert worst_ratio(corners) <= LIU


def test_the_constant_is_no_larger_than_it_must_be():
    """X. Liu 2015: the equilateral triangle is the worst."""
    equilateral = np.array([[0.0, 0.0], [1.0, 0.0], [0.5, np.sqrt(3) / 2]])
    assert LIU - 2e-4 < worst_ratio(equilateral) <= LIU
