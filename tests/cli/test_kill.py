"""The real command, killed at random times: the folder holds one whole result or the other."""

from __future__ import annotations

import json
import random
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

STUDY = """
title = "{title}"
[outline]
shape = "disc"
diameter = "356 mm"
[head]
areal_density = "0.262 kg/m^2"
tension = "3 kN/m"
[modes]
count = 4
[products]
write = ["vtu"]
"""

KILLS = 5


def start(folder: Path, title: str) -> subprocess.Popen[bytes]:
    study = folder / f"{title}.toml"
    study.write_text(STUDY.format(title=title))
    command = ["-m", "membrane", "run", str(study), "--out", str(folder / "out"), "--quiet"]
    return subprocess.Popen([sys.executable, *command])


def title_of(result: Path) -> str:
    return str(json.loads((result / "summary.json").read_text())["study"]["title"])


@pytest.mark.slow
@pytest.mark.skipif(not sys.platform.startswith("linux"), reason="renameat2 is Linux's")
def test_killed_runs(tmp_path):
    started = time.perf_counter()
    assert start(tmp_path, "first").wait() == 0
    lasted = time.perf_counter() - started
    names = sorted(file.name for file in (tmp_path / "out").iterdir())
    chance, killed = random.Random(1), 0
    for attempt in range(KILLS):
        before = title_of(tmp_path / "out")
        run = start(tmp_path, f"run{attempt}")
        time.sleep(chance.uniform(0.3, 1.05) * lasted)
        run.send_signal(signal.SIGKILL)
        killed += run.wait() == -signal.SIGKILL
        assert title_of(tmp_path / "out") in (before, f"run{attempt}")
        assert sorted(file.name for file in (tmp_path / "out").iterdir()) == names
    assert killed > 0
    assert start(tmp_path, "last").wait() == 0
    assert title_of(tmp_path / "out") == "last"
    assert sorted(file.name for file in tmp_path.iterdir() if file.is_dir()) == ["out"]
