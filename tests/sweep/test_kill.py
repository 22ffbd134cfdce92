"""The real command, killed at random times: resumed, its table is that of an undisturbed run."""

from __future__ import annotations

import os
import random
import signal
import sqlite3
import subprocess
import sys
import time
from pathlib import Path

import pytest

STUDY = """
[outline]
shape = "disc"
diameter = "356 mm"
[[patches]]
name = "paste"
shape = "disc"
diameter = "90 mm"
added_density = 1.0
[head]
areal_density = "0.262 kg/m^2"
tension = "3 kN/m"
[modes]
count = 2
accuracy = "1 cent"
[sweep]
[[sweep.axes]]
key = "patches.paste.added_density"
from = "0.1 kg/m^2"
to = "3 kg/m^2"
steps = 20
[[sweep.axes]]
key = "patches.paste.at[1]"
from = "0 mm"
to = "30 mm"
steps = 2
"""

POINTS = 20 * 2
DRIVER_KILLS, WORKER_KILLS = 2, 2


def start(study: Path, out: Path, workers: int) -> subprocess.Popen[bytes]:
    command = ["-m", "membrane", "sweep", str(study), "--out", str(out), "--quiet"]
    return subprocess.Popen([sys.executable, *command, "--workers", str(workers)])


def stored(out: Path) -> int:
    """How many points are in the store now."""
    try:
        connection = sqlite3.connect(f"file:{out / 'sweep.sqlite'}?mode=ro", uri=True)
        (count,) = connection.execute("SELECT count(*) FROM points").fetchone()
        connection.close()
    except sqlite3.OperationalError:
        return 0
    return int(count)


def wait_until_some_are_stored(run: subprocess.Popen[bytes], out: Path, wanted: int) -> None:
    while run.poll() is None and stored(out) < wanted:
        time.sleep(0.02)


def children(pid: int) -> list[int]:
    """All processes below a process, as Linux lists them."""
    files = Path(f"/proc/{pid}/task").glob("*/children")
    found = [int(child) for file in files for child in file.read_text().split()]
    return found + [below for child in found for below in children(child)]


def workers(run: subprocess.Popen[bytes]) -> list[int]:
    """The processes of a run that solve points."""
    lines = {pid: Path(f"/proc/{pid}/cmdline") for pid in children(run.pid)}
    return [pid for pid, line in lines.items() if b"spawn_main" in line.read_bytes()]


@pytest.fixture
def undisturbed(tmp_path):
    (tmp_path / "drum.toml").write_text(STUDY)
    assert start(tmp_path / "drum.toml", tmp_path / "undisturbed", workers=1).wait() == 0
    return (tmp_path / "undisturbed" / "points.csv").read_bytes()


@pytest.mark.slow
@pytest.mark.skipif(not sys.platform.startswith("linux"), reason="reads /proc")
def test_killed_drivers_and_workers(tmp_path, undisturbed):
    study, out, chance = tmp_path / "drum.toml", tmp_path / "out", random.Random(1)
    killed = 0
    for kill in range(DRIVER_KILLS):
        run = start(study, out, workers=1 + kill % 2)
        before = stored(out)
        wait_until_some_are_stored(run, out, before + 1)
        time.sleep(chance.uniform(0.0, 0.4))
        run.send_signal(signal.SIGKILL)
        killed += run.wait() == -signal.SIGKILL
        assert stored(out) >= min(before + 1, POINTS)
    run = start(study, out, workers=2)
    died = 0
    for _ in range(WORKER_KILLS):
        wait_until_some_are_stored(run, out, stored(out) + 4)
        time.sleep(chance.uniform(0.0, 0.2))
        for pid in workers(run)[:1]:
            os.kill(pid, signal.SIGKILL)
            died += 1
    assert run.wait() == 0
    assert killed == DRIVER_KILLS
    assert died > 0
    assert not (out / "failures.csv").exists()
    assert (out / "points.csv").read_bytes() == undisturbed
