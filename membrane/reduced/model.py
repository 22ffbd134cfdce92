"""The reduced model: modes at any point of a sweep, each with its estimated error."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy.linalg import eigh

from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Bools, Floats
from membrane.reduced.affine import FIXED, Weights

MORE = 2
"""Modes worked out beyond the wanted ones, for clusters that the last one belongs to."""

NEAR = 10.0
"""Modes closer than this many times their errors may share these: a cluster's error matrix
has its trace as a bound, and single values of it do not bound one mode."""


@dataclass(frozen=True)
class Answers:
    """The modes of several points.

    eigenvalues : (n_points, count), (rad/s)^2, rising; never below the full model's
    cents : (n_points, count), how far the full model's frequency may lie below
    met : (n_points,), where all of them are within the wanted accuracy
    """

    eigenvalues: Floats
    cents: Floats
    met: Bools

    @property
    def frequencies(self) -> Floats:
        """(n_points, count), Hz."""
        return np.sqrt(self.eigenvalues) / (2.0 * np.pi)


@dataclass(frozen=True)
class ReducedModel:
    """A pencil projected on a basis of N shapes: small, and nothing in it knows the mesh.

    keys : of the study, one for each number of a point
    stiffness, mass : (n_matrices, N, N), weighted as ``*_weights`` say
    residual : (Q, r, N), a factor of the residuals' Gram matrix, stiffness then mass
    held_by : columns of the numbers that hold the head, as one that is not 0 does; None
        where something else always does
    shift : (rad/s)^2, that the error estimate adds to every eigenvalue
    reach : the basis holds every mode up to this times the last wanted eigenvalue, as was
        looked at at sampled points
    lowest : (n_keys,), the least of each number that the model was made for
    element_cents : (count,), the widest error of the full model itself, of those solved
    solves : how many full solves were made
    """

    keys: tuple[str, ...]
    count: int
    accuracy: float
    stiffness: Floats
    mass: Floats
    stiffness_weights: Weights
    mass_weights: Weights
    residual: Floats
    held_by: tuple[int, ...] | None
    shift: float
    reach: float
    lowest: Floats
    element_cents: Floats
    solves: int

    @property
    def size(self) -> int:
        """N."""
        return int(self.mass.shape[-1])

    def answers(self, points: Floats) -> Answers:
        """The modes at points (n, n_keys), SI; each the same whatever the others are."""
        found = [self._answer(point) for point in np.asarray(points, dtype=float)]
        values = np.array([value for value, _ in found]).reshape(-1, self.count)
        cents = np.array([cent for _, cent in found]).reshape(-1, self.count)
        return Answers(values, cents, np.all(cents <= self.accuracy, axis=1).reshape(-1))

    def modes_at(self, point: Floats, count: int) -> tuple[Floats, Floats, Floats]:
        """Eigenvalues (count,), vectors (N, count) in the basis, and the mass (N, N) there."""
        K = np.tensordot(self.stiffness_weights.at(point), self.stiffness, 1)
        M = np.tensordot(self.mass_weights.at(point), self.mass, 1)
        values, vectors = eigh(K, M, subset_by_index=[0, min(count, self.size) - 1])
        if self.moves_rigidly(point):
            values[0] = 0.0
        return np.maximum(values, 0.0), vectors, M

    def moves_rigidly(self, point: Floats) -> bool:
        """Whether nothing holds the head at a point."""
        held_by = self.held_by
        return held_by is not None and all(point[column] == 0.0 for column in held_by)

    def _answer(self, point: Floats) -> tuple[Floats, Floats]:
        values, vectors, _ = self.modes_at(point, self.count + MORE)
        low = np.sort(values / (1.0 + self._errors(point, values, vectors)))
        kept = values[: self.count]
        cents = np.zeros(self.count)
        moving = kept > 0.0
        cents[moving] = CENTS_PER_EIGENVALUE * np.log(kept[moving] / low[: self.count][moving])
        return kept, cents

    def _errors(self, point: Floats, values: Floats, vectors: Floats) -> Floats:
        """How far each eigenvalue may be too high, relative to it; from the residuals.

        |K u - lambda M u|^2 / (1 - Lambda nu), in the inverse of the reference and over the
        least ratio of the weights to its own; Lambda = lambda + shift; 1 / nu is the lowest
        eigenvalue outside the basis.
        """
        off = np.sum(self._residuals(point, values, vectors) ** 2, axis=0) / self._ratio(point)
        shifted = values + self.shift
        outside = self.reach * shifted[min(self.count, len(shifted)) - 1]
        off = off / np.maximum(1.0 - shifted / outside, 1.0 - 1.0 / self.reach)
        near = np.abs(values[:, None] - values) <= NEAR * (off[:, None] + off)
        return np.asarray((near @ off) / np.where(values > 0.0, values, np.inf))

    def _residuals(self, point: Floats, values: Floats, vectors: Floats) -> Floats:
        first = len(self.stiffness)
        stiff = np.tensordot(self.stiffness_weights.at(point), self.residual[:first], 1)
        heavy = np.tensordot(self.mass_weights.at(point), self.residual[first:], 1)
        return np.asarray(stiff @ vectors - (heavy @ vectors) * values)

    def _ratio(self, point: Floats) -> float:
        """The least of all weights over those of the reference: at least 1 in the sweep."""
        columns = self.stiffness_weights.columns
        if self.shift > 0.0:
            columns += self.mass_weights.columns
        swept = [c for c in columns if c != FIXED and self.lowest[c] > 0.0]
        ratios = point[swept] / self.lowest[swept]
        return float(np.min(ratios, initial=1.0 if FIXED in columns else np.inf))
