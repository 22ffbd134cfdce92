"""What ``check`` says of a sweep: its axes, points and meshes, and how long it may take."""

from __future__ import annotations

from membrane.records.study import Study
from membrane.records.sweep import Axis, Pick, Sweep


def sweep_lines(study: Study) -> list[tuple[str, str]]:
    """Pairs of a label and a text; none where the study has no sweep.

    One solve is made, to see how long it takes. Raises MembraneError where it fails.
    """
    if study.sweep is None:
        return []
    from membrane.sweep.solving import LEAST, pays, timed_sample
    from membrane.sweep.task import task_of

    points = task_of(study).points
    sample = timed_sample(study)
    seconds = points.meshes * sample.mesh + len(points) * sample.solve
    time = (
        f"about {_lasting(seconds)} of one processor if all is solved in full: "
        f"{sample.mesh:.2g} s a mesh, {sample.solve:.2g} s a solve, both timed on the study's own "
        "values"
    )
    if pays(points, study.modes):
        time += f"; far less where a reduced model answers, as from {LEAST} points on one mesh on"
    axes = [(f"axis {axis.key}", _axis(axis, study.sweep.pick)) for axis in study.sweep.axes]
    meshes = "one mesh" if points.meshes == 1 else f"{points.meshes} different meshes"
    sizes = f"{len(points)} points, {meshes}"
    return [("sweep", f"{_pick(study.sweep)}: {sizes}"), *axes, ("time", time)]


def _pick(sweep: Sweep) -> str:
    seed = f" with seed {sweep.seed}" if sweep.pick is Pick.RANDOM else ""
    return f"{sweep.pick}{seed}"


def _axis(axis: Axis, pick: Pick) -> str:
    low, high = min(axis.values), max(axis.values)
    if axis.between:
        return f"anywhere from {low:g} to {high:g}, {axis.spacing}"
    if pick is Pick.TABLE:
        return f"from {low:g} to {high:g}"
    count = len(axis.values)
    return f"{count} values from {low:g} to {high:g}" if count > 1 else f"{low:g}"


def _lasting(seconds: float) -> str:
    """A time in the unit that suits it."""
    for unit, length in (("days", 86400.0), ("hours", 3600.0), ("minutes", 60.0)):
        if seconds >= 2 * length:
            return f"{seconds / length:.2g} {unit}"
    return f"{seconds:.2g} s"
