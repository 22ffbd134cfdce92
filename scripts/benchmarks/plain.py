"""A plain scikit-fem script, as that library's documentation would have one write it."""

from __future__ import annotations

from contextlib import redirect_stdout
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

import gmsh
import numpy as np
from scipy.sparse.linalg import eigsh
from skfem import (
    Basis,
    BilinearForm,
    ElementTriP2,
    ElementTriP4,
    MeshTri,
    MeshTri2,
    condense,
)
from skfem import (
    solve as solve_system,
)
from skfem.helpers import dot, grad

from scripts.benchmarks.heads import CENTRE, DENSITY, Floats

ELEMENTS = {2: ElementTriP2, 4: ElementTriP4}


@dataclass(frozen=True)
class Settings:
    """An element degree, 2 or 4, a mesh refined so many times, and its sides' degree, 1 or 2."""

    degree: int
    refinements: int
    sides: int = 1

    def __str__(self) -> str:
        kind = "curved" if self.sides == 2 else "straight"
        return f"P{self.degree}, {self.refinements} refinements, {kind}"


@BilinearForm
def stiffness(u, v, w):  # type: ignore[no-untyped-def]
    return dot(grad(u), grad(v))


@BilinearForm
def mass(u, v, w):  # type: ignore[no-untyped-def]
    return u * v


def solve(head: str, count: int, settings: Settings) -> Floats:
    """The lowest eigenvalues of a head, meshing included."""
    mesh = _MESHES[head](settings.refinements, MeshTri2 if settings.sides == 2 else MeshTri)
    element = ELEMENTS[settings.degree]()
    basis = Basis(mesh, element)
    K, M = stiffness.assemble(basis), mass.assemble(basis)
    if head == "heavy centre":
        middles = np.linalg.norm(mesh.p[:, mesh.t].mean(axis=1), axis=0)
        centre = np.nonzero(middles < CENTRE)[0]
        M += (DENSITY - 1.0) * mass.assemble(Basis(mesh, element, elements=centre))
    system = condense(K, M, D=basis.get_dofs())
    values, _ = solve_system(*system, solver=lambda K, M: eigsh(K, count, M, sigma=0.0))
    return np.sort(values)


def allowed(head: str, degree: int, sides: int) -> bool:
    """Whether degree and sides go together: curved meshes from a file bear no degree above 2."""
    if head == "L-shape":
        return sides == 1
    return head == "disc" or (degree, sides) != (4, 2)


def _disc(refinements: int, kind: Any) -> Any:
    return kind.init_circle(refinements)


def _l_shape(refinements: int, kind: Any) -> Any:
    return MeshTri.init_lshaped().refined(refinements)


def _heavy_centre(refinements: int, kind: Any) -> Any:
    """From gmsh through a file."""
    gmsh.initialize(readConfigFiles=False, interruptible=False)
    gmsh.option.setNumber("General.Terminal", 0)
    head, centre = (gmsh.model.occ.addDisk(0, 0, 0, r, r) for r in (1.0, CENTRE))
    gmsh.model.occ.fragment([(2, head)], [(2, centre)])
    gmsh.model.occ.synchronize()
    gmsh.option.setNumber("Mesh.MeshSizeMax", 0.8 / 2**refinements)
    gmsh.model.mesh.generate(2)
    gmsh.model.mesh.setOrder(1 if kind is MeshTri else 2)
    with TemporaryDirectory() as folder:
        file = str(Path(folder) / "head.msh")
        gmsh.write(file)
        gmsh.finalize()
        with redirect_stdout(None):  # meshio prints an empty line
            return kind.load(file)


_MESHES = {"disc": _disc, "L-shape": _l_shape, "heavy centre": _heavy_centre}
