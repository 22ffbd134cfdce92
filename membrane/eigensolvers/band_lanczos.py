"""Band Lanczos: the largest eigenvalues of an operator that is symmetric in the M product.

Lanczos from several start vectors at once, one vector at a time (Ruhe, Math. Comp. 33 (1979)
680, from memory): as many copies of a multiple eigenvalue are found by construction.
"""

from __future__ import annotations

from typing import Any

import numpy as np

from membrane.cholesky import Solve
from membrane.records.arrays import Floats

CONVERGED = 1e-8
"""Residual of a vector over its eigenvalue; the error of the eigenvalue is of its square."""

VANISHED = 1e-12
"""Length of a new direction, over the largest eigenvalue, from which it is only rounding."""

CLEAN, QUIET = 2, 2
"""Rounds that are made orthogonal to the whole basis, and rounds between that are not."""

AFTER = 12
"""Vectors beyond three times the wanted ones after which the residuals are first looked at:
discs, squares and L-shapes need from 8 to 18 of them for 20 to 60 modes."""

START_SEED = 20240229


def starts(count: int) -> int:
    """How many start vectors for ``count`` eigenvalues; each costs some 7 solves more.

    The pairs of discs and squares need 2. From the 30th on, squares and triangles have
    eigenvalues of 3 and 4 copies, of which rounding alone would find the last ones late.
    """
    return 2 + count // 30


def largest(inverse: Solve, M: Any, count: int, seed: int = START_SEED) -> tuple[Floats, Floats]:
    """The ``count`` largest eigenvalues of A = inverse M, A symmetric in the product x M y.

    returns : eigenvalues (count,) in falling order and M-orthonormal vectors (n, count)

    The basis is kept orthogonal in full and never restarted: a discrete Laplacian takes only
    some three times ``count`` vectors.
    """
    basis = _Basis(inverse, M, count, seed)
    patience = 3 * count + AFTER
    while True:
        patience = min(patience, basis.n)
        while basis.applied < patience:
            basis.extend()
        values, mix, residuals = basis.ritz(count)
        if basis.applied == basis.n or np.all(residuals <= CONVERGED * values):
            return values, basis.V[:, : basis.applied] @ mix
        patience += max(4, count // 12)


class _Basis:
    """A Krylov space, M-orthonormal, and the operator projected on it.

    V, MV : (n, room) the basis in the first ``size`` columns, and its products with M
    T : (room, room), T[i, j] = V[i] M A V[j] for the first ``applied`` columns j
    """

    def __init__(self, inverse: Solve, M: Any, count: int, seed: int) -> None:
        self.inverse, self.M, self.random = inverse, M, np.random.default_rng(seed)
        self.n, self.size, self.applied = M.shape[0], 0, 0
        self.starts = min(starts(count), self.n)
        self.largest = 0.0
        room = min(self.n, 4 * count + 20)
        self.V, self.MV, self.T = _empty(self.n, room), _empty(self.n, room), _empty(room, room)
        for _ in range(self.starts):
            # once through the operator: a raw random vector is rough, and wastes a step
            self._append(self._split(inverse(M @ self.random.standard_normal(self.n)), 0)[0])

    def extend(self) -> None:
        """Apply the operator to the next vector, and add what is new in the result."""
        if self.size == len(self.T) < self.n:
            self._more_room()
        j = self.applied
        new, shares = self._split(self.inverse(self.MV[:, j]), max(0, j - self.starts))
        self.largest = max(self.largest, float(shares[j]))
        if self.size < self.n:
            shares = np.append(shares, self._append(new))
        self.T[: len(shares), j] = shares
        self.applied += 1

    def ritz(self, count: int) -> tuple[Floats, Floats, Floats]:
        """The largest values of T, their vectors in the basis, and their residuals."""
        done = self.applied
        values, mix = np.linalg.eigh(self.T[:done, :done], UPLO="U")
        values, mix = values[: -count - 1 : -1], mix[:, : -count - 1 : -1]
        return values, mix, np.linalg.norm(self.T[done : self.size, :done] @ mix, axis=0)

    def _append(self, new: Floats) -> float:
        """Add a direction orthogonal to the basis; returns its length, 0 where it vanished."""
        Mnew = self.M @ new
        norm = length = float(np.sqrt(new @ Mnew))
        if length <= VANISHED * self.largest:
            # the space holds whole invariant subspaces: only what is made up adds to it
            new, _ = self._split(self.random.standard_normal(self.n), 0)
            Mnew, length = self.M @ new, 0.0
            norm = float(np.sqrt(new @ Mnew))
        self.V[:, self.size], self.MV[:, self.size] = new / norm, Mnew / norm
        self.size += 1
        return length

    def _split(self, w: Floats, first: int) -> tuple[Floats, Floats]:
        """w without its shares along the basis, and they.

        Nearly all of w lies along the vectors from ``first`` on. The others' share is rounding,
        which grows with each round of the starts by the ratio of the largest eigenvalue to the
        smallest wanted: it may stay for two rounds, and not for more.
        """
        shares = np.zeros(self.size)
        quiet = first // self.starts % (CLEAN + QUIET) >= CLEAN
        for start in (first, first if quiet else 0):
            part = slice(start, self.size)
            share = self.MV[:, part].T @ w
            w = w - self.V[:, part] @ share
            shares[part] += share
        return w, shares

    def _more_room(self) -> None:
        room = min(self.n, 2 * self.size)
        old = self.V, self.MV, self.T
        self.V, self.MV, self.T = _empty(self.n, room), _empty(self.n, room), _empty(room, room)
        for before, now in zip(old, (self.V, self.MV, self.T), strict=True):
            now[: before.shape[0], : before.shape[1]] = before


def _empty(rows: int, columns: int) -> Floats:
    return np.zeros((rows, columns), order="F")
