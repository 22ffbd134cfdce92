"""Segments become chains, open and closed."""

from __future__ import annotations

import numpy as np

from membrane.nodal.join import chains


def test_an_open_chain_and_a_ring() -> None:
    segments = np.array([[3, 1, 5, 6, 7], [1, 0, 6, 7, 5]])
    open_, ring = (chain.tolist() for chain in chains(segments, 8))
    assert open_ in ([0, 1, 3], [3, 1, 0])
    assert ring[0] == ring[-1]
    assert sorted(ring[:-1]) == [5, 6, 7]


def test_no_segments_no_chains() -> None:
    assert chains(np.empty((2, 0), dtype=np.int64), 3) == []


def test_a_shuffled_line_comes_back_in_order() -> None:
    names = np.random.default_rng(3).permutation(200)
    segments = np.stack([names[:-1], names[1:]])[:, np.random.default_rng(4).permutation(199)]
    (chain,) = chains(segments, 200)
    assert chain.tolist() in (names.tolist(), names[::-1].tolist())
