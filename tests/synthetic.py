"""Modes made by hand: known functions interpolated on a mesh."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np

from membrane.pencil import build_space
from membrane.records.arrays import Floats
from membrane.records.mesh import Mesh
from membrane.records.modes import Modes

Function = Callable[[Floats, Floats], Floats]


def modes_of(
    mesh: Mesh, degree: int, functions: Sequence[Function], fixed: tuple[str, ...] = ()
) -> Modes:
    """The functions f(x, y) as modes with eigenvalues 1, 2, ...; zero on the fixed edges."""
    space = build_space(mesh, degree, fixed).space
    vectors = np.stack([f(*space.locations) for f in functions], axis=1)
    held = np.setdiff1d(np.arange(space.dofs), space.free)
    vectors[held] = 0.0
    numbers = np.arange(1, len(functions) + 1)
    return Modes(space, numbers.astype(float), vectors, numbers, complete=True)
