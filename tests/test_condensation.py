"""What is eliminated in bulk is what lies inside triangles, and eliminating it changes nothing."""

import numpy as np
import pytest
from scipy.sparse import block_diag, coo_array, csc_array

from membrane import cholesky
from membrane.condensation import condensation
from membrane.condensed import condensed
from membrane.errors import SolveError
from membrane.pencil import assemble
from tests import zoo


@pytest.fixture(scope="module", params=["fixed", "free"])
def pencil(request):
    held = {} if request.param == "fixed" else {"edges": {"left": {"support": "free"}}}
    ready = zoo.prepared({**zoo.SQUARE, **held}, 6)
    return assemble(ready.membrane, ready.mesh, 6)


def cliques(groups, size, seed=0):
    """A definite matrix, the sum of one full block on each group of dofs."""
    random, A = np.random.default_rng(seed), np.eye(size) * 0.1
    for group in groups:
        B = random.standard_normal((len(group), len(group)))
        A[np.ix_(group, group)] += B @ B.T
    return csc_array(A)


def test_the_insides_of_triangles_are_eliminated(pencil):
    plan = condensation(pencil.K)
    inside = pencil.space.element_dofs[-10:]  # (p - 1)(p - 2) / 2 of them at p = 6
    whole = np.setdiff1d(np.arange(pencil.space.dofs), inside)
    np.testing.assert_array_equal(
        pencil.space.free[plan.kept], np.intersect1d(whole, pencil.space.free)
    )


def test_what_is_left_is_the_schur_complement(pencil):
    A, plan = pencil.K, condensation(pencil.K)
    reduced, K = condensed(plan, A.data), A.toarray()
    left = plan.kept
    gone = np.setdiff1d(np.arange(len(K)), left)
    coupling = K[np.ix_(left, gone)]
    schur = K[np.ix_(left, left)] - coupling @ np.linalg.solve(K[np.ix_(gone, gone)], coupling.T)
    low = coo_array((reduced.low, (plan.rows, plan.columns)), shape=schur.shape).toarray()
    np.testing.assert_allclose(low, np.tril(schur), atol=1e-12 * np.abs(schur).max())


@pytest.mark.parametrize("columns", [None, 3])
def test_solves_with_the_whole(pencil, columns):
    A = pencil.shifted(-1.0)
    b = np.random.default_rng(1).standard_normal((A.shape[0], *([columns] if columns else [])))
    np.testing.assert_allclose(A @ cholesky.factorised(A)(b), b, atol=1e-10)


@pytest.mark.parametrize("shift", [30.0, 500.0, 5000.0, 50000.0])
def test_counts_with_negative_eigenvalues_inside_triangles(pencil, shift):
    A = pencil.shifted(shift)
    expected = int((np.linalg.eigvalsh(A.toarray()) < 0).sum())
    assert cholesky.negative_count(A) == expected


def test_some_shifts_are_above_the_insides_own_eigenvalues(pencil):
    """So that the counts above see both ways."""
    plan = condensation(pencil.K)
    negative = [condensed(plan, pencil.shifted(s).data).negative for s in (30.0, 50000.0)]
    assert negative[0] == 0 < negative[1]


@pytest.mark.parametrize(
    ("groups", "kept"),
    [
        ([range(0, 6), range(4, 12)], [4, 5]),
        ([range(0, 5), range(3, 8), range(6, 12)], [3, 4, 5, 6, 7]),
        ([[0, 1, 2, 6, 7], [3, 4, 5, 7, 8], [6, 7, 8, 9, 10, 11]], [6, 7, 8]),
        # the neighbours of the first three do not all meet each other
        ([[0, 1, 2, 3], [0, 1, 2, 4], range(3, 6), [4, 6], range(7, 12)], None),
        ([range(12)], range(12)),
    ],
)
def test_cliques_by_their_entries_alone(groups, kept):
    A = cliques(groups, 12)
    plan = condensation(A)
    if kept is not None:
        np.testing.assert_array_equal(plan.kept, kept)
    b = np.arange(1.0, 13.0)
    np.testing.assert_allclose(A @ cholesky.factorised(A)(b), b, atol=1e-9)
    shifted = csc_array(A - 2.0 * np.eye(12))
    assert cholesky.negative_count(shifted) == int(
        (np.linalg.eigvalsh(shifted.toarray()) < 0).sum()
    )


def test_a_block_that_is_not_definite_is_refused():
    block = cliques([range(5)], 8).toarray()
    block[0, 0] = -1.0
    block[4:, 4:] += 1.0
    with pytest.raises(SolveError, match="not positive definite"):
        cholesky.factorised(csc_array(block_diag([block, np.eye(2)])))
