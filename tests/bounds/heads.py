"""Random heads whose spectra are known: rectangles whose modes are products."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from hypothesis import strategies as st
from numpy.polynomial.legendre import legder, legvander
from scipy.linalg import eigh, null_space
from scipy.special import roots_legendre

from membrane.modes import extract
from membrane.pencil import assemble
from membrane.plugins import load
from membrane.records.arrays import Floats
from membrane.records.membrane import Membrane
from membrane.records.modes import Modes
from tests import zoo


@dataclass(frozen=True)
class Rectangle:
    """width x height, principal tensions along x and y, and (support, stiffness) of each side."""

    width: float
    height: float
    tension: tuple[float, float]
    density: float
    bedding: float
    sides: tuple[tuple[str, float], ...]

    @property
    def keys(self) -> dict[str, Any]:
        """The study."""
        along, across = self.tension
        head = {"areal_density": self.density, "bedding": self.bedding}
        names = ("left", "right", "bottom", "top")
        return {
            "outline": {"shape": "rectangle", "width": self.width, "height": self.height},
            "head": {**head, "tension": {"along": along, "across": across, "angle": 0.0}},
            "edges": {
                name: {"support": kind, **({"stiffness": b} if kind == "elastic" else {})}
                for name, (kind, b) in zip(names, self.sides, strict=True)
            },
        }

    def exact(self, count: int) -> Floats:
        """Sums of the strings' eigenvalues in x and in y."""
        x = string(self.width, self.tension[0], self.sides[:2])
        y = string(self.height, self.tension[1], self.sides[2:])
        sums = np.sort(np.add.outer(x, y).ravel())
        return (sums[:count] + self.bedding) / self.density


def string(length: float, tension: float, ends: tuple[tuple[str, float], ...]) -> Floats:
    """Eigenvalues of -T u'' = lambda u, by 44 Legendre polynomials: to 1e-11 for the first 20."""
    x, weights = roots_legendre(60)
    p = legvander(x, 43)
    slopes = np.stack([np.polynomial.legendre.legval(x, legder(c)) for c in np.eye(44)], axis=1)
    at_ends = legvander(np.array([-1.0, 1.0]), 43)
    K = 2 * tension / length * (slopes.T * weights) @ slopes
    M = length / 2 * (p.T * weights) @ p
    held = []
    for row, (kind, stiffness) in zip(at_ends, ends, strict=True):
        K = K + (np.outer(row, row) * stiffness if kind == "elastic" else 0.0)
        held += [row] if kind == "fixed" else []
    basis = null_space(np.array(held)) if held else np.eye(44)
    return np.asarray(eigh(basis.T @ K @ basis, basis.T @ M @ basis, eigvals_only=True)[:20])


def numbers(low: float, high: float) -> st.SearchStrategy[float]:
    return st.integers(round(100 * low), round(100 * high)).map(lambda n: n / 100)


SIDES = st.one_of(
    st.just(("fixed", 0.0)),
    st.just(("free", 0.0)),
    st.tuples(st.just("elastic"), numbers(0.1, 50.0)),
)


@st.composite
def rectangles(draw: st.DrawFn) -> Rectangle:
    return Rectangle(
        width=draw(numbers(0.5, 2.0)),
        height=draw(numbers(0.5, 2.0)),
        tension=(draw(numbers(0.3, 3.0)), draw(numbers(0.3, 3.0))),
        density=draw(numbers(0.3, 3.0)),
        bedding=draw(st.one_of(st.just(0.0), numbers(0.1, 40.0))),
        sides=tuple(draw(SIDES) for _ in range(4)),
    )


def solved(
    keys: dict[str, Any], count: int = 12, degree: int = 6, **resolution: float
) -> tuple[Membrane, Modes]:
    """A study's lowest modes on one mesh."""
    here = zoo.prepared(keys, degree, **resolution, fans=False)
    pencil = assemble(here.membrane, here.mesh, degree)
    solver = load("eigensolver", "shift_invert").solve
    return here.membrane, extract(pencil, count, solver, 0.01)
