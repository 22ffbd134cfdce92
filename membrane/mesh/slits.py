"""Slits: a mesh cut open along curves, so that each lip has vertices of its own."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.records.arrays import Bools, Ints
from membrane.records.raw_mesh import RawMesh
from membrane.triangle import EDGES


def opened(raw: RawMesh, curves: Sequence[int]) -> RawMesh:
    """The mesh with triangles joined across no segment of the kernel's ``curves``.

    A vertex becomes as many as there are groups of triangles around it that still hang
    together: one at a slit's tip, two along it, more where slits meet.
    """
    if not curves:
        return raw
    corner = _corners(raw, np.isin(raw.segment_curve, curves))
    old = np.empty(corner.max() + 1, dtype=np.int64)
    old[corner] = raw.triangles
    segment, ends = _segments(raw, corner)
    rising = np.argsort(ends, axis=0)
    return RawMesh(
        vertices=raw.vertices[:, old],
        triangles=corner,
        face=raw.face,
        segments=np.take_along_axis(ends, rising, axis=0),
        segment_curve=raw.segment_curve[segment],
        segment_parameters=np.take_along_axis(raw.segment_parameters[:, segment], rising, axis=0),
    )


def _corners(raw: RawMesh, cut: Bools) -> Ints:
    """(3, n_triangles): new vertex numbers of the triangles' corners."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components

    numbers = np.arange(raw.triangles.size).reshape(raw.triangles.shape)
    keys, low, high = _sides(raw.triangles, numbers, raw.vertices.shape[1])
    order = np.argsort(keys, kind="stable")
    keys, low, high = keys[order], low[order], high[order]
    walls = _keys(raw.segments[:, cut], raw.vertices.shape[1])
    joined = (keys[1:] == keys[:-1]) & ~np.isin(keys[1:], walls)
    a = np.concatenate([low[:-1][joined], high[:-1][joined]])
    b = np.concatenate([low[1:][joined], high[1:][joined]])
    graph = coo_array((np.ones(a.size), (a, b)), shape=(numbers.size, numbers.size))
    labels = connected_components(graph, directed=False)[1]
    return np.asarray(labels, dtype=np.int64)[numbers]


def _segments(raw: RawMesh, corner: Ints) -> tuple[Ints, Ints]:
    """Which segment (n,) each new one was, and its ends (2, n); twice along a slit."""
    keys, low, high = _sides(raw.triangles, corner, raw.vertices.shape[1])
    swapped = raw.segments[0] > raw.segments[1]
    wanted = _keys(raw.segments, raw.vertices.shape[1])
    order = np.argsort(wanted)
    place = np.minimum(np.searchsorted(wanted[order], keys), wanted.size - 1)
    found = wanted[order][place] == keys
    table = np.stack([order[place], low, high])[:, found]
    segment, low, high = np.unique(table, axis=1)
    return segment, np.where(swapped[segment], [high, low], [low, high])


def _sides(triangles: Ints, numbers: Ints, count: int) -> tuple[Ints, Ints, Ints]:
    """Of all sides of all triangles: a key, and ``numbers`` at the lower and higher vertex."""
    ends = np.hstack([triangles[list(edge)] for edge in EDGES])
    named = np.hstack([numbers[list(edge)] for edge in EDGES])
    turned = ends[0] > ends[1]
    low, high = np.where(turned, named[::-1], named)
    return _keys(ends, count), low, high


def _keys(pairs: Ints, count: int) -> Ints:
    return np.asarray(pairs.min(axis=0) * count + pairs.max(axis=0))
