"""The order of the stages: the one place that knows it."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, replace
from pathlib import Path
from time import perf_counter

from threadpoolctl import threadpool_limits

from membrane import plugins
from membrane.accuracy import estimate, widened
from membrane.bounds import SPARE, bracketed, check_provable
from membrane.coefficients import coefficients
from membrane.errors import BracketError, MeshError, SolveError
from membrane.kernel import Kernel
from membrane.mesh import (
    Resolution,
    check_affordable,
    make_mesh,
    region_sizes,
    suited_resolution,
    unknowns,
)
from membrane.modes import coarser_modes, count_up_to, extract, lowest
from membrane.modes.extract import Eigensolver
from membrane.nodal import nodal_patterns
from membrane.outline import draw
from membrane.partials import partials
from membrane.pencil import assemble
from membrane.records.bracket import GUARANTEED, Bracket
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

WORTH = 0.7
"""Share of a bracket's width that a finer mesh may leave: above it, rounding is what is left."""

ALWAYS_WRITTEN = ("table", "modes_csv", "summary")
"""Products of every run; the study's ``products.write`` names the others. The summary comes
last: it lists the files."""


@dataclass(frozen=True)
class _Solution:
    """A membrane on one mesh with its modes and their brackets; notes for the user."""

    membrane: Membrane
    mesh: Mesh
    pencil: Pencil
    modes: Modes
    bracket: Bracket
    excess: float
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
    rows = partials(solution.modes, solution.bracket, patterns, study.modes)
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
    """Mesh and solve, finer each time, until every bracket is as narrow as wanted."""
    solver = plugins.load("eigensolver", study.modes.eigensolver).solve
    with Kernel.session() as kernel:
        with clock.stage("outline"):
            outline = draw(kernel, study)
            membrane = coefficients(study, outline)
            resolution = suited_resolution(kernel, outline, membrane, study.modes)

        def meshed(resolution: Resolution, fans: bool) -> Mesh:
            with clock.stage("mesh"):
                return make_mesh(kernel, outline, membrane, study.modes, resolution, fans=fans)

        def solved(resolution: Resolution) -> _Solution:
            return _solve_on(meshed, membrane, resolution, study.modes, solver, clock)

        if any(function.notes for function in study.functions):
            best = _across(solved, resolution, study.modes.accuracy)
        else:
            best = _until_met(solved, resolution)
    return replace(best, notes=(*outline.notes, *best.notes))


def _until_met(solved: Callable[[Resolution], _Solution], resolution: Resolution) -> _Solution:
    """The best solution, on a finer mesh each time until one is accurate enough."""
    tried = [solved(resolution)]
    while tried[-1].excess > 1.0 and len(tried) < MESHES:
        resolution = resolution.finer(tried[-1].excess)
        try:
            tried.append(solved(resolution))
        except (MeshError, SolveError):  # rounding ends the refinement: what is known stays
            break
        if tried[-1].excess > WORTH * tried[-2].excess:
            break
    return min(tried, key=_worth)


def _worth(solution: _Solution) -> tuple[bool, float]:
    """The less, the better: a proof before the narrowest estimate."""
    return solution.bracket.label != GUARANTEED, solution.excess


def _across(
    solved: Callable[[Resolution], _Solution], resolution: Resolution, accuracy: float
) -> _Solution:
    """The solution on the second of two meshes, where a coefficient may break across triangles.

    Finer ones would hardly help; how far the two are apart tells how far off both are.
    """
    first = solved(resolution)
    second = solved(resolution.finer(max(first.excess, 1.0)))
    bracket = widened(second.bracket, second.modes, first.modes)
    return replace(second, bracket=bracket, excess=bracket.widest / accuracy)


def _solve_on(
    meshed: Callable[[Resolution, bool], Mesh],
    membrane: Membrane,
    resolution: Resolution,
    wanted: ModesWanted,
    solver: Eigensolver,
    clock: _Clock,
) -> _Solution:
    mesh = meshed(resolution, True)
    with clock.stage("assembly"):
        pencil = assemble(membrane, mesh, resolution.degree)
    with clock.stage("modes"):
        more, modes = modes_of(pencil, wanted, solver, wanted.bracket)

    def provable() -> Modes:
        """The same modes on a mesh that the proofs cover."""
        if not mesh.has_fans:
            return more
        plain = meshed(resolution.of_proofs, False)
        with clock.stage("bounds"):
            again = assemble(membrane, plain, resolution.degree)
            return extract(again, len(more.eigenvalues), solver, wanted.accuracy)

    bracket = _bracket(membrane, mesh, resolution, provable, modes, wanted, clock)
    excess = bracket.widest / wanted.accuracy
    return _Solution(membrane, mesh, pencil, modes, bracket, excess, _why(bracket))


def _bracket(
    membrane: Membrane,
    mesh: Mesh,
    resolution: Resolution,
    provable: Callable[[], Modes],
    modes: Modes,
    wanted: ModesWanted,
    clock: _Clock,
) -> Bracket:
    """A guaranteed bracket where one is wanted and to be had, else an estimate."""
    reason = ""
    if wanted.bracket:
        try:
            check_provable(membrane)
            proof = provable()
            with clock.stage("bounds"):
                found = bracketed(membrane, proof, len(modes.eigenvalues), wanted.accuracy)
            return found.holding(modes.eigenvalues)
        except BracketError as why:
            reason = str(why)
    with clock.stage("estimate"):
        coarse = assemble(membrane, mesh, resolution.coarser_degree)
        return estimate(modes, coarser_modes(coarse, modes), reason)


def _why(bracket: Bracket) -> tuple[str, ...]:
    """A note where a guaranteed bracket was wanted and not to be had."""
    return (f"Brackets are estimates, since {bracket.reason}.",) if bracket.reason else ()


def modes_of(
    pencil: Pencil, wanted: ModesWanted, solver: Eigensolver, spare: bool
) -> tuple[Modes, Modes]:
    """All modes found and the wanted ones; if ``spare``, more, so that brackets find a gap.

    Raises SolveError where the count of modes does not close.
    """
    count = _wanted_count(pencil, wanted)
    beyond = min(SPARE, pencil.M.shape[0] - 1 - count) if spare else 0
    more = extract(pencil, count + max(beyond, 0), solver, wanted.accuracy)
    return more, lowest(more, count)


def _wanted_count(pencil: Pencil, wanted: ModesWanted) -> int:
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
        "accuracy_met": bool(solution.excess <= 1.0),
        "widest_bracket_cents": solution.bracket.widest,
    }
