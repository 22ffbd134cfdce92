"""The work: resumed, retried, divided and renewed sweeps give the table of an undisturbed one."""

from __future__ import annotations

import csv

import pytest

from membrane.errors import OutputError
from membrane.sweep.engine import Serial
from membrane.sweep.merge import merge
from membrane.sweep.part import WHOLE, Part
from membrane.sweep.points import Point
from membrane.sweep.results import read_sweep
from membrane.sweep.store import Store
from membrane.sweep.tables import FAILURES, POINTS, write_tables
from membrane.sweep.work import work

from .demo import DIAMETER, TENSION, axis, task

BELOW = axis("b", -1.0, 0.1, 1 / 3)


class Interrupted(Serial):
    """Stops after a number of points, as a kill does."""

    def __init__(self, after):
        self.after = after

    def outcomes(self, answering, bundles):
        found = super().outcomes(answering, bundles)
        yield from (next(found) for _ in range(self.after))
        raise KeyboardInterrupt


class Backwards(Serial):
    """Gives the outcomes in the wrong order."""

    def outcomes(self, answering, bundles):
        yield from reversed(list(super().outcomes(answering, bundles)))


def tables(wanted, folder):
    with Store.reading(WHOLE.file(folder)) as store:
        write_tables(folder, store, wanted.entry)
    return (folder / POINTS).read_bytes()


@pytest.fixture
def undisturbed(tmp_path):
    work(task(TENSION, BELOW), tmp_path / "undisturbed", Serial())
    return tables(task(TENSION, BELOW), tmp_path / "undisturbed")


def test_the_table_has_every_digit(tmp_path):
    wanted = task(axis("b", 1 / 3))
    work(wanted, tmp_path, Serial())
    (row,) = csv.DictReader(tables(wanted, tmp_path).decode().splitlines())
    assert row["point"] == row["mode"] == "1"
    assert float(row["b"]) == 1 / 3
    assert float(row["frequency_hz"]) == (1 / 3) ** 2 / 3.0
    assert float(row["error_cents"]) == (1 / 3) ** 2 / 3.0 / 7.0
    assert row["kind_of_error"] == "estimated"


@pytest.mark.parametrize("after", [0, 1, 4])
def test_a_stopped_sweep_goes_on_where_it_was(tmp_path, undisturbed, after):
    first, second = task(TENSION, BELOW), task(TENSION, BELOW)
    with pytest.raises(KeyboardInterrupt):
        work(first, tmp_path, Interrupted(after))
    said = []
    tally = work(second, tmp_path, Serial(), say=said.append)
    assert said == ([f"Going on: {after} of 9 points are there already."] if after else [])
    assert sorted(first.answering.asked + second.answering.asked) == list(range(1, 10))
    assert len(first.answering.asked) == after
    assert (tally.wanted, tally.done, tally.failed) == (9, 6, 3)
    assert tables(second, tmp_path) == undisturbed


def test_the_order_of_the_answers_does_not_matter(tmp_path, undisturbed):
    work(task(TENSION, BELOW), tmp_path, Backwards())
    assert tables(task(TENSION, BELOW), tmp_path) == undisturbed


def test_nor_does_the_order_of_solving(tmp_path, undisturbed):
    other = task(TENSION, BELOW, shaping=[False, True])
    work(other, tmp_path, Serial())
    assert other.answering.asked == [1, 4, 7, 2, 5, 8, 3, 6, 9]
    assert tables(other, tmp_path) == undisturbed


def test_failures_are_kept_with_their_sentence_and_tried_again_when_asked(tmp_path, undisturbed):
    wanted = task(TENSION, BELOW)
    work(wanted, tmp_path, Serial())
    tables(wanted, tmp_path)
    rows = list(csv.DictReader((tmp_path / FAILURES).read_text().splitlines()))
    assert [row["point"] for row in rows] == ["1", "4", "7"]
    assert {row["sentence"] for row in rows} == {"internal error (ValueError: below zero)."}
    again = task(TENSION, BELOW)
    work(again, tmp_path, Serial())
    assert again.answering.asked == []
    tally = work(again, tmp_path, Serial(), retry=True)
    assert again.answering.asked == [1, 4, 7]
    assert (tally.wanted, tally.done, tally.failed) == (9, 6, 3)
    assert tables(again, tmp_path) == undisturbed


def test_a_failure_that_is_cured_leaves_the_table_of_failures(tmp_path):
    wanted = task(axis("b", -1.0, 2.0))
    work(wanted, tmp_path, Serial())
    tables(wanted, tmp_path)
    wanted.answering.answer = lambda point: task(TENSION).answering.answer(Point(1, (1.0,)))
    work(wanted, tmp_path, Serial(), retry=True)
    tables(wanted, tmp_path)
    assert not (tmp_path / FAILURES).exists()


def test_a_changed_study_begins_beside_and_keeps_the_earlier_sweep(tmp_path, undisturbed):
    first, other = task(TENSION, BELOW), task(TENSION, DIAMETER, name="b", study="t")
    work(first, tmp_path, Serial())
    said = []
    work(other, tmp_path, Serial(), say=said.append)
    assert said == ["The study has changed: a new sweep begins, the earlier one is kept beside it."]
    assert len(other.answering.asked) == 6
    assert tables(first, tmp_path) == undisturbed


def test_a_wider_sweep_over_the_same_study_takes_known_points_over(tmp_path):
    work(task(TENSION), tmp_path, Serial())
    more = axis("head.tension", 500.0, *TENSION.values)
    wider = task(more, name="b")
    tally = work(wider, tmp_path, Serial())
    assert wider.answering.asked == [1]
    assert (tally.wanted, tally.done, tally.failed) == (4, 4, 0)
    alone = task(more, name="b")
    work(alone, tmp_path / "alone", Serial())
    assert tables(wider, tmp_path) == tables(alone, tmp_path / "alone")


def test_parts_are_brought_together(tmp_path, undisturbed):
    said = []
    for number in (1, 2, 4):
        work(task(TENSION, BELOW), tmp_path, Serial(), Part(number, 4))
    work(task(DIAMETER, name="b"), tmp_path, Serial(), Part(1, 3))
    merge(task(TENSION, BELOW), tmp_path, said.append)
    assert said == ["sweep-1-of-3.sqlite belongs to another study or sweep and is left out."]
    assert set(read_sweep(tmp_path).numbers) == {2, 3, 8, 9}
    work(task(TENSION, BELOW), tmp_path, Serial(), Part(3, 4))
    merge(task(TENSION, BELOW), tmp_path, said.append)
    assert tables(task(TENSION, BELOW), tmp_path) == undisturbed
    with pytest.raises(OutputError, match="there are no parts"):
        merge(task(TENSION, BELOW), tmp_path / "empty", said.append)


@pytest.mark.parametrize("among", [1, 4, 9, 16])
def test_parts_share_all_points_out(among):
    ends = [Part(number, among).of(9) for number in range(1, among + 1)]
    assert [n for start, stop in ends for n in range(start, stop)] == list(range(9))


def test_progress_counts_every_point(tmp_path):
    seen = []
    work(task(TENSION, BELOW), tmp_path, Serial(), progress=seen.append)
    assert [tally.done + tally.failed for tally in seen] == list(range(10))
    assert (seen[-1].wanted, seen[-1].done, seen[-1].failed) == (9, 6, 3)


def test_points_that_share_no_mesh_are_not_sent_together(tmp_path):
    sent = []

    class Watching(Serial):
        def outcomes(self, answering, bundles):
            bundles = list(bundles)
            sent.extend(bundles)
            yield from super().outcomes(answering, iter(bundles))

    many = axis("head.tension", *range(1, 201))
    wanted = task(many, DIAMETER, shaping=[False, True])
    work(wanted, tmp_path, Watching())
    assert max(map(len, sent)) == 8
    assert all(len({wanted.points.mesh_of(point) for point in bundle}) == 1 for bundle in sent)
    assert sorted(point.number for bundle in sent for point in bundle) == list(range(1, 401))
