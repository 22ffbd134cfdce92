"""No mode is missed, whatever the start vectors: 200 runs on heads with multiple eigenvalues."""

import numpy as np
import pytest

from membrane.cholesky import factorised
from membrane.eigensolvers import arpack_superlu
from membrane.eigensolvers.band_lanczos import largest
from membrane.modes import extract
from membrane.pencil import assemble
from tests import zoo

TRIANGLE = {
    "outline": {"shape": "polygon", "corners": [[0, 0], [1, 0], [0.5, 3**0.5 / 2]]},
    "head": zoo.HEAD,
}
HEADS = {"disc": zoo.DISC, "square": zoo.SQUARE, "L": zoo.L_SHAPE, "triangle": TRIANGLE}
SEEDS = 50
MOST = 90


def solver_from(seed):
    def solve(K, M, count, shift):
        values, vectors = largest(factorised(K), M, count, seed)
        return 1 / values, vectors

    return solve


@pytest.mark.slow
@pytest.mark.parametrize("head", HEADS)
def test_no_mode_is_missed(head):
    """ARPACK, which goes deeper, says how many there are."""
    ready = zoo.prepared(HEADS[head], 8, phase=5.0)
    pencil = assemble(ready.membrane, ready.mesh, 8)
    known, _ = arpack_superlu.solve(pencil.K, pencil.M, MOST + 20, 0.0)
    for seed in range(SEEDS):
        count = int(np.random.default_rng(seed).integers(5, MOST))
        modes = extract(pencil, count, solver_from(seed), 0.01)
        assert modes.complete
        found = modes.eigenvalues
        np.testing.assert_allclose(found, known[: found.size], rtol=1e-11, err_msg=str(seed))


def multiplicities(head, count):
    ready = zoo.prepared(HEADS[head], 8, phase=3.0)
    pencil = assemble(ready.membrane, ready.mesh, 8)
    modes = extract(pencil, count, solver_from(1), 0.01)
    return np.unique(modes.clusters, return_counts=True)[1].tolist()


@pytest.mark.slow
@pytest.mark.parametrize(
    ("head", "levels"),
    [
        # m^2 + n^2 with m, n from 1
        ("square", [m * m + n * n for m in range(1, 12) for n in range(1, 12)]),
        # m^2 + mn + n^2 with m, n from 1: Lame, 1852 (from memory)
        ("triangle", [m * m + m * n + n * n for m in range(1, 14) for n in range(1, 14)]),
    ],
)
def test_multiplicities_are_those_of_the_closed_form(head, levels):
    _, copies = np.unique(levels, return_counts=True)
    assert copies[:30].max() >= 3
    found = multiplicities(head, int(copies[:30].sum()))
    assert found == copies[:30].tolist()
