"""How long mesh edges may be along curves: their bends, and the gaps between them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from math import inf
from typing import Protocol

import numpy as np

from membrane.kernel.size_map import SizeMap
from membrane.records.arrays import Bools, Floats, Ints

_FIRST_SAMPLES = 17
_ROUNDS = 40
_NEIGHBOURS = 8


class Curves(Protocol):
    """What is asked of the kernel: curves as functions of a parameter."""

    def bounds(self, curve: int) -> tuple[float, float]: ...
    def evaluate(self, curve: int, parameters: Floats) -> Floats: ...
    def curvature(self, curve: int, parameters: Floats) -> Floats: ...


@dataclass(frozen=True)
class Bend:
    """How sizes follow bends and gaps.

    per_circle : segments that a full circle gets at the least
    per_gap : longest edge beside a gap, as a multiple of the gap's width
    growth : how much longer an edge may be per length away from a shorter one
    """

    per_circle: float = 10.0
    per_gap: float = 1.0
    growth: float = 0.7


USUAL, COARSE = Bend(), Bend(per_circle=8.0)


@dataclass(frozen=True)
class _Sampled:
    """One curve's samples: parameters (n,), points (2, n), sizes (n,)."""

    curve: int
    parameters: Floats
    points: Floats
    sizes: Floats


def size_map(
    kernel: Curves,
    targets: Mapping[int, float],
    joined: Mapping[int, Sequence[int]],
    bend: Bend,
    most: float = inf,
) -> SizeMap:
    """Sizes along curves from their bends, the gaps between them and the targets.

    targets : curve -> longest edge wanted along it, metres
    joined : curve -> curves that share an end with it, between which no gap is sought
    most : longest edge anywhere, metres
    """
    parameters = {c: np.linspace(*kernel.bounds(c), _FIRST_SAMPLES) for c in targets}
    for _ in range(_ROUNDS):
        sampled = [_sample(kernel, c, parameters[c], targets[c], bend) for c in targets]
        sampled = _beside_gaps(sampled, joined, bend)
        finer = {one.curve: _bisected(one) for one in sampled}
        if all(finer[c].size == parameters[c].size for c in targets):
            break
        parameters = finer
    points = np.hstack([one.points for one in sampled])
    sizes = np.hstack([one.sizes for one in sampled])
    return SizeMap(points, sizes, bend.growth).capped(most).thinned()


def _sample(kernel: Curves, curve: int, parameters: Floats, target: float, bend: Bend) -> _Sampled:
    bent = kernel.curvature(curve, parameters)
    around = 2.0 * np.pi / bend.per_circle / np.maximum(bent, 1e-300)
    points = kernel.evaluate(curve, parameters)
    return _Sampled(curve, parameters, points, np.minimum(around, target))


def _beside_gaps(
    sampled: Sequence[_Sampled], joined: Mapping[int, Sequence[int]], bend: Bend
) -> list[_Sampled]:
    """The samples, with the sizes that gaps to other curves allow."""
    counts = [one.sizes.size for one in sampled]
    owner = np.repeat(np.arange(len(sampled)), counts)
    sizes = np.concatenate([one.sizes for one in sampled])
    apart = _apart([one.curve for one in sampled], joined)
    gaps = _gaps(np.hstack([one.points for one in sampled]), owner, apart, sizes / bend.per_gap)
    parts = np.split(np.minimum(sizes, bend.per_gap * gaps), np.cumsum(counts)[:-1])
    return [replace(one, sizes=part) for one, part in zip(sampled, parts, strict=True)]


def _gaps(points: Floats, owner: Ints, apart: Bools, reach: Floats) -> Floats:
    """(n,) distance of each point from the nearest point of a curve apart, inf beyond ``reach``.

    owner : (n,) number of each point's curve
    apart : (n_curves, n_curves)
    """
    gaps = np.full(owner.size, np.inf)
    if not apart.any():
        return gaps
    from scipy.spatial import KDTree

    tree = KDTree(points.T)
    open_, looked_at = np.arange(owner.size), _NEIGHBOURS
    while open_.size:
        looked_at = min(looked_at, owner.size)
        found = tree.query(points[:, open_].T, np.arange(1, looked_at + 1))
        away, other = np.asarray(found[0]), np.asarray(found[1])
        counts = apart[owner[open_, None], owner[other]]
        gaps[open_] = np.where(counts, away, np.inf).min(axis=1)
        done = counts.any(axis=1) | (away[:, -1] > reach[open_])
        open_ = open_[~done & (looked_at < owner.size)]
        looked_at *= 4
    return gaps


def _apart(curves: Sequence[int], joined: Mapping[int, Sequence[int]]) -> Bools:
    """(n, n) whether a gap between two curves counts: they are not one, nor do they meet."""
    number = {curve: k for k, curve in enumerate(curves)}
    apart: Bools = ~np.eye(len(curves), dtype=bool)
    for curve, others in joined.items():
        apart[number[curve], [number[other] for other in others]] = False
    return apart


def _bisected(one: _Sampled) -> Floats:
    """The parameters, with halves of the steps that are longer than half a size."""
    steps = np.hypot(*np.diff(one.points))
    long = steps > 0.5 * np.minimum(one.sizes[:-1], one.sizes[1:])
    halves = 0.5 * (one.parameters[:-1] + one.parameters[1:])[long]
    return np.sort(np.concatenate([one.parameters, halves]))
