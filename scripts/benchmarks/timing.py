"""CPU times of contestants that take turns."""

from __future__ import annotations

import gc
from collections.abc import Callable, Mapping
from statistics import median
from time import process_time

Contestant = Callable[[], object]


def cpu_seconds(contestant: Contestant) -> float:
    """CPU time of one call, rubbish of earlier ones collected first."""
    gc.collect()
    start = process_time()
    contestant()
    return process_time() - start


def alternating(
    contestants: Mapping[str, Contestant], rounds: int = 7, budget: float = 20.0
) -> dict[str, float]:
    """Median CPU seconds of each, which run in turn.

    A first round warms up and is dropped. The rounds end early after ``budget`` seconds
    of CPU time; where the first round takes all of it, that one counts.
    """
    seconds: dict[str, list[float]] = {name: [] for name in contestants}
    for _ in range(rounds + 1):
        for name, contestant in contestants.items():
            seconds[name].append(cpu_seconds(contestant))
        if sum(map(sum, seconds.values())) > budget:
            break
    return {name: median(taken[1:] or taken) for name, taken in seconds.items()}
