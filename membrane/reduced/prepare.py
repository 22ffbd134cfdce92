"""The reduced model of a sweep, made greedily from a few full solves."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from scipy.linalg import eigh

from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil
from membrane.reduced.affine import FIXED, Affine, affine
from membrane.reduced.basis import Basis, Reference, grown
from membrane.reduced.model import MORE, Answers, ReducedModel
from membrane.reduced.reach import outside

TRAINING, ROUND = 60, 2000
"""Points of the sweep that the model is first made for, and then passed over."""

MARGIN = 0.7
"""Of the wanted accuracy, that the sampled points must reach, so that the others do too."""

CHECKS = 3
"""Points at which the reach of the basis is looked at."""

REACH, SAFE = 2.0, 0.9
"""How far a basis is taken to reach at first, and the share of what is found that counts."""

LEAST_REACH = 1.25
"""Below it the basis gets what it has missed."""

MOST_SOLVES = 60
"""Full solves after which the model stays as it is."""

COARSE = 3.0
"""First length outside the basis, over the root of the wanted relative accuracy, from which a
direction of a solved point is kept."""

FINER = 4.0
"""How many times better than the wanted accuracy a solved point becomes."""

BEST = 1e-5
"""Length outside the basis below which a direction is rounding, and no more is gained."""

SEED = 20240229


@dataclass(frozen=True)
class Solved:
    """A full solve: values (n,), vectors (n_free, n), and their own error, cents (n,)."""

    eigenvalues: Floats
    vectors: Floats
    cents: Floats


Solve = Callable[[Pencil, int], Solved]
"""At least so many of the lowest modes of a pencil, none missing."""


@dataclass(frozen=True)
class _Making:
    """A model on its way."""

    whole: Affine
    reference: Reference
    basis: Basis
    model: ReducedModel
    solve: Solve


def prepare(
    pencil: Pencil,
    keys: Sequence[str],
    points: Floats,
    count: int,
    accuracy: float,
    solve: Solve,
) -> ReducedModel:
    """The reduced model for a sweep of a pencil's numbers.

    keys : of the study, that scale parts of the pencil
    points : (n, n_keys), SI; the model depends on them and on their order alone
    accuracy : wanted of every mode, cents, against the full model
    Raises SolveError where a key scales no part or has no bounds.
    """
    points = np.asarray(points, dtype=float)
    sample = np.random.default_rng(SEED).permutation(len(points))
    making = _begun(affine(pencil, keys), points, count, accuracy, solve)
    making = _enriched(making, points[sample[:TRAINING]])
    making = _reaching(making, points[sample[:CHECKS]])
    return _enriched(making, points[sample[:ROUND]]).model


def _begun(whole: Affine, points: Floats, count: int, accuracy: float, solve: Solve) -> _Making:
    """A model from one full solve, in the middle of the points."""
    middle, lowest = np.median(points, axis=0), points.min(axis=0)
    first = solve(whole.at(middle), count + _guards(count))
    low = whole.at(lowest)
    shift = float(first.eigenvalues[1]) if low.moves_rigidly else 0.0
    reference = Reference.of(low, shift)
    model = ReducedModel(
        keys=whole.keys,
        count=count,
        accuracy=accuracy,
        stiffness=np.empty((0, 0, 0)),
        mass=np.empty((0, 0, 0)),
        stiffness_weights=whole.stiffness_weights,
        mass_weights=whole.mass_weights,
        residual=np.empty((0, 0, 0)),
        held_by=_held_by(whole) if low.moves_rigidly else (),
        shift=shift,
        reach=REACH,
        lowest=lowest,
        element_cents=np.zeros(count),
        solves=0,
    )
    making = _Making(whole, reference, Basis.empty(whole), model, solve)
    if low.moves_rigidly:
        making = _with_shapes(making, np.ones((len(low.space.free), 1)), BEST)
    return _with_solved(making, middle, first)


def _guards(count: int) -> int:
    """Modes solved for beyond the wanted ones: about as far as ``LEAST_REACH`` goes."""
    return MORE + 2 + count // 4


def _held_by(whole: Affine) -> tuple[int, ...]:
    """Columns of the keys whose stiffness moves a constant shape."""
    ones = np.ones(whole.stiffness[0].shape[0])
    pairs = zip(whole.stiffness_weights.columns, whole.stiffness, strict=True)
    acting = (c for c, A in pairs if c != FIXED and abs(ones @ (A @ ones)) > 1e-10 * A.max())
    return tuple(acting)


def _enriched(making: _Making, points: Floats) -> _Making:
    """The worst point solved in full, again and again, until all are well within accuracy."""
    wanted = MARGIN * making.model.accuracy
    cents = _worst(making.model.answers(points))
    failing = cents > wanted
    while failing.any() and making.model.solves < MOST_SOLVES:
        worst = points[failing][np.argmax(cents[failing])]
        making = _at(making, worst)
        cents[failing] = _worst(making.model.answers(points[failing]))
        failing = cents > wanted
    return making


def _worst(answers: Answers) -> Floats:
    return np.asarray(answers.cents.max(axis=1))


def _at(making: _Making, point: Floats) -> _Making:
    count = making.model.count
    return _with_solved(making, point, making.solve(making.whole.at(point), count + _guards(count)))


def _with_solved(making: _Making, point: Floats, solved: Solved) -> _Making:
    """The model with the modes of a point, as finely as the accuracy there needs.

    A fixed fineness would stall: a point may fail for directions just below it.
    """
    model = making.model
    element = np.maximum(model.element_cents, solved.cents[: model.count])
    model = replace(model, element_cents=element, solves=model.solves + 1)
    making = replace(making, model=model)
    relative = model.accuracy / CENTS_PER_EIGENVALUE
    apart = COARSE * np.sqrt(relative)
    while True:
        making = _with_shapes(making, _weighted(solved.vectors, model.count, apart), apart)
        done = _worst(making.model.answers(point[None]))[0] <= model.accuracy / FINER
        if done or apart < BEST:
            return making
        apart /= 3.0


def _weighted(vectors: Floats, count: int, apart: float) -> Floats:
    """Modes beyond the wanted ones are kept only where a third of them is new."""
    coarse = np.ones(vectors.shape[1])
    coarse[count + MORE :] = min(1.0, 3.0 * apart)
    return np.asarray(vectors * coarse)


def _with_shapes(making: _Making, shapes: Floats, apart: float) -> _Making:
    basis = grown(making.basis, making.whole, making.reference, shapes, apart)
    first = len(making.whole.stiffness)
    model = replace(
        making.model,
        stiffness=basis.matrices[:first],
        mass=basis.matrices[first:],
        residual=_factor(basis.gram, 1e-7 * making.model.accuracy / CENTS_PER_EIGENVALUE),
    )
    return replace(making, basis=basis, model=model)


def _factor(gram: Floats, negligible: float) -> Floats:
    """L (Q, r, N) with |sum of a_q L_q y|^2 = the Gram matrix's product of the a_q y."""
    matrices, size = gram.shape[:2]
    scale = 1.0 / np.sqrt(np.einsum("qiqi->q", gram))[:, None]
    square = (gram * scale[:, :, None, None] * scale).reshape(matrices * size, -1)
    values, vectors = eigh((square + square.T) / 2)
    kept = values > negligible * values[-1]
    factor = (vectors[:, kept] * np.sqrt(values[kept])).T.reshape(-1, matrices, size)
    return np.ascontiguousarray(np.moveaxis(factor / scale, 0, 1))


def _reaching(making: _Making, points: Floats) -> _Making:
    """The basis with what it has missed at points, and the reach that it has there."""
    reach = REACH
    for point in points:
        making, found = _reaching_at(making, point)
        reach = min(reach, SAFE * found)
    return replace(making, model=replace(making.model, reach=reach))


def _reaching_at(making: _Making, point: Floats) -> tuple[_Making, float]:
    pencil, shift = making.whole.at(point), making.model.shift
    held = pencil.K + shift * pencil.M
    last = making.model.modes_at(point, making.model.count)[0][-1] + shift
    for _ in range(MOST_SOLVES):
        value, shape = outside(held, pencil.M, making.basis.shapes)
        if SAFE * value >= LEAST_REACH * last:
            break
        making = _with_shapes(making, _unit(shape, making.reference.mass), BEST)
    return making, value / last


def _unit(shape: Floats, mass: Any) -> Floats:
    return np.asarray(shape / np.sqrt(np.sum(shape * (mass @ shape))))
