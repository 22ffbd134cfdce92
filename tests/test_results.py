"""A result folder holds the earlier result or the new one, whole, however a run ends."""

from __future__ import annotations

import json
import os
import random
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from membrane import results
from membrane.errors import OutputError
from membrane.results import SUMMARY, check_free, in_place

FILES = 12


def write_result(folder: Path, stamp: int, pause: float = 0.0) -> None:
    """A result of several files that all bear one stamp."""
    for number in range(FILES):
        (folder / f"part{number}.txt").write_text(f"{stamp}\n" * 200)
        time.sleep(pause)
    summary = {"software": "test", "modes": [], "stamp": stamp}
    (folder / "summary.json").write_text(json.dumps(summary))


def stamp_of(folder: Path) -> int:
    """The stamp of a whole result."""
    stamp = json.loads((folder / "summary.json").read_text())["stamp"]
    assert len(list(folder.iterdir())) == FILES + 1
    for number in range(FILES):
        assert (folder / f"part{number}.txt").read_text() == f"{stamp}\n" * 200
    return int(stamp)


def put(place: Path, stamp: int) -> None:
    with in_place(place) as folder:
        write_result(folder, stamp)


@pytest.fixture(params=["one step", "two steps"])
def _either_way(request, monkeypatch):
    """With and without a file system that can exchange two folders."""
    if request.param == "two steps":
        monkeypatch.setattr(results, "_exchange", lambda one, other: False)


@pytest.mark.usefixtures("_either_way")
def test_a_first_and_a_second_result(tmp_path):
    place = tmp_path / "new" / "deep" / "out"
    for stamp in (1, 2):
        put(place, stamp)
        assert stamp_of(place) == stamp
    assert os.listdir(place.parent) == ["out"]


def test_files_that_no_run_has_written_are_not_lost(tmp_path):
    place = tmp_path / "out"
    with in_place(place) as folder:
        names = [SUMMARY, "modes.csv"]
        (folder / "modes.csv").write_text("")
        (folder / SUMMARY).write_text(json.dumps({"software": "", "modes": [], "files": names}))
    assert check_free(place) == place
    (place / "view.pvsm").write_text("mine")
    with pytest.raises(OutputError, match=r"holds view\.pvsm, which no run has written"):
        put(place, 2)
    assert (place / "view.pvsm").read_text() == "mine"


def fail_halfway(place: Path) -> None:
    with in_place(place) as folder:
        write_result(folder, 2)
        raise ZeroDivisionError


@pytest.mark.usefixtures("_either_way")
def test_a_failure_leaves_the_earlier_result(tmp_path):
    put(tmp_path / "out", 1)
    with pytest.raises(ZeroDivisionError):
        fail_halfway(tmp_path / "out")
    assert stamp_of(tmp_path / "out") == 1
    assert os.listdir(tmp_path) == ["out"]


def test_the_earlier_result_stays_until_the_end(tmp_path):
    put(tmp_path / "out", 1)
    with in_place(tmp_path / "out") as folder:
        write_result(folder, 2)
        assert stamp_of(tmp_path / "out") == 1
    assert stamp_of(tmp_path / "out") == 2


def test_an_empty_folder_is_used(tmp_path):
    (tmp_path / "out").mkdir()
    put(tmp_path / "out", 1)
    assert stamp_of(tmp_path / "out") == 1


def test_the_folder_has_the_usual_rights(tmp_path):
    put(tmp_path / "out", 1)
    (tmp_path / "other").mkdir()
    assert (tmp_path / "out").stat().st_mode == (tmp_path / "other").stat().st_mode


def test_a_link_stays_a_link(tmp_path):
    (tmp_path / "there").mkdir()
    (tmp_path / "out").symlink_to("there")
    put(tmp_path / "out", 1)
    assert (tmp_path / "out").is_symlink()
    assert stamp_of(tmp_path / "there") == 1


@pytest.mark.parametrize(
    "files",
    [
        {"diary.txt": "dear"},
        {"summary.json": "{"},
        {"summary.json": "[]"},
        {"summary.json": '{"total": 3}', "diary.txt": "dear"},
    ],
)
def test_a_folder_of_something_else_is_left_alone(tmp_path, files):
    for name, text in files.items():
        (tmp_path / name).write_text(text)
    with pytest.raises(OutputError, match="holds something else than an earlier result"):
        check_free(tmp_path)
    with pytest.raises(OutputError), in_place(tmp_path):
        raise AssertionError("nothing may be written")
    assert {file.name: file.read_text() for file in tmp_path.iterdir()} == files


def test_a_file_in_the_way(tmp_path):
    (tmp_path / "out").write_text("x")
    with pytest.raises(OutputError, match="is a file"):
        check_free(tmp_path / "out")


def test_a_place_that_cannot_be_written():
    with pytest.raises(OutputError, match="cannot be written to /proc/out"), in_place("/proc/out"):
        raise AssertionError("nothing may be written")


def test_a_failing_write_is_an_output_error(tmp_path):
    with pytest.raises(OutputError, match="No such file"), in_place(tmp_path / "out") as folder:
        (folder / "none" / "a.txt").write_text("x")
    assert os.listdir(tmp_path) == []


def test_a_kill_between_two_steps_is_mended(tmp_path):
    put(tmp_path / "out", 1)
    (tmp_path / "out").rename(tmp_path / ".out.earlier")
    assert stamp_of(check_free(tmp_path / "out")) == 1
    assert os.listdir(tmp_path) == ["out"]


def test_a_kill_after_two_steps_is_tidied(tmp_path):
    put(tmp_path / "out", 2)
    put(tmp_path / ".out.earlier", 1)
    assert stamp_of(check_free(tmp_path / "out")) == 2
    assert os.listdir(tmp_path) == ["out"]


def test_folders_of_runs_that_go_on_are_left_alone(tmp_path):
    with in_place(tmp_path / "out") as first:
        put(tmp_path / "out", 2)
        write_result(first, 1)
    assert stamp_of(tmp_path / "out") == 1
    assert os.listdir(tmp_path) == ["out"]


WRITER = """
import sys
from pathlib import Path
from membrane.results import in_place
from tests.test_results import write_result
place, stamp = Path(sys.argv[1]), int(sys.argv[2])
print("ready", flush=True)
while True:
    stamp += 1
    with in_place(place) as folder:
        write_result(folder, stamp, pause=2e-4)
"""


@pytest.mark.slow
@pytest.mark.skipif(not sys.platform.startswith("linux"), reason="renameat2 is Linux's")
def test_killed_at_random_times(tmp_path):
    """Fifty writers killed with SIGKILL, each in the middle of its work."""
    place, last = tmp_path / "out", 0
    put(place, last)
    chance = random.Random(1)
    for _ in range(50):
        command = [sys.executable, "-c", WRITER, str(place), str(last)]
        writer = subprocess.Popen(command, stdout=subprocess.PIPE, cwd=Path(__file__).parents[1])
        assert writer.stdout is not None
        assert writer.stdout.readline() == b"ready\n"
        time.sleep(chance.uniform(0.0, 0.05))
        writer.send_signal(signal.SIGKILL)
        assert writer.wait() == -signal.SIGKILL
        writer.stdout.close()
        assert stamp_of(place) >= last
        last = stamp_of(place)
    assert last > 5, "the writers were killed before they wrote anything"
    put(place, last + 1)
    assert os.listdir(tmp_path) == ["out"]
