"""Results as arrays, as a DataFrame and as Parquet."""

from __future__ import annotations

import csv

import numpy as np
import pytest

from membrane.errors import OutputError
from membrane.sweep.branched import Branches
from membrane.sweep.engine import Serial
from membrane.sweep.frame import write_parquet
from membrane.sweep.part import WHOLE
from membrane.sweep.points import Point
from membrane.sweep.results import read_sweep
from membrane.sweep.store import Store
from membrane.sweep.tables import POINTS, write_tables
from membrane.sweep.work import work

from .demo import TENSION, axis, task

BELOW = axis("b", -1.0, 0.1, 1 / 3)


@pytest.fixture
def folder(tmp_path):
    wanted = task(TENSION, BELOW)
    work(wanted, tmp_path, Serial())
    with Store.reading(WHOLE.file(tmp_path)) as store:
        write_tables(tmp_path, store, wanted.entry)
    return tmp_path


@pytest.fixture
def followed(folder):
    """The same, with branches of the first mode alone, that of the last two points lost."""
    entry = task(TENSION, BELOW).entry
    numbers = np.array([[1]] * 7 + [[5]] * 2)
    with Store.writing(WHOLE.file(folder)) as store:
        store.keep_branches(entry, Branches(numbers, ((1, 8),)))
        write_tables(folder, store, entry)
    return folder


def test_arrays(folder):
    results = read_sweep(folder)
    assert results.numbers.tolist() == [2, 3, 5, 6, 8, 9]
    assert results.axes["head.tension"].tolist() == [1000.0] * 2 + [2000.0] * 2 + [4000.0] * 2
    assert results.axes["b"].tolist() == [0.1, 1 / 3] * 3
    assert np.array_equal(results.frequencies[:, 1], results.axes["head.tension"] ** 2 / 3.0)
    assert np.array_equal(results.error_cents, results.frequencies / 7.0)
    assert results.kinds == ("estimated",) * 6
    assert list(results.failures) == [1, 4, 7]
    assert not results.branches.any()
    assert results.lost == ()


def test_branches(followed):
    results = read_sweep(followed)
    assert results.branches.tolist() == [[1, 0]] * 4 + [[5, 0]] * 2
    assert results.lost == ((1, 8),)


def test_a_frame_is_the_table(followed):
    pytest.importorskip("pandas")
    frame = read_sweep(followed).frame()
    rows = list(csv.DictReader((followed / POINTS).read_text().splitlines()))
    assert list(frame.columns) == list(rows[0])
    for name in rows[0]:
        column = [row[name] for row in rows]
        if name == "branch":
            assert frame[name].fillna(0).tolist() == [int(text or 0) for text in column]
        elif name == "kind_of_error":
            assert frame[name].tolist() == column
        else:
            assert frame[name].tolist() == [float(text) for text in column]


def test_parquet_is_the_table(followed):
    pandas = pytest.importorskip("pandas")
    pytest.importorskip("pyarrow")
    results = read_sweep(followed)
    write_parquet(results, followed)
    pandas.testing.assert_frame_equal(
        pandas.read_parquet(followed / "points.parquet"), results.frame(), check_exact=True
    )
    assert not list(followed.glob("*.partial"))


def test_points_with_fewer_modes_have_gaps_at_the_end(tmp_path):
    wanted = task(TENSION)
    answer = wanted.answering.answer
    wanted.answering.answer = lambda point: answer(Point(1, point.values * point.number))
    work(wanted, tmp_path, Serial())
    results = read_sweep(tmp_path)
    assert np.isnan(results.frequencies).sum(axis=1).tolist() == [2, 1, 0]
    pytest.importorskip("pandas")
    assert len(results.frame()) == 6


def test_nothing_to_read(tmp_path):
    with pytest.raises(OutputError, match="there is no sweep"):
        read_sweep(tmp_path)
    with Store.writing(WHOLE.file(tmp_path)):
        pass
    with pytest.raises(OutputError, match="no sweep has begun"):
        read_sweep(tmp_path)
