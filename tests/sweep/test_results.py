"""Results as arrays, as a DataFrame and as Parquet."""

from __future__ import annotations

import csv

import numpy as np
import pytest

from membrane.errors import OutputError
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


def test_arrays(folder):
    results = read_sweep(folder)
    assert results.numbers.tolist() == [2, 3, 5, 6, 8, 9]
    assert results.axes["head.tension"].tolist() == [1000.0] * 2 + [2000.0] * 2 + [4000.0] * 2
    assert results.axes["b"].tolist() == [0.1, 1 / 3] * 3
    assert np.array_equal(results.frequencies[:, 1], results.axes["head.tension"] ** 2 / 3.0)
    assert np.array_equal(results.error_cents, results.frequencies / 7.0)
    assert results.kinds == ("estimated",) * 6
    assert list(results.failures) == [1, 4, 7]


def test_a_frame_is_the_table(folder):
    pytest.importorskip("pandas")
    frame = read_sweep(folder).frame()
    rows = list(csv.DictReader((folder / POINTS).read_text().splitlines()))
    assert list(frame.columns) == list(rows[0])
    for name in rows[0]:
        column = [row[name] for row in rows]
        numeric = name != "kind_of_error"
        assert frame[name].tolist() == ([float(text) for text in column] if numeric else column)


def test_parquet_is_the_table(folder):
    pandas = pytest.importorskip("pandas")
    pytest.importorskip("pyarrow")
    results = read_sweep(folder)
    write_parquet(results, folder)
    pandas.testing.assert_frame_equal(
        pandas.read_parquet(folder / "points.parquet"), results.frame(), check_exact=True
    )
    assert not list(folder.glob("*.partial"))


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
