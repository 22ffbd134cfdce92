"""The command sweep: what it prints and writes, and with which exit code."""

from __future__ import annotations

import pytest
from typer.testing import CliRunner

from membrane.cli.app import app
from membrane.sweep import solving

STUDY = """
[outline]
shape = "disc"
diameter = "356 mm"
[[holes]]
name = "port"
shape = "disc"
diameter = "20 mm"
at = ["100 mm", 0]
[head]
areal_density = "0.262 kg/m^2"
tension = "3 kN/m"
[modes]
count = 2
[products]
write = []
[sweep]
[[sweep.axes]]
key = "holes.port.at[1]"
values = ["100 mm", "177 mm"]
[[sweep.axes]]
key = "head.tension"
from = "2 kN/m"
to = "3 kN/m"
steps = 2
"""


def invoke(*arguments: object):
    return CliRunner().invoke(app, [str(argument) for argument in arguments])


@pytest.fixture
def study(tmp_path):
    file = tmp_path / "drum.toml"
    file.write_text(STUDY)
    return file


def sweep(study, out, *others):
    return invoke("sweep", study, "--out", out, "--workers", 1, *others)


@pytest.mark.slow
def test_a_sweep_with_impossible_points(study, tmp_path):
    out = tmp_path / "out"
    done = sweep(study, out)
    assert (done.exit_code, done.stderr) == (0, "")
    first, failed, worst, branches, where = done.stdout.splitlines()
    assert first == "2 of 4 points are done."
    assert failed == "2 failed; failures.csv says why, --retry tries them again."
    assert worst.startswith("No frequency is off by more than ")
    assert worst.endswith("2 full solves.")
    assert branches == (
        "No branches: modes cannot be followed from mesh to mesh, as holes.port.at[1] would need."
    )
    assert where == f"The tables are in {out}."
    table = (out / "points.csv").read_text().splitlines()
    assert len(table) == 1 + 2 * 2
    failures = (out / "failures.csv").read_text()
    assert failures.count("port") == 1 + 2
    again = sweep(study, out)
    assert again.stdout.startswith("Going on: 4 of 4 points are there already.\n")
    assert (out / "points.csv").read_text().splitlines() == table
    for part in ("1/2", "2/2"):
        done = sweep(study, tmp_path / "parts", "--part", part, "--quiet")
        assert (done.exit_code, done.output) == (0, "")
    assert not (tmp_path / "parts" / "points.csv").exists()
    done = invoke("sweep", study, "--out", tmp_path / "parts", "--merge", "--parquet")
    assert done.stdout.startswith("2 of 4 points are done.\n2 failed;")
    assert (tmp_path / "parts" / "points.csv").read_text().splitlines() == table
    assert (tmp_path / "parts" / "failures.csv").read_text() == failures
    assert (tmp_path / "parts" / "points.parquet").is_file()


@pytest.mark.parametrize(
    ("options", "sentence"),
    [
        (("--part", "3/2"), '--part: expected a part such as "3/16", got "3/2".'),
        (("--part", "a"), '--part: expected a part such as "3/16", got "a".'),
        (("--workers", "0"), "--workers: expected at least 1 process, got 0."),
        (("--workers", "2", "--scheduler", "tcp://a:1"), "--workers: the scheduler has its own"),
        (("--merge", "--part", "1/2"), "--merge solves nothing; leave --part out."),
        (("--merge", "--retry", "--workers", "2"), "--merge solves nothing; leave --workers,"),
    ],
)
def test_options_that_make_no_sense(study, tmp_path, options, sentence):
    done = invoke("sweep", study, "--out", tmp_path / "out", *options)
    assert (done.exit_code, done.stdout) == (2, "")
    assert sentence in done.stderr
    assert not (tmp_path / "out").exists()


def test_a_study_without_a_sweep(study, tmp_path):
    study.write_text(STUDY.partition("[sweep]")[0])
    done = sweep(study, tmp_path / "out")
    assert done.exit_code == 2
    assert "the study has no sweep; give [[sweep.axes]]" in done.stderr


def test_ctrl_c_says_how_to_go_on(study, tmp_path, monkeypatch):
    def stop(self, point):
        raise KeyboardInterrupt

    monkeypatch.setattr(solving.ReducedSolves, "answer", stop)
    done = sweep(study, tmp_path / "out")
    assert done.exit_code == 130
    assert done.stderr == "Stopped; the points so far are kept. Run it again to go on.\n"


def test_check_says_how_large_a_sweep_is(study, monkeypatch):
    monkeypatch.setattr(solving, "timed_sample", lambda study: solving.Sample(100.0, 3600.0))
    lines = invoke("check", study).stdout.splitlines()
    assert "sweep                  grid: 4 points, 2 different meshes" in lines
    assert "axis holes.port.at[1]  2 values from 0.1 to 0.177" in lines
    assert (
        "time                   about 4.1 hours of one processor if all is solved in full: "
        "1e+02 s a mesh, 3.6e+03 s a solve, both timed on the study's own values"
    ) in lines


def test_check_says_where_a_reduced_model_will_answer(study, monkeypatch):
    monkeypatch.setattr(solving, "timed_sample", lambda study: solving.Sample(1.0, 1.0))
    study.write_text(STUDY.replace("steps = 2", "steps = 500"))
    (time,) = (line for line in invoke("check", study).stdout.splitlines() if "time" in line)
    assert time.endswith(
        "; far less where a reduced model answers, as from 500 points on one mesh on"
    )
