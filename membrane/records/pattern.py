"""The common sparsity pattern of several matrices, so that sums of them cost little."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Pattern:
    """Where the entries of each matrix lie in the arrays of a CSC matrix that holds them all.

    places : for each matrix, (nnz,) numbers into the common ``indices``
    data : for each matrix, its entries (nnz,), in the same order
    """

    indptr: Ints
    indices: Ints
    places: tuple[Ints, ...]
    data: tuple[Floats, ...]

    @classmethod
    def of(cls, matrices: Sequence[Any]) -> Pattern:
        """The pattern of sparse square matrices of one shape."""
        from scipy.sparse import csc_array

        columns = [_plain(csc_array(matrix)) for matrix in matrices]
        union = _union(columns)
        keys = _keys(union)
        places = tuple(np.searchsorted(keys, _keys(matrix)) for matrix in columns)
        return cls(union.indptr, union.indices, places, tuple(m.data for m in columns))

    def total(self, numbers: Iterable[tuple[int, float]]) -> Any:
        """CSC sum of number x matrix over pairs (which matrix, number)."""
        from scipy.sparse import csc_array

        data = np.zeros(len(self.indices))
        for which, number in numbers:
            data[self.places[which]] += number * self.data[which]
        size = len(self.indptr) - 1
        total = csc_array((data, self.indices, self.indptr), shape=(size, size))
        total.has_canonical_format = True
        return total


def _plain(matrix: Any) -> Any:
    if not matrix.has_canonical_format:
        matrix = matrix.copy()
        matrix.sum_duplicates()
    return matrix


def _union(matrices: list[Any]) -> Any:
    """A CSC matrix of positive entries wherever one of the matrices stores one."""
    from scipy.sparse import csc_array

    marks = [
        csc_array((np.ones(m.nnz, dtype=np.int32), m.indices, m.indptr), shape=m.shape)
        for m in matrices
    ]
    union = sum(marks[1:], marks[0])
    union.sort_indices()
    return union


def _keys(matrix: Any) -> Ints:
    """(nnz,) column x size + row: rising in a CSC matrix with sorted indices."""
    size = matrix.shape[0]
    column = np.repeat(np.arange(size, dtype=np.int64), np.diff(matrix.indptr))
    return np.asarray(column * size + matrix.indices)
