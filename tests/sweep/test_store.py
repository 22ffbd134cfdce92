"""The store: what was written is there, whatever happens, and strange files are refused."""

from __future__ import annotations

import resource
import signal
import sqlite3
import subprocess
import sys

import numpy as np
import pytest

from membrane.errors import OutputError
from membrane.sweep.answer import Answer, Outcome
from membrane.sweep.branched import Branches
from membrane.sweep.points import Point
from membrane.sweep.schema import VERSION
from membrane.sweep.store import DONE, FAILED, MISSING, Entry, Store

ENTRY = Entry("a", "s", "demo", ("head.tension",), 4)
ANSWER = Answer(np.array([1 / 3, np.pi]), np.array([1e-17, 2.5]), "estimated", 2)
GOOD = Outcome(Point(2, (0.1 + 0.2,)), ANSWER, "", 0.25)
BAD = Outcome(Point(4, (-1.0,)), None, "too small.", 0.5)


@pytest.fixture
def file(tmp_path):
    with Store.writing(tmp_path / "sweep.sqlite") as store:
        store.begin(ENTRY)
        store.add(ENTRY, [("two", GOOD), ("four", BAD)])
    return tmp_path / "sweep.sqlite"


def test_outcomes_come_back_to_the_last_digit(file):
    with Store.reading(file) as store:
        good, bad = store.outcomes(ENTRY)
        assert store.states(ENTRY)[1:].tolist() == [MISSING, DONE, MISSING, FAILED]
        totals = store.totals(ENTRY)
    assert (good.point, good.sentence, good.seconds) == (GOOD.point, "", 0.25)
    assert np.array_equal(good.answer.frequencies, ANSWER.frequencies)
    assert np.array_equal(good.answer.error_cents, ANSWER.error_cents)
    assert (good.answer.kind, good.answer.solves) == ("estimated", 2)
    assert bad == BAD
    assert (totals.settled, totals.done, totals.worst_cents) == (2, 1, 2.5)
    assert (totals.seconds, totals.solves) == (0.75, 2)


def test_a_point_is_known_by_its_name_if_it_has_an_answer(file):
    with Store.reading(file) as store:
        assert store.known("two").answer.frequencies[1] == np.pi
        assert store.known("four") is None
        assert store.known("five") is None


def test_branches_come_back(file):
    branches = Branches(np.array([[1, 2], [2, 1], [2, 7], [2, 7]]), ((1, 3),))
    with Store.writing(file) as store:
        assert store.branches(ENTRY) is None
        assert store.most_modes(ENTRY) == 2
        store.keep_branches(ENTRY, Branches(branches.numbers[:, :1], ()))
        store.keep_branches(ENTRY, branches)
    with Store.reading(file) as store:
        found = store.branches(ENTRY)
    assert np.array_equal(found.numbers, branches.numbers)
    assert found.lost == branches.lost


@pytest.mark.parametrize("way", [Store.writing, Store.reading])
def test_a_store_from_before_there_were_branches(file, way):
    connection = sqlite3.connect(file)
    connection.executescript("DROP TABLE branches; PRAGMA user_version = 1;")
    connection.close()
    with way(file) as store:
        assert store.branches(ENTRY) is None
        assert len(list(store.outcomes(ENTRY))) == 2


def test_the_sweep_last_worked_on_comes_last(file):
    other = Entry("b", "s", "demo", ("outline.diameter",), 3)
    with Store.writing(file) as store:
        store.begin(other)
        assert store.sweeps() == [ENTRY, other]
        store.begin(ENTRY)
        assert store.sweeps() == [other, ENTRY]
        assert store.states(other).sum() == 0


def test_one_process_writes_and_others_read(file):
    with Store.writing(file) as store:
        with (
            pytest.raises(OutputError, match="another process is writing"),
            Store.writing(file),
        ):
            pass
        store.add(ENTRY, [("one", Outcome(Point(1, (1.0,)), ANSWER, "", 0.0))])
        with Store.reading(file) as reader:
            assert len(list(reader.outcomes(ENTRY))) == 3


def test_a_store_of_a_later_version_is_refused(file):
    with sqlite3.connect(file) as connection:
        connection.execute(f"PRAGMA user_version = {VERSION + 1}")
    connection.close()
    before = file.read_bytes()
    for way in (Store.writing, Store.reading):
        with pytest.raises(OutputError, match="later version of membrane"), way(file):
            pass
    assert file.read_bytes() == before


@pytest.mark.parametrize("content", [b"point,mode\n1,2\n" * 500, b"SQLite format 3\0" + b"x" * 900])
def test_another_file_is_refused(tmp_path, content):
    file = tmp_path / "sweep.sqlite"
    file.write_bytes(content)
    for way in (Store.writing, Store.reading):
        with pytest.raises(OutputError, match=r"cannot be used|not the store"), way(file):
            pass
    assert file.read_bytes() == content


def test_another_database_is_refused(tmp_path):
    with sqlite3.connect(tmp_path / "sweep.sqlite") as connection:
        connection.execute("CREATE TABLE mine (a)")
    connection.close()
    with (
        pytest.raises(OutputError, match="not the store of a sweep"),
        Store.writing(tmp_path / "sweep.sqlite"),
    ):
        pass


def test_no_store(tmp_path):
    with (
        pytest.raises(OutputError, match="there is no sweep"),
        Store.reading(tmp_path / "s.sqlite"),
    ):
        pass
    (tmp_path / "file").write_text("")
    with (
        pytest.raises(OutputError, match="cannot be used"),
        Store.writing(tmp_path / "file" / "sweep.sqlite"),
    ):
        pass


FILL = """
import sys, numpy as np
from pathlib import Path
from membrane.errors import OutputError
from membrane.sweep.answer import Answer, Outcome
from membrane.sweep.points import Point
from membrane.sweep.store import Entry, Store

entry = Entry("b", "s", "demo", ("head.tension",), 100000)
answer = Answer(np.ones(200), np.ones(200), "estimated", 1)
added = 0
try:
    with Store.writing(Path(sys.argv[1])) as store:
        store.begin(entry)
        for number in range(1, 100000):
            store.add(entry, [(str(number), Outcome(Point(number, (1.0,)), answer, "", 0.0))])
            added = number
except OutputError as failure:
    print(added, failure)
"""


def full_disk():
    """No file may grow beyond this, as if the disk were full."""
    signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
    resource.setrlimit(resource.RLIMIT_FSIZE, (200_000, 200_000))


def test_a_full_disk_spoils_nothing(file):
    done = subprocess.run(
        [sys.executable, "-c", FILL, file], capture_output=True, text=True, preexec_fn=full_disk
    )
    assert done.stderr == ""
    added, _, sentence = done.stdout.partition(" ")
    assert int(added) > 10
    assert "what was stored before is kept. Make room" in sentence
    entry = Entry("b", "s", "demo", ("head.tension",), 100000)
    with Store.writing(file) as store:
        outcomes = list(store.outcomes(entry))
        assert [o.point.number for o in outcomes] == list(range(1, int(added) + 1))
        assert len(list(store.outcomes(ENTRY))) == 2
    with sqlite3.connect(file) as connection:
        assert connection.execute("PRAGMA integrity_check").fetchone() == ("ok",)
    connection.close()
