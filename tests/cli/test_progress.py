"""Progress shows on a terminal, after a while, and nowhere else."""

from __future__ import annotations

import time

import pytest

from membrane.cli import progress
from membrane.cli.progress import shown_count, shown_progress
from membrane.sweep.work import Tally


@pytest.fixture
def _terminal(monkeypatch):
    monkeypatch.setenv("FORCE_COLOR", "1")
    monkeypatch.setenv("TERM", "xterm")


def work(quiet: bool = False) -> None:
    with shown_progress(quiet) as tell:
        tell("mesh")
        time.sleep(0.3)
        tell("modes")
        time.sleep(0.3)


@pytest.mark.usefixtures("_terminal")
def test_long_work_tells_its_stages(monkeypatch, capsys):
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    work()
    out, err = capsys.readouterr()
    assert out == ""
    assert "mesh …" in err
    assert "modes …" in err


@pytest.mark.usefixtures("_terminal")
def test_short_work_says_nothing(monkeypatch, capsys):
    monkeypatch.setattr(progress, "PATIENCE", 60.0)
    work()
    assert "mesh" not in "".join(capsys.readouterr())


@pytest.mark.usefixtures("_terminal")
def test_quiet_work_says_nothing(monkeypatch, capsys):
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    work(quiet=True)
    assert capsys.readouterr() == ("", "")


def test_silence_where_there_is_no_terminal(monkeypatch, capsys):
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    monkeypatch.delenv("FORCE_COLOR", raising=False)
    work()
    assert capsys.readouterr() == ("", "")


def test_an_error_passes_through_and_ends_the_display(monkeypatch):
    monkeypatch.setenv("FORCE_COLOR", "1")
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    with pytest.raises(ZeroDivisionError), shown_progress(quiet=False):
        raise ZeroDivisionError


def count(quiet: bool = False) -> None:
    with shown_count(quiet) as tell:
        for done in range(4):
            tell(Tally(40, done, 2))
            time.sleep(0.1)


@pytest.mark.usefixtures("_terminal")
def test_points_are_counted_with_their_rate(capsys):
    count()
    out, err = capsys.readouterr()
    assert out == ""
    assert "5/40" in err
    assert "a second" in err


@pytest.mark.usefixtures("_terminal")
def test_points_are_not_counted_quietly(capsys):
    count(quiet=True)
    assert capsys.readouterr() == ("", "")


def test_points_are_not_counted_where_there_is_no_terminal(monkeypatch, capsys):
    monkeypatch.delenv("FORCE_COLOR", raising=False)
    count()
    assert capsys.readouterr() == ("", "")
