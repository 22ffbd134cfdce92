"""Raviart-Thomas shapes: scikit-fem's own of the lowest degrees, and what defines the others."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.polynomial.legendre import legvander
from scipy.special import roots_legendre
from skfem.element import ElementTriRT1, ElementTriRT2

from membrane.triangle import EDGES, across, flux_shapes, nodes

POINTS = np.random.default_rng(3).dirichlet([1, 1, 1], 40).T[:2]


@pytest.mark.parametrize(("degree", "element"), [(1, ElementTriRT1()), (2, ElementTriRT2())])
def test_they_span_what_scikit_fem_spans(degree, element):
    values, divergences = flux_shapes(POINTS, degree)
    ours = np.hstack([values[0], values[1], divergences])
    theirs = [element.lbasis(POINTS, i) for i in range(len(ours))]
    theirs = [np.hstack([phi[0], phi[1], np.broadcast_to(div, 40)]) for phi, div in theirs]
    combined = np.linalg.lstsq(ours.T, np.array(theirs).T, rcond=None)[0]
    assert np.abs(ours.T @ combined - np.array(theirs).T).max() < 1e-12
    assert np.linalg.matrix_rank(combined) == len(ours)


@pytest.mark.parametrize("degree", [1, 3, 9, 13])
def test_each_crosses_its_own_edge_alone(degree):
    x, weights = roots_legendre(degree + 2)
    for edge, (low, high) in enumerate(EDGES):
        start, stop = nodes(1)[:, [low]], nodes(1)[:, [high]]
        values, _ = flux_shapes(start + (stop - start) * (1 + x) / 2, degree)
        moments = (
            np.tensordot(across(edge), values, 1) @ (legvander(x, degree - 1).T * weights / 2).T
        )
        wanted = np.zeros_like(moments)
        wanted[edge * degree : (edge + 1) * degree] = np.eye(degree)
        assert np.abs(moments - wanted).max() < 1e-10


@pytest.mark.parametrize("degree", [1, 4, 9])
def test_divergences_are_those_of_the_values(degree):
    step = 1e-6
    ahead, behind = (
        [flux_shapes(POINTS + sign * step * np.eye(2)[:, [k]], degree)[0][k] for k in range(2)]
        for sign in (1, -1)
    )
    slope = sum((a - b) / (2 * step) for a, b in zip(ahead, behind, strict=True))
    divergences = flux_shapes(POINTS, degree)[1]
    assert np.abs(slope - divergences).max() < 1e-6 * np.abs(divergences).max()
