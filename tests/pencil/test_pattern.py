"""Places in the sparse matrix against scipy's own sums of coordinates."""

import numpy as np
import pytest
from scipy.sparse import coo_array

from membrane.pencil import build_space
from membrane.pencil.pattern import pairs_of
from tests import zoo


@pytest.mark.parametrize("degree", [1, 2, 3, 6])
@pytest.mark.parametrize("regions", [("head",), ("paste",), ("head", "paste")])
def test_same_sums_as_scipys(degree, regions):
    mesh = zoo.prepared(zoo.PATCHED, 4).mesh
    ready = build_space(mesh, degree, ("rim",))
    free, count = ready.space.free, ready.space.dofs
    basis = ready.on_regions(regions)
    dofs = ready.space.element_dofs[:, basis.tind].T
    local = np.random.default_rng(0).random((*dofs.shape, dofs.shape[1]))
    places = np.broadcast_arrays(dofs[:, :, None], dofs[:, None, :])
    expected = coo_array(
        (local.ravel(), tuple(place.ravel() for place in places)), shape=(count, count)
    ).tocsr()[free][:, free]
    found = basis.pattern(free).matrix(local)
    assert found.has_sorted_indices
    assert found.shape == expected.shape
    assert found.nnz == expected.nnz
    assert abs(found - expected).max() < 1e-14


def test_worked_out_once():
    ready = build_space(zoo.straight_square(), 3, ())
    basis, free = ready.on_regions(("head",)), ready.space.free
    assert basis.pattern(free) is basis.pattern(free)


@pytest.mark.parametrize("count", [40, 3_000_000])
def test_pairs_are_those_that_numpy_finds(count):
    own, other = np.random.default_rng(6).integers(0, count, (2, 4000))
    rows, columns, number = pairs_of(own, other)
    known, places = np.unique(own * count + other, return_inverse=True)
    assert np.array_equal(rows * count + columns, known)
    assert np.array_equal(number, places)
