"""Groups of eigenvalues that are equal as far as the solve can tell."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats, Ints


def cluster_numbers(values: Floats, same: float) -> Ints:
    """(n,) numbers from 1; rising ``values`` share one where they differ by < ``same``."""
    apart = np.diff(values) > same * np.abs(values[1:])
    return np.concatenate([[1], 1 + np.cumsum(apart)]).astype(np.int64)


def whole_clusters(values: Floats, count: int, same: float) -> int:
    """The least number of values, from ``count`` up, that cuts no cluster."""
    clusters = cluster_numbers(values, same)
    return int(np.searchsorted(clusters, clusters[count - 1], side="right"))
