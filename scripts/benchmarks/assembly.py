"""The matrices K and M, against scikit-fem's own loop over pairs of shapes on one basis."""

from __future__ import annotations

from copy import copy
from functools import partial

import numpy as np
from skfem import BilinearForm, CellBasis
from skfem.helpers import dot, grad

from membrane.mesh import Resolution
from membrane.pencil.element import element
from membrane.pencil.integrate import integrated
from membrane.pencil.space import Discretisation, RegionBasis, build_space
from membrane.records.mesh import Mesh
from scripts.benchmarks import ours
from scripts.benchmarks.heads import HEADS
from scripts.benchmarks.tables import Row
from scripts.benchmarks.timing import alternating

DEGREES = {4: 5.0, 8: 12.0, 12: ""}
"""The least number of times that ours must be faster."""

UNKNOWNS = (1_000, 10_000, 50_000)
"""About how many there are."""


def stiffness(u, v, w):  # type: ignore[no-untyped-def]
    return dot(grad(u), grad(v))


def mass(u, v, w):  # type: ignore[no-untyped-def]
    return u * v


def measure(quick: bool) -> dict[str, list[Row]]:
    """One row for each head, degree and size: curved and straight triangles."""
    sizes = UNKNOWNS[: 1 if quick else None]
    rows = [
        _row(name, degree, unknowns, quick)
        for name in ("disc", "L-shape")
        for degree in DEGREES
        for unknowns in sizes
    ]
    return {"assembly": rows}


def _row(name: str, degree: int, unknowns: int, quick: bool) -> Row:
    # about 30 modes lie below the wave number k = 10, and n = A k^2 / phase^2 degree^2
    phase = 18.0 * degree / np.sqrt(unknowns)
    _, mesh = ours.meshed(HEADS[name]().keys, 20, Resolution(degree, float(phase), 1e-6))
    ready = build_space(mesh, degree, ())
    seconds = alternating(
        {
            "ours": partial(_ours, ready, ready.on_regions(mesh.region_names)),
            "theirs": partial(_theirs, _basis(ready, mesh)),
            "ours, basis": partial(_ours_from_mesh, mesh, degree),
            "theirs, basis": partial(_theirs_from_mesh, mesh, degree),
        },
        rounds=3 if quick else 7,
        budget=5.0 if quick else 20.0,
    )
    return {
        "head": name,
        "degree": degree,
        "triangles": mesh.size,
        "unknowns": ready.space.dofs,
        "ours, s": seconds["ours"],
        "BilinearForm, s": seconds["theirs"],
        "times": seconds["theirs"] / seconds["ours"],
        "at least": DEGREES[degree],
        "times, basis included": seconds["theirs, basis"] / seconds["ours, basis"],
    }


def _ours(ready: Discretisation, basis: RegionBasis) -> None:
    basis = copy(basis)  # which has no pattern yet
    dofs = np.arange(ready.space.dofs)
    for form in (stiffness, mass):
        integrated(form, basis, dofs, even=True)


def _ours_from_mesh(mesh: Mesh, degree: int) -> None:
    ready = build_space(mesh, degree, ())
    _ours(ready, ready.on_regions(mesh.region_names))


def _theirs(basis: CellBasis) -> None:
    for form in (stiffness, mass):
        BilinearForm(form).assemble(basis)


def _theirs_from_mesh(mesh: Mesh, degree: int) -> None:
    _theirs(_basis(build_space(mesh, degree, ()), mesh))


def _basis(ready: Discretisation, mesh: Mesh) -> CellBasis:
    """Ours, but with the shapes mapped, as BilinearForm needs them."""
    rule = ready.on_regions(mesh.region_names)
    return CellBasis(
        ready.topology,
        element(ready.space.degree),
        ready.mapping,
        quadrature=(rule.X, rule.W),
        dofs=ready.dofs,
    )
