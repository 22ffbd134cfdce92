"""Equal eigenvalues share a number and are never cut."""

import numpy as np
import pytest

from membrane.modes.clusters import cluster_numbers, whole_clusters

VALUES = np.array([1.0, 2.0, 2.0 + 1e-9, 3.0, 4.0, 4.0, 4.0, 5.0])


def test_numbers():
    assert cluster_numbers(VALUES, 1e-8).tolist() == [1, 2, 2, 3, 4, 4, 4, 5]
    assert cluster_numbers(VALUES, 1e-10).tolist() == [1, 2, 3, 4, 5, 5, 5, 6]


def test_zero_stands_alone():
    assert cluster_numbers(np.array([0.0, 1e-3]), 1e-5).tolist() == [1, 2]


@pytest.mark.parametrize(("count", "kept"), [(1, 1), (2, 3), (3, 3), (4, 4), (5, 7), (8, 8)])
def test_whole_clusters(count, kept):
    assert whole_clusters(VALUES, count, 1e-8) == kept
