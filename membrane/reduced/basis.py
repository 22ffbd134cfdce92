"""A growing basis of shapes, and the pencil's matrices and residuals in it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from scipy.linalg import cholesky, eigh, solve_triangular

from membrane.cholesky import Solve, factorised
from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil
from membrane.reduced.affine import Affine

ROUNDING = 1e-14
"""Square of a direction's length, over the longest one's, that is rounding."""


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


def directions(basis: Basis, ref: Reference, shapes: Floats) -> tuple[Floats, Floats]:
    """What ``shapes`` (n_free, n) have outside the basis, the longest first.

    returns : orthonormal directions (n_free, m) and their lengths (m,), both in the
        reference's mass
    """
    new = shapes
    for _ in range(2):  # once leaves too much of the basis in what is short
        new = _outside(basis.shapes, new, ref.mass)
    squares, turn = eigh(_symmetric(new.T @ (ref.mass @ new)))
    kept = np.nonzero(squares > ROUNDING * np.max(squares, initial=0.0))[0][::-1]
    lengths = np.sqrt(squares[kept])
    return np.asarray(new @ (turn[:, kept] / lengths)), lengths


def grown(basis: Basis, whole: Affine, ref: Reference, new: Floats) -> Basis:
    """The basis with ``directions`` that it has not yet."""
    shapes = np.hstack([basis.shapes, _orthonormal(basis, ref, new)])
    new = shapes[:, basis.size :]
    forces = [A @ new for A in whole.matrices]
    return Basis(
        shapes,
        np.stack([_bordered(basis.matrices[q], shapes.T @ f) for q, f in enumerate(forces)]),
        _grown_gram(basis.gram, whole, shapes, [ref.inverse(f) for f in forces]),
    )


def turned(basis: Basis, turn: Floats) -> Basis:
    """The basis of the combinations ``turn`` (N, fewer) of its shapes."""
    return Basis(
        basis.shapes @ turn,
        np.einsum("ia,qij,jb->qab", turn, basis.matrices, turn, optimize=True),
        np.einsum("ia,piqj,jb->paqb", turn, basis.gram, turn, optimize=True),
    )


def _orthonormal(basis: Basis, ref: Reference, new: Floats) -> Floats:
    """Directions freed of what rounding has left in them of the basis and of each other."""
    new = _outside(basis.shapes, new, ref.mass)
    lower = cholesky(new.T @ (ref.mass @ new), lower=True)
    return np.asarray(solve_triangular(lower, new.T, lower=True).T)


def _outside(shapes: Floats, others: Floats, mass: Any) -> Floats:
    """What is left of ``others`` without their share of ``shapes``."""
    return np.asarray(others - shapes @ (shapes.T @ (mass @ others)))


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
