"""The order of the stages: the one place that knows it."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, replace
from pathlib import Path
from time import perf_counter

import numpy as np
from threadpoolctl import threadpool_limits

from membrane import plugins
from membrane.accuracy import Estimate, estimate, widened
from membrane.coefficients import coefficients
from membrane.errors import SolveError
from membrane.kernel import Kernel
from membrane.mesh import (
    Resolution,
    check_affordable,
    make_mesh,
    region_sizes,
    suited_resolution,
    unknowns,
)
from membrane.modes import coarser_modes, count_up_to, extract
from membrane.modes.extract import Eigensolver
from membrane.nodal import nodal_patterns
from membrane.outline import draw
from membrane.partials import partials
from membrane.pencil import assemble
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.modes import Modes
from membrane.records.pencil import Pencil
from membrane.records.plan import Plan
from membrane.records.spectrum import Spectrum
from membrane.records.study import ModesWanted, Study

Progress = Callable[[str], None]

MESHES = 6
"""How many meshes are tried, each finer, before the accuracy reached is reported as it is."""

ALWAYS_WRITTEN = ("table", "modes_csv", "summary")
"""Products of every run; the study's ``products.write`` names the others. The summary comes
last: it lists the files."""


@dataclass(frozen=True)
class _Solution:
    """A membrane on one mesh with its modes and their estimated error; notes on the outline."""

    membrane: Membrane
    mesh: Mesh
    pencil: Pencil
    modes: Modes
    error: Estimate
    notes: tuple[str, ...] = ()


class _Clock:
    """Seconds by stage, and word to the user of each stage as it starts."""

    def __init__(self, progress: Progress) -> None:
        self.progress = progress
        self.seconds: dict[str, float] = {}

    @contextmanager
    def stage(self, name: str) -> Iterator[None]:
        self.progress(name)
        start = perf_counter()
        try:
            yield
        finally:
            self.seconds[name] = self.seconds.get(name, 0.0) + perf_counter() - start


def run(study: Study, progress: Progress = lambda stage: None) -> Spectrum:
    """Solve a study.

    progress : called with the name of each stage as it starts
    Raises OutlineError, MeshError, SolveError or PluginError, each with its sentence.
    """
    clock = _Clock(progress)
    # one head's matrices are too small to gain from threads: a second one doubles the time
    with threadpool_limits(limits=1, user_api="blas"):
        solution = _solve(study, clock)
        with clock.stage("nodal lines"):
            patterns = nodal_patterns(solution.modes, study.edges)
    rows = partials(solution.modes, solution.error.cents, patterns, study.modes)
    return Spectrum(
        study=study,
        membrane=solution.membrane,
        modes=solution.modes,
        partials=rows,
        complete=solution.modes.complete,
        mesh_facts=_facts(solution),
        timings=clock.seconds,
        notes=solution.notes,
    )


def plan(study: Study) -> Plan:
    """What solving a study would take; the outline is drawn, nothing is meshed.

    Raises OutlineError for shapes that do not fit together, MeshError where the modes wanted
    need too many unknowns.
    """
    with Kernel.session() as kernel:
        outline = draw(kernel, study)
        membrane = coefficients(study, outline)
        resolution = suited_resolution(kernel, outline, membrane, study.modes)
    sizes = region_sizes(outline, membrane, study.modes, resolution.phase)
    check_affordable(outline, sizes, resolution.degree)
    count = unknowns(outline, sizes, resolution.degree)
    return Plan(outline.area, resolution.degree, count, outline.notes)


def write(spectrum: Spectrum, folder: Path) -> None:
    """Write a spectrum's products into an existing folder."""
    wanted = spectrum.study.products
    for name in dict.fromkeys((*wanted.write, *ALWAYS_WRITTEN)):
        product = plugins.load("product", name)
        product.write(spectrum, folder, wanted.options.get(name) or product.Options())


def _solve(study: Study, clock: _Clock) -> _Solution:
    """Mesh and solve, finer each time, until the estimated error is within the wanted one."""
    solver = plugins.load("eigensolver", study.modes.eigensolver).solve
    with Kernel.session() as kernel:
        with clock.stage("outline"):
            outline = draw(kernel, study)
            membrane = coefficients(study, outline)
            resolution = suited_resolution(kernel, outline, membrane, study.modes)

        def solved(resolution: Resolution) -> _Solution:
            with clock.stage("mesh"):
                mesh = make_mesh(kernel, outline, membrane, study.modes, resolution)
            return _solve_on(mesh, membrane, resolution, study.modes, solver, clock)

        if any(function.notes for function in study.functions):
            solution = _across(solved, resolution, study.modes.accuracy)
        else:
            solution = _until_met(solved, resolution)
    return replace(solution, notes=outline.notes)


def _until_met(solved: Callable[[Resolution], _Solution], resolution: Resolution) -> _Solution:
    """The first solution that is accurate enough, on a finer mesh each time."""
    for _ in range(MESHES - 1):
        solution = solved(resolution)
        if solution.error.excess <= 1.0:
            return solution
        resolution = resolution.finer(solution.error.excess)
    return solved(resolution)


def _across(
    solved: Callable[[Resolution], _Solution], resolution: Resolution, wanted: float
) -> _Solution:
    """The solution on the second of two meshes, where a coefficient may break across triangles.

    Finer ones would hardly help; how far the two are apart tells how far off both are.
    """
    first = solved(resolution)
    second = solved(resolution.finer(max(first.error.excess, 1.0)))
    return replace(second, error=widened(second.error, second.modes, first.modes, wanted))


def _solve_on(
    mesh: Mesh,
    membrane: Membrane,
    resolution: Resolution,
    wanted: ModesWanted,
    solver: Eigensolver,
    clock: _Clock,
) -> _Solution:
    with clock.stage("assembly"):
        fine = assemble(membrane, mesh, resolution.degree)
        coarse = assemble(membrane, mesh, resolution.coarser_degree)
    with clock.stage("modes"):
        count = wanted_count(fine, wanted)
        modes = extract(fine, count, solver, wanted.accuracy)
        check = coarser_modes(coarse, modes)
    return _Solution(membrane, mesh, fine, modes, estimate(modes, check, wanted.accuracy))


def wanted_count(pencil: Pencil, wanted: ModesWanted) -> int:
    """How many modes are wanted. Raises SolveError where none lies below ``up_to``."""
    if wanted.up_to is None:
        return wanted.count
    count = count_up_to(pencil, wanted.up_to)
    if count == 0:
        raise SolveError(f"no mode lies below {wanted.up_to:g} Hz; raise modes.up_to.")
    return count


def _facts(solution: _Solution) -> dict[str, float]:
    return {
        "triangles": solution.mesh.size,
        "degree": solution.modes.space.degree,
        "geometry_order": solution.mesh.order,
        "unknowns": len(solution.modes.space.free),
        "accuracy_met": bool(solution.error.excess <= 1.0),
        "worst_estimate_cents": float(np.max(solution.error.cents)),
    }
