"""The reduced model of a sweep, made greedily from a few full solves."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from membrane.cholesky import factorised
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil
from membrane.reduced.affine import FIXED, Affine, affine
from membrane.reduced.basis import Basis, Reference, directions
from membrane.reduced.compress import compressed
from membrane.reduced.making import (
    Making,
    guards,
    with_directions,
    with_modes,
    worst_cents,
)
from membrane.reduced.model import ReducedModel
from membrane.reduced.reach import REACH, reaching

TRAINING, ROUND = 60, 600
"""Points of the sweep that the model is first made for, and then passed over."""

MARGIN = 0.7
"""Of the wanted accuracy, that the sampled points must reach, so that the others do too."""

TURNS, MOST_REPAIRS = 4, 40
"""Times that all sampled points are looked at, and points worked on in each, after which the
model stays as it is."""

STEPS = 2
"""Of inverse iteration at a point: after one, shapes from a poor model are still too rough, and
the basis grows by a tenth more."""

SEED = 20240229

AT_REST = 1e-10
"""Force on a constant shape, over a matrix's largest entry, that is rounding."""


@dataclass(frozen=True)
class Solved:
    """A full solve: values (n,), vectors (n_free, n), and their own error, cents (n,)."""

    eigenvalues: Floats
    vectors: Floats
    cents: Floats


Solve = Callable[[Pencil, int], Solved]
"""At least so many of the lowest modes of a pencil, none missing."""


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
    sample = points[np.random.default_rng(SEED).permutation(len(points))[:ROUND]]
    training = sample[:TRAINING]
    making = _begun(affine(pencil, keys), points, count, accuracy, solve)
    making = compressed(_enriched(making, training), training, MARGIN)
    making = _checked(making, _ends(making, training), solve)
    return _enriched(making, sample).model


def _begun(whole: Affine, points: Floats, count: int, accuracy: float, solve: Solve) -> Making:
    """A model from one full solve, in the middle of the points."""
    middle, lowest = np.median(points, axis=0), points.min(axis=0)
    first = solve(whole.at(middle), count + guards(count))
    low = whole.at(lowest)
    model = ReducedModel(
        keys=whole.keys,
        count=count,
        accuracy=accuracy,
        stiffness=np.empty((0, 0, 0)),
        mass=np.empty((0, 0, 0)),
        stiffness_weights=whole.stiffness_weights,
        mass_weights=whole.mass_weights,
        residual=np.empty((0, 0, 0)),
        held_by=_held_by(whole) if low.moves_rigidly else None,
        shift=float(first.eigenvalues[1]) if low.moves_rigidly else 0.0,
        reach=REACH,
        lowest=lowest,
        element_cents=first.cents[:count],
        solves=1,
    )
    making = Making(whole, Reference.of(low, model.shift), Basis.empty(whole), model)
    if low.moves_rigidly:
        making = _with_constant(making)
    return with_modes(making, middle, first.vectors)


def _held_by(whole: Affine) -> tuple[int, ...]:
    """Columns of the keys whose stiffness moves a constant shape."""
    ones = np.ones(whole.stiffness[0].shape[0])
    pairs = zip(whole.stiffness_weights.columns, whole.stiffness, strict=True)
    moved = (c for c, A in pairs if c != FIXED and np.abs(A @ ones).max() > AT_REST * A.max())
    return tuple(moved)


def _with_constant(making: Making) -> Making:
    """The model with the motion of a head that nothing holds."""
    constant = np.ones((making.reference.mass.shape[0], 1))
    return with_directions(making, directions(making.basis, making.reference, constant)[0])


def _enriched(making: Making, points: Floats) -> Making:
    """The worst point worked on, again and again, until all are well within the accuracy.

    Only failing points are looked at in each turn; at last all are, since an estimate may
    grow a little where the basis does.
    """
    for _ in range(TURNS):
        cents = worst_cents(making, points)
        failing = points[cents > MARGIN * making.model.accuracy]
        if not len(failing):
            break
        making = _repaired(making, failing)
    return making


def _repaired(making: Making, points: Floats) -> Making:
    """The worst of some failing points worked on until each has once been well within."""
    cents = worst_cents(making, points)
    for _ in range(MOST_REPAIRS):
        worst = points[np.argmax(cents)]
        making = with_modes(making, worst, _stepped(making, worst))
        cents = worst_cents(making, points)
        failing = cents > MARGIN * making.model.accuracy
        if not failing.any():
            break
        points, cents = points[failing], cents[failing]
    return making


def _stepped(making: Making, point: Floats) -> Floats:
    """The model's modes at a point after steps of inverse iteration on the full pencil.

    They cost a part of a full solve, and what they add is what the basis has not yet.
    """
    count, shift = making.model.count, making.model.shift
    values, vectors, _ = making.model.modes_at(point, count + guards(count))
    pencil = making.whole.at(point)
    inverse = factorised(pencil.K if shift == 0.0 else pencil.K + shift * pencil.M)
    shapes = making.basis.shapes @ vectors
    for _ in range(STEPS):
        shapes = inverse(pencil.M @ shapes) * (values + shift)
    return np.asarray(shapes)


def _ends(making: Making, points: Floats) -> Floats:
    """The two points where the last mode is lowest and highest."""
    last = making.model.answers(points).eigenvalues[:, -1]
    return points[[np.argmin(last), np.argmax(last)]]


def _checked(making: Making, points: Floats, solve: Solve) -> Making:
    """The model held against full solves at a few points, and how far it reaches there."""
    for point in points:
        making = _compared(making, point, solve)
    return reaching(making, points)


def _compared(making: Making, point: Floats, solve: Solve) -> Making:
    """The model with a full solve's own error, and with its modes where they are outside."""
    model = making.model
    full = solve(making.whole.at(point), model.count + guards(model.count))
    answer = model.answers(point[None])
    element = np.maximum(model.element_cents, full.cents[: model.count])
    making = replace(making, model=replace(model, element_cents=element, solves=model.solves + 1))
    moving = full.eigenvalues[: model.count] > 0.0
    exact = full.eigenvalues[: model.count][moving]
    off = CENTS_PER_EIGENVALUE * np.log(answer.eigenvalues[0][moving] / exact)
    if (off > answer.cents[0][moving]).any():
        return with_modes(making, point, full.vectors)
    return making
