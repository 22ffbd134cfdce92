"""Factorisations against LAPACK, with and without CHOLMOD."""

import numpy as np
import pytest
from scipy.sparse import csc_matrix, diags, random_array

from membrane import cholesky
from membrane.errors import SolveError


@pytest.fixture(params=["cholmod", "superlu"])
def library(request, monkeypatch):
    if request.param == "superlu":
        monkeypatch.setattr(cholesky, "_cholmod", lambda: None)
    else:
        pytest.importorskip("cvxopt")
    return request.param


def symmetric(size, seed):
    A = random_array((size, size), density=0.05, rng=np.random.default_rng(seed))
    return csc_matrix(A + A.T + diags(np.linspace(-4, 5, size)))


def definite(size, seed):
    A = symmetric(size, seed)
    return csc_matrix(A @ A.T + 0.1 * diags(np.ones(size)))


def test_solves(library):
    A = definite(120, 0)
    b = np.random.default_rng(1).standard_normal(120)
    np.testing.assert_allclose(A @ cholesky.factorised(A)(b), b, atol=1e-11)


@pytest.mark.parametrize("seed", range(5))
def test_counts_as_the_dense_eigenvalues_do(library, seed):
    A = symmetric(150, seed)
    expected = int((np.linalg.eigvalsh(A.toarray()) < 0).sum())
    assert 30 < expected < 120
    assert cholesky.negative_count(A) == expected


def test_a_zero_pivot_is_an_error(library):
    with pytest.raises(SolveError, match="zero pivot"):
        cholesky.negative_count(csc_matrix(np.array([[0.0, 1.0], [1.0, 0.0]])))


def test_an_indefinite_matrix_is_refused_by_cholmod():
    pytest.importorskip("cvxopt")
    with pytest.raises(SolveError, match="not positive definite"):
        cholesky.factorised(csc_matrix(np.diag([1.0, -1.0])))


def test_cholmod_options_are_left_as_they_were():
    cholmod = pytest.importorskip("cvxopt").cholmod
    before = dict(cholmod.options)
    cholesky.negative_count(symmetric(50, 3))
    after = dict(cholmod.options)
    after.pop("supernodal", None) if "supernodal" not in before else None
    assert after == before


def test_matrices_of_one_pattern_are_kept_apart(library):
    """The pattern is read once; the numbers and the factors are each matrix's own."""
    A = definite(80, 4)
    B = A + 2.0 * csc_matrix(diags(np.ones(80)))
    b = np.ones(80)
    by_A, by_B = cholesky.factorised(A), cholesky.factorised(B)
    assert cholesky.negative_count(A - 1e6 * csc_matrix(diags(np.ones(80)))) == 80
    np.testing.assert_allclose(A @ by_A(b), b, atol=1e-11)
    np.testing.assert_allclose(B @ by_B(b), b, atol=1e-11)


def test_a_pattern_is_not_taken_for_another(library):
    A, other = definite(80, 5), definite(80, 6)
    b = np.ones(80)
    for matrix in (A, other, A):
        np.testing.assert_allclose(matrix @ cholesky.factorised(matrix)(b), b, atol=1e-11)
