"""Block Lanczos: the largest eigenvalues of an operator that is symmetric in the M product."""

from __future__ import annotations

from typing import Any

import numpy as np

from membrane.cholesky import Solve
from membrane.records.arrays import Floats

BLOCK = 4
"""Vectors worked on at once: eigenvalues up to this multiplicity are found by construction."""

CONVERGED = 1e-7
"""Residual of a vector over its eigenvalue; the error of the eigenvalue is of its square."""

VANISHED = 1e-12
"""Length of a new direction, over the largest eigenvalue, from which it is only rounding."""

ILL_CONDITIONED = 1e-6
"""Least over largest squared length in a block that must be made orthogonal once more."""

START_SEED = 20240229


def largest(inverse: Solve, M: Any, count: int, seed: int = START_SEED) -> tuple[Floats, Floats]:
    """The ``count`` largest eigenvalues of A = inverse M, A symmetric in the product x M y.

    returns : eigenvalues (count,) in falling order and M-orthonormal vectors (n, count)

    The basis is kept orthogonal in full and never restarted: for the few times ``count``
    vectors that a discrete Laplacian takes, that is cheaper than more solves.
    """
    basis = _Basis(inverse, M, count, seed)
    patience = 2 * count + 2 * BLOCK
    while True:
        basis.extend()
        if basis.size < patience and not basis.full:
            continue
        values, mix, residuals = basis.ritz(count)
        if basis.full or np.all(residuals <= CONVERGED * values):
            return values, basis.vectors @ mix
        patience = basis.size + max(2 * BLOCK, count // 8)


class _Basis:
    """The Krylov space, M-orthonormal, with the operator projected on it.

    V, MV : (n, size) the basis and its products with M, in storage that grows
    T : (size, size), V' M A V
    next : (n, BLOCK), what the operator made of the last block, orthogonal to the basis
    """

    def __init__(self, inverse: Solve, M: Any, count: int, seed: int) -> None:
        self.inverse, self.M, self.random = inverse, M, np.random.default_rng(seed)
        self.n, self.size = M.shape[0], 0
        self.block = min(BLOCK, self.n)
        room = min(4 * count + 10 * BLOCK, self.n + BLOCK)
        self.V, self.MV = (np.empty((self.n, room), order="F") for _ in range(2))
        self.T = np.zeros((room, room))
        self.next = inverse(M @ self.random.standard_normal((self.n, self.block)))

    @property
    def vectors(self) -> Floats:
        return self.V[:, : self.size]

    @property
    def full(self) -> bool:
        """Whether no further block fits: the space is then all there is, or nearly."""
        return bool(self.size + self.block > self.n)

    def extend(self) -> None:
        """Add the next block and apply the operator to it."""
        self._make_room()
        new = slice(self.size, self.size + self.block)
        self.V[:, new], self.MV[:, new] = self._orthonormal(self.next)
        before, self.size = max(0, self.size - self.block), new.stop
        W = self.inverse(self.MV[:, new])
        H = np.zeros((self.size, self.block))
        for start in (before, 0):  # the last two blocks hold nearly all; then rounding is left
            part = slice(start, self.size)
            share = self.MV[:, part].T @ W
            W -= self.V[:, part] @ share
            H[part] += share
        self.T[: self.size, new] = H
        self.T[new, : self.size] = H.T
        self.next = W

    def ritz(self, count: int) -> tuple[Floats, Floats, Floats]:
        """The largest values of T, their vectors in the basis, and their residuals."""
        T = self.T[: self.size, : self.size]
        values, mix = np.linalg.eigh((T + T.T) / 2)
        values, mix = values[: -count - 1 : -1], mix[:, : -count - 1 : -1]
        last = self.next @ mix[-self.block :]
        return values, mix, np.sqrt(np.einsum("ij,ij->j", last, self.M @ last))

    def _orthonormal(self, W: Floats) -> tuple[Floats, Floats]:
        """An M-orthonormal basis of the span of W, and M times it.

        Directions that vanish are made up: the space then holds whole invariant subspaces,
        and only what is new can add to it.
        """
        least = (VANISHED * np.abs(self.T[: self.size, : self.size]).max(initial=0.0)) ** 2
        while True:
            MW = self.M @ W
            squares, turn = np.linalg.eigh(W.T @ MW)
            gone = squares <= least
            length = np.sqrt(np.where(gone, 1.0, squares))
            W, MW = (W @ turn) / length, (MW @ turn) / length
            if not gone.any() and squares[0] > ILL_CONDITIONED * squares[-1]:
                return W, MW
            W[:, gone] = self._made_up(int(gone.sum()))
            least = 0.0

    def _made_up(self, count: int) -> Floats:
        """(n, count) random vectors, orthogonal to the basis."""
        W = self.random.standard_normal((self.n, count))
        for _ in range(2):
            W -= self.vectors @ (self.MV[:, : self.size].T @ W)
        return W

    def _make_room(self) -> None:
        room = self.T.shape[0]
        if self.size + self.block <= room:
            return
        V, MV, T = self.V, self.MV, self.T
        self.V, self.MV = (np.empty((self.n, 2 * room), order="F") for _ in range(2))
        self.T = np.zeros((2 * room, 2 * room))
        self.V[:, :room], self.MV[:, :room], self.T[:room, :room] = V, MV, T
