"""The command sweep's branches: right by exact names, the same however they were reached."""

from __future__ import annotations

import csv
import sqlite3

import numpy as np
import pytest
from typer.testing import CliRunner

from membrane.cli.app import app
from membrane.sweep import branching
from membrane.sweep.branched import Branches
from membrane.sweep.results import read_sweep
from tests.branches.exact import heavy_centre

STUDY = """
title = "Disc, heavy centre"
[outline]
shape = "disc"
diameter = 2.0
[[patches]]
name = "paste"
shape = "disc"
diameter = 0.9
areal_density = 1.0
[head]
areal_density = 1.0
tension = 1.0
[modes]
count = 10
accuracy = "0.1 cent"
[sweep]
"""
DENSITY = """
[[sweep.axes]]
key = "patches.paste.areal_density"
values = [0.5, 1.0, 2.0, 4.0, 6.0]
"""
TENSION = """
[[sweep.axes]]
key = "head.tension"
values = [1.0, 4.0]
"""
SHEAR = """
[[sweep.axes]]
key = "head.tension.xx"
values = [3.0, 1.0]
[[sweep.axes]]
key = "head.tension.xy"
values = [0.0, 1.5]
"""
RANDOM = """
pick = "random"
count = 2
[[sweep.axes]]
key = "head.tension"
from = 1.0
to = 4.0
"""


def invoke(file, out, *others):
    arguments = ["sweep", str(file), "--out", str(out), *others]
    done = CliRunner().invoke(app, arguments)
    assert (done.exit_code, done.stderr) == (0, "")
    return done.stdout


def rows(out):
    return list(csv.DictReader((out / "points.csv").read_text().splitlines()))


@pytest.fixture
def study(tmp_path):
    file = tmp_path / "drum.toml"
    file.write_text(STUDY + DENSITY)
    return file


@pytest.mark.slow
def test_branches_bear_the_names_of_bessel_functions(study, tmp_path):
    """Exact (m, n) of a disc that is heavier within a circle, by Bessel functions."""
    out = tmp_path / "out"
    assert "lost" not in invoke(study, out, "--workers", "1")
    names, ranks = {}, {}
    for density in (0.5, 1.0, 2.0, 4.0, 6.0):
        here = [row for row in rows(out) if float(row["patches.paste.areal_density"]) == density]
        values = [(2.0 * np.pi * float(row["frequency_hz"])) ** 2 for row in here]
        curves = heavy_centre(density, 0.45, 1.2 * max(values))
        for row, value in zip(here, values, strict=True):
            hits = {name for name, exact in curves.items() if abs(exact / value - 1.0) < 2e-5}
            names.setdefault(row["branch"], []).append(hits)
            ranks.setdefault(row["branch"], set()).add(row["mode"])
    assert all(set.intersection(*hits) for hits in names.values())
    assert sum(len(seen) > 1 for seen in ranks.values()) >= 4  # branches that changed their rank
    assert (out / "branches.png").read_bytes().startswith(b"\x89PNG")


@pytest.mark.slow
def test_the_table_is_the_same_by_parts_and_when_followed_anew(study, tmp_path):
    light = STUDY.replace("count = 10", "count = 6") + DENSITY.replace("1.0, 2.0, 4.0, ", "2.0, ")
    study.write_text(light + TENSION)
    invoke(study, tmp_path / "out", "--workers", "1")
    table = (tmp_path / "out" / "points.csv").read_bytes()
    for part in ("1/2", "2/2"):
        invoke(study, tmp_path / "parts", "--part", part, "--workers", "1")
    invoke(study, tmp_path / "parts", "--merge")
    assert (tmp_path / "parts" / "points.csv").read_bytes() == table
    connection = sqlite3.connect(tmp_path / "out" / "sweep.sqlite")
    connection.execute("DELETE FROM branches")  # as if it had been killed in between
    connection.commit()
    connection.close()
    invoke(study, tmp_path / "out", "--workers", "1", "--no-branches")
    assert {row["branch"] for row in rows(tmp_path / "out")} == {""}
    invoke(study, tmp_path / "out", "--workers", "1")
    assert (tmp_path / "out" / "points.csv").read_bytes() == table
    assert not {"1", "5", "8"} - {row["branch"] for row in rows(tmp_path / "out")}
    tight = [row["branch"] for row in rows(tmp_path / "out") if float(row["head.tension"]) > 1.0]
    loose = [row["branch"] for row in rows(tmp_path / "out") if float(row["head.tension"]) == 1.0]
    assert tight == loose  # nothing but the pitch changes with the tension


@pytest.mark.slow
def test_random_points_have_no_branches(study, tmp_path):
    study.write_text(STUDY + RANDOM)
    said = invoke(study, tmp_path / "out", "--workers", "1")
    assert (
        'No branches: they are followed along the axes of a grid, not with pick = "random".' in said
    )
    assert {row["branch"] for row in rows(tmp_path / "out")} == {""}
    assert not (tmp_path / "out" / "branches.png").exists()


@pytest.mark.slow
def test_a_point_that_has_no_modes_is_in_the_way(study, tmp_path):
    tension = "tension = {xx = 3.0, xy = 0.0, yy = 2.0}"
    study.write_text(STUDY.replace("tension = 1.0", tension) + SHEAR)
    said = invoke(study, tmp_path / "out", "--workers", "1").splitlines()
    assert said[0] == "3 of 4 points are done."
    assert said[-2].startswith("No branches: on the way from point to point, head.tension: a mem")
    assert {row["branch"] for row in rows(tmp_path / "out")} == {""}


@pytest.mark.slow
def test_lost_branches_are_named(study, tmp_path, monkeypatch):
    numbers = np.tile(np.arange(1, 11), (5, 1))
    numbers[3:, 7] = 15
    lost = ((8, 4), *((n, 5) for n in range(1, 7)))
    monkeypatch.setattr(branching, "followed", lambda *others: Branches(numbers, lost))
    said = invoke(study, tmp_path / "out", "--workers", "1")
    assert (
        "Branches lost on the way: 8 at point 4, 1 at point 5, 2 at point 5, 3 at point 5, "
        "4 at point 5, 2 more; what goes on there has a new number."
    ) in said.splitlines()
    assert read_sweep(tmp_path / "out").lost == lost
