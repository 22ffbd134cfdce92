"""A sweep of three numbers by the reduced model, against a loop over its points.

The loop keeps the mesh, the matrices' pattern and the factorisation's ordering, and starts
each solve from the last one's modes. It is timed on a few points and scaled.
"""

from __future__ import annotations

import sys
from collections.abc import Callable
from time import process_time
from typing import Any

import numpy as np
from cvxopt import cholmod, matrix, spmatrix
from scipy.sparse import tril
from scipy.sparse.linalg import LinearOperator, eigsh
from threadpoolctl import threadpool_limits

from membrane.coefficients import coefficients
from membrane.eigensolvers import shift_invert
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh
from membrane.modes import extract
from membrane.outline import draw
from membrane.pencil import assemble
from membrane.records.pencil import Pencil
from membrane.reduced import Answers, ReducedModel, Solved, prepare
from membrane.study import study_from

DEGREE, COUNT, ACCURACY = 8, 20, 0.1
PHASES = {7_000: (1.65, 31.0), 28_000: (0.83, 100.0)}
"""About so many unknowns: edge lengths times wave numbers, and the least gain."""

POINTS, LOOPED, SOLVED_AGAIN = 10_000, 10, 200
QUICK_POINTS, QUICK_AGAIN = 500, 20
SEED = 1
TITLE = "random points of three numbers, 20 modes to 0.1 cent"

STUDY = {
    "outline": {"shape": "disc", "diameter": 2.0},
    "head": {"areal_density": 1.0, "tension": {"along": 1.0, "across": 1.0}},
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.9, "areal_density": 1.0}],
    "edges": {"rim": {"support": "elastic", "stiffness": 100.0}},
}
AXES = {
    "patches.paste.areal_density": (0.5, 6.0),
    "head.tension.across": (0.7, 1.4),
    "edges.rim.stiffness": (10.0, 1000.0),
}
"""Study key -> lowest and highest value; random points are even in the logarithm."""


def measure(quick: bool) -> dict[str, list[dict[str, Any]]]:
    """One row for each size; a quick run has the smaller one and few points."""
    sizes = list(PHASES)[:1] if quick else list(PHASES)
    counts = (QUICK_POINTS, QUICK_AGAIN) if quick else (POINTS, SOLVED_AGAIN)
    # by CPU time a second thread would count, and here it does not help
    with threadpool_limits(limits=1, user_api="blas"):
        return {TITLE: [_row(size, *counts) for size in sizes]}


def _row(size: int, count: int, again: int) -> dict[str, Any]:
    phase, bar = PHASES[size]
    pencil = _pencil(phase)
    points = _points(count)
    prepared, made = _timed(lambda: prepare(pencil, list(AXES), points, COUNT, ACCURACY, _solve))
    answers, asked = _timed(lambda: prepared.answers(points))
    unmet, repaired = _timed(lambda: [_at(pencil, p) for p in points[~answers.met]])
    _, arpack = _timed(lambda: _loop(pencil, points[:LOOPED]))
    _, band = _timed(lambda: [_at(pencil, p, _bare) for p in points[:LOOPED]])
    scale = count / LOOPED
    misses, worst = _compared(pencil, prepared, answers, points, again)
    return {
        "unknowns": pencil.M.shape[0],
        "points": count,
        "ARPACK loop (scaled), s": scale * arpack,
        "own solver's loop (scaled), s": scale * band,
        "model, s": made,
        "answers, s": asked,
        "full solves": prepared.solves + len(unmet),
        "shapes": prepared.size,
        "gain": scale * arpack / (made + asked + repaired),
        "gain over own solver": scale * band / (made + asked + repaired),
        "bar": bar,
        "worst estimate, cents": float(answers.cents[answers.met].max()),
        "solved again": again,
        "worst error, cents": worst,
        "outside estimate": misses,
    }


def _pencil(phase: float) -> Pencil:
    study = study_from(STUDY)
    with Kernel.session() as kernel:
        outline = draw(kernel, study)
        membrane = coefficients(study, outline)
        mesh = make_mesh(kernel, outline, membrane, study.modes, Resolution(DEGREE, phase, 1e-8))
    return assemble(membrane, mesh, DEGREE)


def _points(count: int) -> Any:
    low, high = np.log(np.array(list(AXES.values()))).T
    return np.exp(low + (high - low) * np.random.default_rng(SEED).random((count, len(AXES))))


def _timed(work: Callable[[], Any]) -> tuple[Any, float]:
    start = process_time()
    return work(), process_time() - start


def _solve(pencil: Pencil, count: int) -> Solved:
    modes = extract(pencil, count, shift_invert.solve, ACCURACY)
    free = modes.vectors[pencil.space.free]
    return Solved(modes.eigenvalues, free, np.zeros(len(modes.eigenvalues)))


def _bare(pencil: Pencil, count: int) -> Solved:
    """The modes alone, not counted; the factorisation's ordering is kept from the last one."""
    values, vectors = shift_invert.solve(pencil.K, pencil.M, count, 0.0)
    return Solved(values, vectors, np.zeros(count))


def _at(pencil: Pencil, point: Any, solve: Callable[..., Solved] = _solve) -> Any:
    return solve(pencil.at(dict(zip(AXES, point, strict=True))), COUNT).eigenvalues[:COUNT]


def _compared(
    pencil: Pencil, model: ReducedModel, answers: Answers, points: Any, again: int
) -> tuple[int, float]:
    """How many modes of full solves lie outside their estimate, and the worst error, cents."""
    chosen = np.random.default_rng(SEED).choice(len(points), again, replace=False)
    exact = np.array([_at(pencil, points[i]) for i in chosen])
    off = 600.0 * np.log2(answers.eigenvalues[chosen] / exact)
    outside = (off < -1e-6) | (off > answers.cents[chosen] + 1e-6)
    return int(outside.sum()), float(off[answers.met[chosen]].max())


def _loop(pencil: Pencil, points: Any) -> None:
    inverse, start = _Ordered(), None
    for point in points:
        at = pencil.at(dict(zip(AXES, point, strict=True)))
        solve = inverse.factorised(at.K)
        operator = LinearOperator(at.K.shape, matvec=solve, dtype=float)
        _, vectors = eigsh(at.K, COUNT, at.M, sigma=0.0, OPinv=operator, v0=start, tol=1e-8)
        start = vectors.sum(axis=1)


class _Ordered:
    """CHOLMOD with one ordering for all matrices of a pattern."""

    def __init__(self) -> None:
        self.factor: Any = None

    def factorised(self, A: Any) -> Callable[[Any], Any]:
        low = tril(A).tocoo()
        rows, columns = (matrix(index.astype(np.int64)) for index in (low.row, low.col))
        lower = spmatrix(matrix(low.data), rows, columns, A.shape)
        if self.factor is None:
            cholmod.options["supernodal"] = 2
            self.factor = cholmod.symbolic(lower)
        cholmod.numeric(lower, self.factor)
        return self._solve

    def _solve(self, b: Any) -> Any:
        x = matrix(b)
        cholmod.solve(self.factor, x)
        return np.array(x).ravel()


def main() -> None:
    """Print the rows; ``--quick`` for a short run."""
    for row in measure("--quick" in sys.argv[1:])[TITLE]:
        for name, value in row.items():
            print(f"{name:>30}  {value:.6g}")
        print()


if __name__ == "__main__":
    main()
