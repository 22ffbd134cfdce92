"""How long a mesh edge may be at each place of an outline."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np

from membrane.records.arrays import Floats

_FIRST_SAMPLES = 17
_ROUNDS = 40


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

    def closer(self, factor: float) -> Bend:
        """Shorter edges along bends and beside gaps, by a factor."""
        return Bend(factor * self.per_circle, self.per_gap / factor, self.growth)


USUAL = Bend()


@dataclass(frozen=True)
class SizeMap:
    """Edge length = the least of size + growth x distance over all samples.

    points : (2, n), metres
    sizes : (n,), metres
    """

    points: Floats
    sizes: Floats
    growth: float

    def at(self, x: float, y: float) -> float:
        """Longest edge, metres, at a point."""
        px, py = self.points
        return float((self.sizes + self.growth * np.hypot(px - x, py - y)).min())


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
) -> SizeMap:
    """Sizes along curves from their bends, the gaps between them and the targets.

    targets : curve -> longest edge wanted along it, metres
    joined : curve -> curves that share an end with it, between which no gap is sought
    """
    parameters = {c: np.linspace(*kernel.bounds(c), _FIRST_SAMPLES) for c in targets}
    for _ in range(_ROUNDS):
        sampled = [_sample(kernel, c, parameters[c], targets[c], bend) for c in targets]
        sampled = [_beside_gaps(one, sampled, joined[one.curve], bend) for one in sampled]
        finer = {one.curve: _bisected(one) for one in sampled}
        if all(finer[c].size == parameters[c].size for c in targets):
            break
        parameters = finer
    points = np.hstack([one.points for one in sampled])
    return thinned(SizeMap(points, np.hstack([one.sizes for one in sampled]), bend.growth))


def _sample(kernel: Curves, curve: int, parameters: Floats, target: float, bend: Bend) -> _Sampled:
    bent = kernel.curvature(curve, parameters)
    around = 2.0 * np.pi / bend.per_circle / np.maximum(bent, 1e-300)
    points = kernel.evaluate(curve, parameters)
    return _Sampled(curve, parameters, points, np.minimum(around, target))


def _beside_gaps(
    one: _Sampled, sampled: Sequence[_Sampled], joined: Sequence[int], bend: Bend
) -> _Sampled:
    others = [o.points for o in sampled if o.curve != one.curve and o.curve not in joined]
    if not others:
        return one
    (px, py), (qx, qy) = one.points[:, :, None], np.hstack(others)[:, None, :]
    gaps = np.sqrt(((px - qx) ** 2 + (py - qy) ** 2).min(axis=1))
    sizes = np.minimum(one.sizes, bend.per_gap * gaps)
    return _Sampled(one.curve, one.parameters, one.points, sizes)


def _bisected(one: _Sampled) -> Floats:
    """The parameters, with halves of the steps that are longer than half a size."""
    steps = np.hypot(*np.diff(one.points))
    long = steps > 0.5 * np.minimum(one.sizes[:-1], one.sizes[1:])
    halves = 0.5 * (one.parameters[:-1] + one.parameters[1:])[long]
    return np.sort(np.concatenate([one.parameters, halves]))


def thinned(sizes: SizeMap) -> SizeMap:
    """Without the samples that others overrule everywhere."""
    kept: list[int] = []
    order = np.argsort(sizes.sizes, kind="stable")
    for k in order:
        x, y = sizes.points[:, k]
        near = SizeMap(sizes.points[:, kept], sizes.sizes[kept], sizes.growth)
        if not kept or near.at(x, y) > 1.000001 * sizes.sizes[k]:
            kept.append(int(k))
    return SizeMap(sizes.points[:, kept], sizes.sizes[kept], sizes.growth)
