"""The engine on processes: all points once, few under way, dead workers replaced."""

from __future__ import annotations

import os
import signal
import time
from pathlib import Path

import numpy as np
import pytest

from membrane.errors import EngineError
from membrane.sweep import cluster as cluster_engine
from membrane.sweep.answer import Answer
from membrane.sweep.cluster import AHEAD, Processes, Scheduler
from membrane.sweep.points import Point

pytestmark = pytest.mark.slow


class Careless:
    """Answers with who answered; kills its own process when it is told to."""

    def __init__(self, folder, deadly=(), always=()):
        self.folder, self.deadly, self.always = folder, deadly, always

    def answer(self, point):
        mark = Path(self.folder) / f"{point.number}"
        first = not mark.exists()
        mark.touch()
        if point.number in self.always or (first and point.number in self.deadly):
            os.kill(os.getpid(), signal.SIGKILL)
        time.sleep(0.01)
        return Answer(np.array([point.values[0]]), np.zeros(1), str(os.getpid()), 1)


def bundles(count, taken, together=2):
    for start in range(1, count + 1, together):
        taken.append(start)
        yield tuple(Point(n, (float(n),)) for n in range(start, min(start + together, count + 1)))


def test_every_point_is_answered_and_few_are_under_way(tmp_path):
    taken, found, most = [], [], 0
    for outcomes in Processes(2).outcomes(Careless(tmp_path), bundles(60, taken)):
        most = max(most, 2 * len(taken) - len(found))
        found.extend(outcomes)
    assert sorted(o.point.number for o in found) == list(range(1, 61))
    assert all(o.answer.frequencies[0] == o.point.number for o in found)
    assert len({o.answer.kind for o in found}) == 2
    assert most <= 2 * (2 * AHEAD + 1)


def test_points_of_a_dead_process_go_to_another_and_one_that_kills_all_fails_alone(tmp_path):
    answering = Careless(tmp_path, deadly=(7,), always=(4,))
    found = [o for some in Processes(2).outcomes(answering, bundles(10, [])) for o in some]
    assert sorted(o.point.number for o in found) == list(range(1, 11))
    (failed,) = [o for o in found if o.answer is None]
    assert failed.point.number == 4
    assert "every process that solved it died" in failed.sentence


def test_a_running_scheduler_is_used_and_a_missing_one_named(tmp_path, monkeypatch):
    from distributed import LocalCluster

    options = {"n_workers": 1, "threads_per_worker": 1, "dashboard_address": "127.0.0.1:0"}
    with LocalCluster(**options) as cluster:
        engine = Scheduler(cluster.scheduler_address)
        found = [o for some in engine.outcomes(Careless(tmp_path), bundles(5, [])) for o in some]
        assert sorted(o.point.number for o in found) == [1, 2, 3, 4, 5]
    monkeypatch.setattr(cluster_engine, "PATIENCE", 0.5)
    for address in ("tcp://127.0.0.1:1", "nonsense://x"):
        with pytest.raises(EngineError, match=f"no Dask scheduler answers at {address}"):
            list(Scheduler(address).outcomes(Careless(tmp_path), bundles(5, [])))
