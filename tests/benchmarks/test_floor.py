"""The floor does what its name says."""

import numpy as np
from scipy.sparse import diags_array, eye_array

from scripts.benchmarks.floor import floor


def test_ritz_values_bound_the_lowest_eigenvalues_from_above():
    """1, 2^4, 3^4, ...: one step of inverse iteration finds the first few roughly."""
    exact = np.arange(1.0, 101.0) ** 4
    values, vectors = floor(diags_array(exact).tocsc(), eye_array(100).tocsc(), 4)
    assert (values >= exact[:4] * (1 - 1e-12)).all()
    np.testing.assert_allclose(values[:2], exact[:2], rtol=0.01)
    np.testing.assert_allclose(vectors.T @ vectors, np.eye(4), atol=1e-10)
