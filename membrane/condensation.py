"""Which dofs of a sparse symmetric matrix can be eliminated in bulk, by its entries alone.

The dofs inside a triangle meet only those of that triangle, which all meet each other. To
eliminate them first costs no new entries, and dense algebra on all triangles at once is far
faster there than a sparse factorisation. What is left has a third of the dofs at degree 8.
Static condensation: Guyan, AIAA J. 3 (1965) 380, from memory.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from membrane.records.arrays import Bools, Ints

LEAST = 3
"""Dofs below which a run is left to the sparse factorisation."""

MOST_NEIGHBOURS = 32
"""Neighbouring runs above which a run is left to the sparse factorisation."""


@dataclass(frozen=True)
class Batch:
    """Runs of ``m`` dofs that are eliminated together, with at most ``w`` neighbours each.

    inner : (n, m) the dofs
    outer : (n, w) their neighbours; ``n_dofs`` stands for none
    own : (n, m, m), where their entries are in the matrix's data
    mixed : (n, m, w), where those with their neighbours are; ``nnz`` stands for none
    pairs : (n, w (w + 1) / 2), where those between their neighbours are among the entries
        ``Condensation.low``, the number of which stands for none; ordered as ``tril_indices``
    """

    inner: Ints
    outer: Ints
    own: Ints
    mixed: Ints
    pairs: Ints


@dataclass(frozen=True)
class Condensation:
    """What is eliminated of all matrices with one pattern, and what is kept.

    kept : (n_kept,) the dofs that are left
    low : places of the entries between them in the matrix's data, lower triangle only
    rows, columns : of those entries, numbered among the kept dofs
    """

    kept: Ints
    low: Ints
    rows: Ints
    columns: Ints
    batches: tuple[Batch, ...]


@dataclass(frozen=True)
class _Runs:
    """Dofs in a row whose columns have entries at the same places, run by run.

    first, sizes : (n_runs,), their first dofs and how many they have
    of : (n_dofs,), the run of each dof
    keys : rising, own * n_runs + other for each pair of neighbours
    start : (n_runs + 1,), where the pairs of each run begin
    offset : of each pair, where the other's entries begin in the own columns
    """

    first: Ints
    sizes: Ints
    of: Ints
    keys: Ints
    start: Ints
    offset: Ints

    def pairs(self, own: Ints, other: Ints) -> tuple[Ints, Bools]:
        """The numbers of pairs, and whether they are neighbours at all."""
        wanted = own * len(self.first) + other
        found = np.minimum(np.searchsorted(self.keys, wanted), len(self.keys) - 1)
        return found, self.keys[found] == wanted

    def around(self, runs: Ints) -> Ints:
        """(n, k) the neighbours of runs, themselves included; -1 where there are fewer."""
        counts = self.start[runs + 1] - self.start[runs]
        column = np.arange(counts.max(initial=0))
        pairs = np.minimum(self.start[runs][:, None] + column, len(self.keys) - 1)
        return np.where(column < counts[:, None], self.keys[pairs] % len(self.first), -1)


def condensation(A: Any) -> Condensation:
    """What can be eliminated of a symmetric CSC matrix with sorted columns: the runs whose
    neighbours are all neighbours of each other."""
    indptr, indices = A.indptr.astype(np.int64), A.indices.astype(np.int64)
    runs = _runs(indptr, indices)
    chosen = _eliminated(runs) if len(runs.keys) else np.empty(0, dtype=np.int64)
    is_kept = ~np.isin(runs.of, chosen)
    if not is_kept.any():
        chosen, is_kept = chosen[:0], ~is_kept
    lengths = np.diff(indptr)
    low = np.nonzero(np.repeat(is_kept, lengths))[0]
    columns = np.repeat(np.arange(len(lengths))[is_kept], lengths[is_kept])
    is_low = (indices[low] >= columns) & is_kept[indices[low]]
    low, columns = low[is_low], columns[is_low]
    number = np.cumsum(is_kept) - 1
    place = np.full(len(indices) + 1, len(low))
    place[low] = np.arange(len(low))
    return Condensation(
        kept=np.nonzero(is_kept)[0],
        low=low,
        rows=number[indices[low]],
        columns=number[columns],
        batches=tuple(
            _batch(indptr, indices, runs, chosen[runs.sizes[chosen] == m], place)
            for m in np.unique(runs.sizes[chosen])
        ),
    )


def _runs(indptr: Ints, indices: Ints) -> _Runs:
    begins = ~_like_the_one_before(indptr, indices)
    of = np.cumsum(begins) - 1
    first = np.nonzero(begins)[0]
    lengths = np.diff(indptr)[first]
    start = np.cumsum(lengths) - lengths
    offset = np.arange(lengths.sum()) - np.repeat(start, lengths)
    own = np.repeat(np.arange(len(first)), lengths)
    other = of[indices[indptr[first][own] + offset]]
    new = (offset == 0) | (np.diff(other, prepend=-1) != 0)
    counts = np.bincount(own[new], minlength=len(first))
    return _Runs(
        first=first,
        sizes=np.bincount(of, minlength=len(first)),
        of=of,
        keys=(own * len(first) + other)[new],
        start=np.concatenate([[0], np.cumsum(counts)]),
        offset=offset[new],
    )


def _like_the_one_before(indptr: Ints, indices: Ints) -> Bools:
    """(n_dofs,), whether a column has its entries where the one before has them."""
    # a column's entries are told by the sum of 64 random bits for each, which wraps around
    bits = np.random.default_rng(0).integers(2**64, size=len(indptr) - 1, dtype=np.uint64)
    sums = np.concatenate([np.zeros(1, np.uint64), np.cumsum(bits[indices])])
    told = np.diff(sums[indptr])
    return np.asarray(np.concatenate([[False], told[1:] == told[:-1]])[: len(told)])


def _eliminated(runs: _Runs) -> Ints:
    """Of each clique that is all that some runs meet, the largest of these runs."""
    count = len(runs.first)
    own, other = np.divmod(runs.keys, count)
    width = np.bincount(own, runs.sizes[other], count)
    least = np.full(count, np.inf)
    np.minimum.at(least, own, width[other])
    few = np.diff(runs.start) <= MOST_NEIGHBOURS
    likely = np.nonzero((runs.sizes >= LEAST) & few & (width <= least))[0]
    around = runs.around(likely)
    _, meet = runs.pairs(around[:, :, None], around[:, None, :])
    meet |= (around < 0)[:, :, None] | (around < 0)[:, None, :]
    likely, around = likely[meet.all(axis=(1, 2))], around[meet.all(axis=(1, 2))]
    rank = np.full(count + 1, -1)  # the last one is that of no run
    rank[likely] = runs.sizes[likely] * count + likely
    return np.asarray(likely[rank[around].max(axis=1, initial=-1) == rank[likely]])


def _batch(indptr: Ints, indices: Ints, runs: _Runs, chosen: Ints, place: Ints) -> Batch:
    """The places of runs of one size; ``place`` of each entry is its number in ``low``."""
    m, first = runs.sizes[chosen[0]], runs.first[chosen]
    begin, length = indptr[first], np.diff(indptr)[first]
    before = runs.offset[runs.pairs(chosen, chosen)[0]]
    each, other = np.arange(m), np.arange(length.max() - m)
    # the run's own dofs follow each other somewhere in its columns
    local = other + m * (other >= before[:, None])
    none = other >= (length - m)[:, None]
    outer = indices[np.where(none, 0, begin[:, None] + local)]
    rows = begin[:, None] + each * length[:, None]
    mixed = np.where(none[:, None], len(indices), rows[:, :, None] + local[:, None])
    i, j = np.tril_indices(len(other))
    meeting = _between(runs, chosen, outer, i, j) + indptr[outer[:, j]]
    return Batch(
        inner=first[:, None] + each,
        outer=np.where(none, len(runs.of), outer),
        own=(rows + before[:, None])[:, :, None] + each,
        mixed=mixed,
        pairs=place[np.where(none[:, i] | none[:, j], len(indices), meeting)],
    )


def _between(runs: _Runs, chosen: Ints, outer: Ints, i: Ints, j: Ints) -> Ints:
    """(n, n_pairs), where dofs outer[:, i] are within the columns of outer[:, j]."""
    around = runs.around(chosen)
    found, _ = runs.pairs(around[:, :, None], around[:, None, :])
    member = np.argmax(around[:, None, :] == runs.of[outer][:, :, None], axis=2)
    each = np.arange(len(chosen))[:, None]
    begins = runs.offset[found[each, member[:, j], member[:, i]]]
    return np.asarray(begins + (outer - runs.first[runs.of[outer]])[:, i])
