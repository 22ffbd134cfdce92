"""Accuracy against CPU time of all contestants, from the outline to the eigenvalues."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from functools import partial
from itertools import product
from math import inf
from typing import Any

import numpy as np

from membrane.mesh import Resolution
from scripts.benchmarks import hp_library, ours, plain
from scripts.benchmarks.curves import Point, front, seconds_at
from scripts.benchmarks.heads import HEADS, Floats, Head
from scripts.benchmarks.tables import Row
from scripts.benchmarks.timing import alternating, cpu_seconds

COUNTS = (20, 60)
ERRORS = (1e-6, 1e-8, 1e-10)

OURS, RUN, HP, PLAIN = "membrane", "membrane run", "hp library", "scikit-fem script"

AGAINST_HP = {"disc": (0.65, 0.65, 0.65), "L-shape": (0.75, 1.0, 1.0), "heavy centre": (0.8,) * 3}
"""The most of the hp library's time that we may take, for each of ERRORS; at 20 modes."""

AGAINST_PLAIN = (5.0, 10.0, 10.0)
"""The least that the plain script may take of our time."""

SLACK = 1.3
"""Settings within this factor of the best at their first run are measured properly."""

PATIENCE = 3.0
"""CPU seconds of one run above which finer settings of the same kind are left out."""

Solve = Callable[[], Floats]


def measure(quick: bool) -> dict[str, list[Row]]:
    """The ratios at each error, and the points of the curves that they are from."""
    ratios, points = [], []
    for count, make in product(COUNTS[:1] if quick else COUNTS, HEADS.values()):
        head = make()
        curves = _curves(head, count, quick)
        ratios += [_ratios(head, count, curves, k) for k in range(len(ERRORS))]
        points += [_point(head, count, *one) for one in _listed(curves)]
    return {"time at equal error": ratios, "curves": points}


def _curves(head: Head, count: int, quick: bool) -> dict[str, list[Point]]:
    """Contestant -> the measured points of its best settings."""
    fields = {name: _best(head, count, families(head, count, quick)) for name, families in _FIELDS}
    named = {(name, one.settings): (one, solve) for name in fields for one, solve in fields[name]}
    seconds = alternating(
        {key: solve for key, (_, solve) in named.items()},
        rounds=3 if quick else 7,
        budget=20.0 if quick else 60.0,
    )
    curves: dict[str, list[Point]] = {name: [] for name in fields}
    for (name, settings), (first, _) in named.items():
        curves[name].append(Point(settings, first.error, seconds[name, settings]))
    return curves


def _best(
    head: Head, count: int, families: Sequence[Mapping[str, Solve]]
) -> list[tuple[Point, Solve]]:
    """The settings that may be on the front, by one run of each."""
    tried = dict(_tried(head, count, families))
    return [(point, tried[point]) for point in front(list(tried), SLACK)]


def _tried(
    head: Head, count: int, families: Sequence[Mapping[str, Solve]]
) -> Iterator[tuple[Point, Solve]]:
    for family in families:
        for settings, solve in family.items():
            found: list[Floats] = []
            seconds = cpu_seconds(lambda solve=solve, found=found: found.append(solve()))
            yield Point(settings, _error(head, found[0][:count]), seconds), solve
            if seconds > PATIENCE:
                break


def _error(head: Head, values: Floats) -> float:
    known = head.exact[: len(values)]
    return float(np.abs(values[: len(known)] / known - 1.0).max())


def _ours(head: Head, count: int, quick: bool) -> list[dict[str, Solve]]:
    tolerances = (1e-6, 1e-8, 1e-10) if head.name == "L-shape" else (1e-8,)
    phases = (6.0, 4.5, 3.0) if quick else (8.0, 6.0, 5.4, 4.5, 3.7, 3.0)
    degrees = (6, 8) if quick else (5, 6, 7, 8, 9, 10)
    return [
        {
            f"degree {p}, phase {phase}, corners {t:g}": partial(
                ours.solve, head.keys, count, Resolution(p, phase, t)
            )
            for phase in phases
        }
        for p, t in product(degrees, tolerances)
    ]


def _run(head: Head, count: int, quick: bool) -> list[dict[str, Solve]]:
    wanted = (1e-1, 1e-2, 1e-3) if quick else (1.0, 1e-1, 1e-2, 1e-3, 1e-4, 1e-5)
    return [{f"{cents:g} cent": partial(ours.run, head.keys, count, cents) for cents in wanted}]


def _hp(head: Head, count: int, quick: bool) -> list[dict[str, Solve]]:
    corners = [(0, 0.15)]
    if head.name == "L-shape":
        corners = list(product((2, 4, 6, 8), (0.125, 0.25)))
    sizes = (0.8, 0.4) if quick else (0.8, 0.6, 0.5, 0.4, 0.3)
    orders = (6, 8) if quick else (5, 6, 7, 8, 9, 10)
    families = [
        [hp_library.Settings(p, h, *corner) for h in sizes]
        for p, corner in product(orders, corners)
    ]
    return [
        {str(one): partial(hp_library.solve, head.name, count, one) for one in family}
        for family in families
    ]


def _plain(head: Head, count: int, quick: bool) -> list[dict[str, Solve]]:
    families = [
        [plain.Settings(degree, n, sides) for n in range(2, 4 if quick else 8)]
        for degree, sides in product((2, 4), (1, 2))
        if plain.allowed(head.name, degree, sides)
    ]
    return [
        {str(one): partial(plain.solve, head.name, count, one) for one in family}
        for family in families
    ]


_FIELDS: Any = ((OURS, _ours), (RUN, _run), (HP, _hp), (PLAIN, _plain))


def _ratios(head: Head, count: int, curves: Mapping[str, Sequence[Point]], k: int) -> Row:
    seconds = {name: seconds_at(points, ERRORS[k]) for name, points in curves.items()}
    row: Row = {"head": head.name, "modes": count, "error": ERRORS[k]}
    row |= {f"{name}, ms": _or_not(1000 * taken) for name, taken in seconds.items()}
    row["of hp library"] = seconds[OURS] / seconds[HP] if seconds[HP] < inf else "alone"
    row["at most"] = AGAINST_HP[head.name][k] if count == COUNTS[0] else ""
    slowest = max(point.seconds for point in curves[PLAIN])
    beaten = seconds[PLAIN] < inf
    times = (seconds[PLAIN] if beaten else slowest) / seconds[OURS]
    row["scikit-fem in ours"] = times if beaten else f"> {times:.3g}"
    row["at least"] = AGAINST_PLAIN[k]
    return row


def _or_not(value: float) -> float | str:
    return value if value < inf else "not reached"


def _listed(curves: Mapping[str, Sequence[Point]]) -> Iterator[tuple[str, Point]]:
    return ((name, point) for name, points in curves.items() for point in front(points))


def _point(head: Head, count: int, contestant: str, point: Point) -> Row:
    return {
        "head": head.name,
        "modes": count,
        "contestant": contestant,
        "settings": point.settings,
        "error": point.error,
        "CPU, s": point.seconds,
    }
