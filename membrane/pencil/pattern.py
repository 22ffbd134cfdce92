"""Where the entries of triangles' matrices lie in the sparse matrix of all of them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from scipy.sparse import csr_array
from skfem.assembly.basis import CellBasis

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Pattern:
    """The non-zero places of a symmetric matrix on the free dofs, in scipy's row format.

    slots : (n_triangles, n_local, n_local), place of each local entry among the sparse
        matrix's data; ``len(indices)`` where a dof is held
    """

    indptr: Ints
    indices: Ints
    slots: Ints

    def matrix(self, local: Floats) -> Any:
        """The sum of the triangles' matrices (n_triangles, n_local, n_local)."""
        size = len(self.indptr) - 1
        data = np.bincount(self.slots.ravel(), local.ravel(), len(self.indices) + 1)
        summed = csr_array((data[:-1], self.indices, self.indptr), shape=(size, size))
        summed.has_canonical_format = True
        return summed


@dataclass(frozen=True)
class _Blocks:
    """Dofs in blocks: each vertex, facet and interior of a triangle has its own.

    of : (7, n_triangles), the blocks of each triangle, in the order of its local dofs
    sizes : (n_blocks,), free dofs of each; a block's are numbered in a row, in its order
    local : (7,), dofs of each of the seven
    """

    of: Ints
    sizes: Ints
    local: Ints


def pattern(basis: CellBasis, free: Ints) -> Pattern:
    """The pattern of a basis on the dofs ``free``, rising; blocks are free as a whole.

    Neighbours are found block by block, which are few, and not entry by entry.
    """
    blocks = _blocks(basis, free)
    count = len(blocks.sizes)
    own, other = np.broadcast_arrays(blocks.of[:, None], blocks.of[None, :])
    rows, columns, number = pairs_of(own.ravel(), other.ravel())
    offsets, widths = _along_rows(rows, blocks.sizes[columns], count)
    indptr = np.concatenate([[0], np.cumsum(np.repeat(widths, blocks.sizes))])
    indices = _indices(blocks.sizes, rows, columns, widths)
    block = np.repeat(np.arange(7), blocks.local)
    within = np.concatenate([np.arange(size) for size in blocks.local])
    first = np.concatenate([[0], np.cumsum(blocks.sizes)])[blocks.of]
    held = (blocks.sizes == 0)[blocks.of][block].T
    starts = indptr[np.where(held, 0, first[block].T + within)]
    jumps = offsets[number].reshape(49, -1).T
    slots = np.take(jumps, 7 * block[:, None] + block, axis=1)
    slots += within
    slots += starts[:, :, None]
    touched = np.flatnonzero(held.any(axis=1))
    left_out = held[touched, :, None] | held[touched, None, :]
    slots[touched] = np.where(left_out, len(indices), slots[touched])
    return Pattern(indptr.astype(np.int32), indices.astype(np.int32), slots)


def _blocks(basis: CellBasis, free: Ints) -> _Blocks:
    topology, triangles, dofs = basis.mesh, basis.tind, basis.dofs
    kinds = [
        (dofs.nodal_dofs, topology.t, topology.nvertices),
        (dofs.facet_dofs, topology.t2f, topology.nfacets),
        (dofs.interior_dofs, np.arange(topology.nelements)[None], topology.nelements),
    ]
    is_free = np.zeros(dofs.N, dtype=bool)
    is_free[free] = True
    of, sizes, local, before = [], [], [], 0
    for numbers, places, count in kinds:
        of.append(before + places[:, triangles].astype(np.int64))
        sizes.append(is_free[numbers].sum(axis=0) if numbers.size else np.zeros(count, int))
        local += [numbers.shape[0]] * len(places)
        before += count
    return _Blocks(np.vstack(of), np.concatenate(sizes), np.array(local))


def pairs_of(own: Ints, other: Ints) -> tuple[Ints, Ints, Ints]:
    """Each pair of blocks once, rising, and of the pairs given which of them each is.

    By digits of 16 bits, which numpy sorts several times as fast as whole numbers.
    """
    digits = [key.astype(np.uint16) for half in (other, own) for key in _halves(half)]
    order = np.lexsort(digits)
    rows, columns = own[order], other[order]
    first = np.ones(order.size, dtype=bool)
    first[1:] = (np.diff(rows) != 0) | (np.diff(columns) != 0)
    number = np.empty_like(order)
    number[order] = np.cumsum(first) - 1
    return rows[first], columns[first], number


def _halves(key: Ints) -> tuple[Ints, ...]:
    low, high = key & 0xFFFF, key >> 16
    return (low, high) if high.any() else (low,)


def _along_rows(rows: Ints, widths: Ints, count: int) -> tuple[Ints, Ints]:
    """Of each pair of blocks where it begins in its rows; of each block how wide its rows are."""
    ends = np.cumsum(widths)
    total = np.bincount(rows, widths, count).astype(np.int64)
    begin = np.cumsum(total) - total
    return ends - widths - begin[rows], total


def _indices(sizes: Ints, rows: Ints, columns: Ints, widths: Ints) -> Any:
    """The column of each entry: the rows of a block all have the same."""
    first = np.cumsum(sizes) - sizes
    once = _runs(first[columns], sizes[columns])
    begin = np.cumsum(widths) - widths
    return once[_runs(np.repeat(begin, sizes), np.repeat(widths, sizes))]


def _runs(starts: Ints, lengths: Ints) -> Any:
    """start, start + 1, ... of each run, one run after the other."""
    ends = np.cumsum(lengths)
    return np.arange(ends[-1] if len(ends) else 0) + np.repeat(starts - (ends - lengths), lengths)
