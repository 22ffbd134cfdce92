"""A matrix whose bulk dofs are eliminated: what is left of it, and solves with the whole."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from membrane.condensation import Condensation
from membrane.records.arrays import Floats

Solve = Callable[[Floats], Floats]


@dataclass(frozen=True)
class Condensed:
    """The numbers of one matrix A = [[A_oo, A_oi], [A_io, A_ii]], i the eliminated dofs.

    low : the lower triangle of A_oo - A_oi A_ii^-1 A_io at the places ``plan.low``
    backs : for each batch the blocks of [A_ii^-1, -A_ii^-1 A_io], (n, m, m + w)
    negative : how many eigenvalues of A_ii are negative
    """

    plan: Condensation
    low: Floats
    backs: tuple[Floats, ...]
    negative: int

    def solver(self, solve_kept: Solve) -> Solve:
        """A function that solves A x = b, from one that does for what is left."""
        kept = self.plan.kept
        batches = [
            (batch.inner, batch.outer.ravel(), np.hstack([batch.inner, batch.outer]), back)
            for batch, back in zip(self.plan.batches, self.backs, strict=True)
        ]

        def solve(b: Floats) -> Floats:
            if b.ndim == 2:
                return np.column_stack([solve(column) for column in b.T])
            x = np.append(b, 0.0)
            for inner, outer, _, back in batches:
                passed = x[inner][:, None, :] @ back[:, :, inner.shape[1] :]
                x += np.bincount(outer, passed.ravel(), len(x))
            x[kept] = solve_kept(x[kept])
            for inner, _, around, back in batches:
                x[inner] = (back @ x[around][:, :, None])[:, :, 0]
            return x[:-1]

        return solve


def condensed(plan: Condensation, data: Floats) -> Condensed:
    """The matrix of a plan's pattern with these entries.

    Raises numpy's LinAlgError where a block to be eliminated is singular.
    """
    low, padded = data[plan.low], np.append(data, 0.0)
    backs, negative = [], 0
    for batch in plan.batches:
        own, mixed = data[batch.own], padded[batch.mixed]
        negative += _negative(own)
        inverse = np.linalg.inv(own)
        follow = inverse @ -mixed
        backs.append(np.concatenate([inverse, follow], axis=2))
        i, j = np.tril_indices(mixed.shape[2])
        taken = (mixed.transpose(0, 2, 1) @ follow)[:, i, j]
        low += np.bincount(batch.pairs.ravel(), taken.ravel(), len(low) + 1)[:-1]
    return Condensed(plan, low, tuple(backs), negative)


def _negative(blocks: Floats) -> int:
    """How many eigenvalues of symmetric blocks (n, m, m) are negative."""
    try:
        np.linalg.cholesky(blocks)  # nearly always: far faster than the eigenvalues
    except np.linalg.LinAlgError:
        return int((np.linalg.eigvalsh(blocks) < 0.0).sum())
    return 0
