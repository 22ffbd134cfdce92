"""A general-purpose hp finite-element library (NGSolve) at its best settings."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import ngsolve as ng
import numpy as np
from netgen.occ import Circle, Glue, OCCGeometry, WorkPlane
from scipy.sparse import csr_array
from scipy.sparse.linalg import LinearOperator, eigsh

from scripts.benchmarks.heads import CENTRE, DENSITY, L_CORNERS, Floats

ng.SetNumThreads(1)


@dataclass(frozen=True)
class Settings:
    """A mesh and an order; layers towards a reentrant corner, each ``factor`` of the last."""

    order: int
    size: float
    layers: int = 0
    factor: float = 0.15

    def __str__(self) -> str:
        corner = f", {self.layers} layers of {self.factor}" if self.layers else ""
        return f"order {self.order}, h {self.size}{corner}"


def solve(head: str, count: int, settings: Settings) -> Floats:
    """The lowest eigenvalues of a head, meshing included."""
    mesh = ng.Mesh(OCCGeometry(_FACES[head](), dim=2).GenerateMesh(maxh=settings.size))
    if settings.layers:
        mesh.RefineHP(settings.layers, settings.factor)
    mesh.Curve(settings.order)
    density = mesh.MaterialCF({"centre": DENSITY}, default=1.0)
    space = ng.H1(mesh, order=settings.order, dirichlet="rim")
    u, v = space.TnT()
    K = ng.BilinearForm(space, symmetric=True, condense=True)
    K += ng.grad(u) * ng.grad(v) * ng.dx
    M = ng.BilinearForm(density * u * v * ng.dx, symmetric=True).Assemble()
    K.Assemble()
    return _lowest(_inverse(K, space), _scipy(M), _free(space), count)


def _lowest(inverse: Any, M: Any, free: Any, count: int) -> Floats:
    """By ARPACK at full accuracy on the free unknowns."""
    right, left = inverse.CreateRowVector(), inverse.CreateColVector()
    b, x = right.FV().NumPy(), left.FV().NumPy()
    b[:] = 0.0

    def apply(part: Floats) -> Floats:
        b[free] = part
        left.data = inverse * right
        return np.asarray(x[free])

    M = M[free][:, free]
    operator = LinearOperator(M.shape, apply, dtype=float)
    start = np.random.default_rng(0).standard_normal(len(free))
    # K itself is not needed by the shift-invert mode
    return np.sort(eigsh(operator, count, M, sigma=0.0, OPinv=operator, v0=start)[0])


def _inverse(K: Any, space: Any) -> Any:
    """Sparse Cholesky of what static condensation leaves, and the way back inside."""
    outer = K.mat.Inverse(space.FreeDofs(True), inverse="sparsecholesky")
    same = ng.IdentityMatrix(space.ndof)
    down, up = same + K.harmonic_extension_trans, same + K.harmonic_extension
    return up @ outer @ down + K.inner_solve


def _scipy(M: Any) -> Any:
    rows, columns, values = (np.array(part) for part in M.mat.COO())
    return csr_array((values, (rows, columns)), shape=(M.mat.height, M.mat.width))


def _free(space: Any) -> Any:
    return np.nonzero(np.array(space.FreeDofs()))[0]


def _disc() -> Any:
    return _rimmed(Circle((0, 0), 1).Face())


def _heavy_centre() -> Any:
    centre = Circle((0, 0), CENTRE).Face()
    ring = _rimmed(Circle((0, 0), 1).Face()) - centre
    centre.faces.name = "centre"
    return Glue([ring, centre])


def _l_shape() -> Any:
    start, *others = L_CORNERS
    plane = WorkPlane().MoveTo(*start)
    for corner in others:
        plane.LineTo(*corner)
    face = _rimmed(plane.Close().Face())
    for vertex in face.vertices:
        if (vertex.p.x, vertex.p.y) == (0.0, 0.0):
            vertex.hpref = 1
    return face


def _rimmed(face: Any) -> Any:
    face.edges.name = "rim"
    return face


_FACES = {"disc": _disc, "L-shape": _l_shape, "heavy centre": _heavy_centre}
