"""Band Lanczos against known spectra, also where the Krylov space ends early."""

import numpy as np
import pytest
from scipy.linalg import eigh
from scipy.sparse import csc_array, diags_array

from membrane.cholesky import factorised
from membrane.eigensolvers.band_lanczos import largest


def pencil(values, seed=0):
    """A diagonal K and M whose eigenvalues are ``values``."""
    mass = np.random.default_rng(seed).uniform(0.5, 2.0, len(values))
    return (csc_array(diags_array(d)) for d in (values * mass, mass))


def lowest(values, count):
    K, M = pencil(values)
    found, vectors = largest(factorised(K), M, count)
    np.testing.assert_allclose(vectors.T @ (M @ vectors), np.eye(count), atol=1e-11)
    residuals = K @ vectors - (M @ vectors) / found
    assert np.abs(residuals).max() < 1e-5 * values[count]
    return 1 / found


@pytest.mark.parametrize("count", [1, 5, 20, 80])
def test_simple_eigenvalues(count):
    values = np.arange(1.0, 400.0)
    np.testing.assert_allclose(lowest(values, count), values[:count], rtol=1e-11)


def test_pairs():
    values = np.repeat(np.arange(1.0, 200.0), 2)
    np.testing.assert_allclose(lowest(values, 20), values[:20], rtol=1e-11)


@pytest.mark.parametrize("levels", [3, 5])
def test_more_copies_than_starts(levels):
    """The Krylov space of the starts holds two copies of each level; the rest is made up."""
    values = np.repeat(np.arange(1.0, levels + 1), 12)
    np.testing.assert_allclose(lowest(values, 15), values[:15], rtol=1e-11)


def test_a_full_matrix():
    random = np.random.default_rng(3)
    A, B = (random.standard_normal((60, 60)) for _ in range(2))
    K, M = A @ A.T + 60 * np.eye(60), B @ B.T + 60 * np.eye(60)
    found, _ = largest(lambda b: np.linalg.solve(K, b), csc_array(M), 12)
    np.testing.assert_allclose(1 / found, eigh(K, M, eigvals_only=True)[:12], rtol=1e-11)
