"""A growing basis of shapes, and the pencil's matrices and residuals in it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from scipy.linalg import eigh

from membrane.cholesky import Solve, factorised
from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil
from membrane.reduced.affine import Affine


@dataclass(frozen=True)
class Reference:
    """The pencil that lengths of shapes and of residuals are measured in.

    mass : M where every number of the sweep is lowest
    inverse : solves with K + shift M there
    shift : (rad/s)^2; 0 where something always holds the head
    """

    mass: Any
    inverse: Solve
    shift: float

    @classmethod
    def of(cls, pencil: Pencil, shift: float) -> Reference:
        """Raises SolveError where K + shift M is not positive definite."""
        held = pencil.K if shift == 0.0 else pencil.K + shift * pencil.M
        return cls(pencil.M, factorised(held), shift)


@dataclass(frozen=True)
class Basis:
    """Shapes V and what the sweep needs of them.

    shapes : (n_free, N), orthonormal in the reference's mass
    matrices : (Q, N, N), V^T A_q V of the stiffness matrices, then of the mass matrices
    gram : (Q, N, Q, N), products of A_p V and A_q V in the reference's inverse
    """

    shapes: Floats
    matrices: Floats
    gram: Floats

    @classmethod
    def empty(cls, whole: Affine) -> Basis:
        """No shapes yet."""
        size, count = whole.matrices[0].shape[0], len(whole.matrices)
        return cls(np.empty((size, 0)), np.empty((count, 0, 0)), np.empty((count, 0, count, 0)))

    @property
    def size(self) -> int:
        """N."""
        return int(self.shapes.shape[1])


def grown(basis: Basis, whole: Affine, ref: Reference, shapes: Floats, apart: float) -> Basis:
    """The basis with what ``shapes`` (n_free, n) have outside it.

    apart : length, in the reference's mass, from which a new direction is kept
    """
    new = _outside(basis.shapes, _outside(basis.shapes, shapes, ref.mass), ref.mass)
    new = _principal(new, ref.mass, apart)
    if new.shape[1] == 0:
        return basis
    new = _orthonormal(_outside(basis.shapes, new, ref.mass), ref.mass)
    whole_shapes = np.hstack([basis.shapes, new])
    forces = [A @ new for A in whole.matrices]
    return Basis(
        whole_shapes,
        np.stack([_bordered(basis.matrices[q], whole_shapes.T @ f) for q, f in enumerate(forces)]),
        _grown_gram(basis.gram, whole, whole_shapes, [ref.inverse(f) for f in forces]),
    )


def _outside(shapes: Floats, others: Floats, mass: Any) -> Floats:
    """What is left of ``others`` without their share of ``shapes``."""
    return np.asarray(others - shapes @ (shapes.T @ (mass @ others)))


def _principal(shapes: Floats, mass: Any, apart: float) -> Floats:
    """Orthonormal directions of the shapes' span, those at least ``apart`` long."""
    lengths, turn = eigh(_symmetric(shapes.T @ (mass @ shapes)))
    kept = lengths > apart**2
    return np.asarray(shapes @ (turn[:, kept] / np.sqrt(lengths[kept])))


def _orthonormal(shapes: Floats, mass: Any) -> Floats:
    return _principal(shapes, mass, 0.0)


def _symmetric(A: Floats) -> Floats:
    return np.asarray((A + A.T) / 2)


def _bordered(old: Floats, columns: Floats) -> Floats:
    """A symmetric matrix (N, N) from its first rows and columns and its last columns."""
    size, first = columns.shape[0], old.shape[0]
    grown = np.empty((size, size))
    grown[:first, :first] = old
    grown[:, first:] = columns
    grown[first:, :first] = columns[:first].T
    grown[first:, first:] = _symmetric(columns[first:])
    return grown


def _grown_gram(old: Floats, whole: Affine, shapes: Floats, solved: list[Floats]) -> Floats:
    """The products of all with all; ``solved`` are the inverse's answers for the new ones."""
    count, size, first = len(whole.matrices), shapes.shape[1], old.shape[1]
    gram = np.empty((count, size, count, size))
    gram[:, :first, :, :first] = old
    for p, A in enumerate(whole.matrices):
        for q, answer in enumerate(solved):
            columns = shapes.T @ (A @ answer)
            gram[p, :, q, first:] = columns
            gram[q, first:, p, :] = columns.T
    return gram
