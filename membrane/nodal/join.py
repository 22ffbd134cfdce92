"""Joining: segments that share their ends become chains."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Ints


def chains(segments: Ints, count: int) -> list[Ints]:
    """Chains of points, open ones first; a closed chain ends with its first point.

    segments : (2, m), pairs of point numbers below ``count``; no point has more than two
    """
    neighbours = _neighbours(segments, count)
    ends = [point for point, near in enumerate(neighbours) if len(near) == 1]
    seen = [False] * count
    found = []
    for start in (*ends, *range(count)):
        if not seen[start] and neighbours[start]:
            found.append(np.array(_walk(start, neighbours, seen)))
    return found


def _neighbours(segments: Ints, count: int) -> list[list[int]]:
    near: list[list[int]] = [[] for _ in range(count)]
    for a, b in zip(*segments.tolist(), strict=True):
        near[a].append(b)
        near[b].append(a)
    return near


def _walk(start: int, neighbours: list[list[int]], seen: list[bool]) -> list[int]:
    """From ``start`` to the far end, or around and back to ``start``."""
    chain = [start]
    seen[start] = True
    here = start
    while True:
        ahead = [point for point in neighbours[here] if not seen[point]]
        if not ahead:
            break
        here = ahead[0]
        seen[here] = True
        chain.append(here)
    closed = len(neighbours[start]) == 2
    return [*chain, start] if closed else chain
