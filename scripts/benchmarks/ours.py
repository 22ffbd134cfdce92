"""This project's own stages at a chosen resolution."""

from __future__ import annotations

from typing import Any

from membrane import cholesky
from membrane.coefficients import coefficients
from membrane.eigensolvers import shift_invert
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh
from membrane.modes import extract
from membrane.outline import draw
from membrane.pencil import assemble
from membrane.pipeline import run as run_study
from membrane.records.arrays import Floats
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.modes import Modes
from membrane.records.pencil import Pencil
from membrane.study import study_from

FINE = 1e-6
"""Cents that are asked of a cluster: only truly equal eigenvalues make one."""


def meshed(keys: dict[str, Any], count: int, resolution: Resolution) -> tuple[Membrane, Mesh]:
    """A study's mesh for so many modes."""
    study = study_from({**keys, "modes": {"count": count}})
    with Kernel.session() as kernel:
        outline = draw(kernel, study)
        membrane = coefficients(study, outline)
        return membrane, make_mesh(kernel, outline, membrane, study.modes, resolution)


def assembled(keys: dict[str, Any], count: int, resolution: Resolution) -> Pencil:
    """A study's matrices; K and M are summed up already."""
    membrane, mesh = meshed(keys, count, resolution)
    pencil = assemble(membrane, mesh, resolution.degree)
    summed_up(pencil)
    return pencil


def summed_up(pencil: Pencil) -> tuple[Any, Any]:
    """K and M, which a pencil makes when they are first asked for."""
    return pencil.K, pencil.M


def modes(pencil: Pencil, count: int) -> Modes:
    """The modes with their closed count; nothing is left from an earlier run."""
    cholesky._last.clear()
    found = extract(pencil, count, shift_invert.solve, FINE)
    assert found.complete
    return found


def solve(keys: dict[str, Any], count: int, resolution: Resolution) -> Floats:
    """The lowest eigenvalues of a study, from its outline to the closed count."""
    pencil = assembled(keys, count, resolution)
    return modes(pencil, count).eigenvalues[:count]


def run(keys: dict[str, Any], count: int, cents: float) -> Floats:
    """The lowest eigenvalues by the command's own choices for a wanted accuracy.

    With its check by a second solve and its nodal lines, which nobody else computes here.
    """
    cholesky._last.clear()
    wanted = {"count": count, "accuracy": cents}
    return run_study(study_from({**keys, "modes": wanted})).modes.eigenvalues[:count]
