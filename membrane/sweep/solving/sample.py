"""How long a full solve takes here."""

from __future__ import annotations

from dataclasses import dataclass
from time import perf_counter

from threadpoolctl import threadpool_limits

from membrane.records.study import Study
from membrane.sweep.solving.rungs import made
from membrane.sweep.solving.solve import solved


@dataclass(frozen=True)
class Sample:
    """Seconds that a mesh with its matrices takes, and a solve on it."""

    mesh: float
    solve: float


def timed_sample(study: Study) -> Sample:
    """What one full solve of the study's own values takes here.

    Raises MembraneError where it cannot be solved.
    """
    guaranteed = study.sweep is not None and study.sweep.bracket
    with threadpool_limits(limits=1, user_api="blas"):
        start = perf_counter()
        rung = made(study, None, guaranteed)
        middle = perf_counter()
        solved(study, rung, guaranteed)
    return Sample(middle - start, perf_counter() - middle)
