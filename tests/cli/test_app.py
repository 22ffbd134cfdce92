"""The commands: what they print, where, and with which exit code."""

from __future__ import annotations

import json
from pathlib import Path
from types import SimpleNamespace

import pytest
from typer.testing import CliRunner

import membrane
from membrane import pipeline
from membrane.cli.app import app
from membrane.errors import MeshError, OutlineError, OutputError, SolveError

GOOD = """
title = "Small drum"
[outline]
shape = "disc"
diameter = "356 mm"
[[patches]]
name = "paste"
shape = "disc"
diameter = "90 mm"
at = ["0 mm", "20 mm"]
rotate = "90 deg"
added_density = "1.9 kg/m^2"
[[holes]]
name = "port"
shape = "polygon"
corners = [["90 mm", 0], ["95 mm", 0], ["90 mm", "5 mm"]]
support = "elastic"
stiffness = 2e4
mass = 0.1
[head]
areal_density = "0.262 kg/m^2"
tension = {along = "3 kN/m", across = "2.4 kN/m", angle = "30 deg"}
bedding = 10
[modes]
up_to = "800 Hz"
[products]
write = []
"""

SUMMARY = {"software": {}, "modes": [], "title": "µ"}


def invoke(*arguments: object):
    return CliRunner().invoke(app, [str(argument) for argument in arguments])


@pytest.fixture
def study(tmp_path: Path) -> Path:
    file = tmp_path / "drum.toml"
    file.write_text(GOOD)
    return file


@pytest.fixture
def solved(monkeypatch):
    """A pipeline that only pretends, and says what it was asked."""
    asked = SimpleNamespace(studies=[], stages=[])

    def run(study, progress):
        asked.studies.append(study)
        progress("mesh")
        return "spectrum"

    def write(spectrum, folder):
        assert spectrum == "spectrum"
        (folder / "summary.json").write_text(json.dumps(SUMMARY))
        (folder / "table.txt").write_text("1  100.0 Hz\n")

    monkeypatch.setattr(pipeline, "run", run)
    monkeypatch.setattr(pipeline, "write", write)
    return asked


def failing(monkeypatch, error: BaseException) -> None:
    def run(study, progress):
        raise error

    monkeypatch.setattr(pipeline, "run", run)


def test_run_prints_the_table_and_where_the_result_is(study, solved, tmp_path):
    done = invoke("run", study, "--out", tmp_path / "out")
    assert done.exit_code == 0
    assert done.stdout == f"1  100.0 Hz\nThe result is in {tmp_path / 'out'}.\n"
    assert done.stderr == ""
    assert solved.studies[0].title == "Small drum"
    assert json.loads((tmp_path / "out" / "summary.json").read_text()) == SUMMARY


def test_run_as_json(study, solved, tmp_path):
    done = invoke("run", study, "--out", tmp_path / "out", "--json")
    assert json.loads(done.stdout) == SUMMARY
    assert done.stderr == ""


def test_run_quietly(study, solved, tmp_path):
    done = invoke("run", study, "--out", tmp_path / "out", "--quiet")
    assert (done.exit_code, done.output) == (0, "")
    assert (tmp_path / "out" / "summary.json").is_file()


def test_a_folder_of_something_else_is_refused_before_anything_is_solved(study, solved, tmp_path):
    done = invoke("run", study, "--out", tmp_path)
    assert done.exit_code == 1
    assert done.stderr.startswith(f"{tmp_path} holds something else than an earlier result")
    assert solved.studies == []


def test_a_wrong_study_is_named_with_each_sentence(tmp_path):
    file = tmp_path / "wrong.toml"
    file.write_text('[outline]\nshape = "disc"\ndiameter = "3 kg"\n[head]\nareal_density = 1\n')
    for command in (("run", file, "--out", tmp_path / "out"), ("check", file)):
        done = invoke(*command)
        assert done.exit_code == 2
        assert done.stdout == ""
        assert done.stderr.splitlines() == [
            f'{file}: outline.diameter: expected a length such as "356 mm", got "3 kg".',
            f'{file}: head.tension: is missing; give it a value such as "3 kN/m".',
        ]


@pytest.mark.parametrize(
    ("error", "code", "prefixed"),
    [
        (OutlineError("The holes overlap."), 2, True),
        (MeshError("No mesh."), 1, True),
        (SolveError("No modes."), 1, True),
        (OutputError("No room."), 1, False),
    ],
)
def test_exit_code_of_each_class_of_error(study, tmp_path, monkeypatch, error, code, prefixed):
    failing(monkeypatch, error)
    done = invoke("run", study, "--out", tmp_path / "out")
    assert done.exit_code == code
    assert done.stderr == (f"{study}: {error}\n" if prefixed else f"{error}\n")
    assert not (tmp_path / "out").exists()


def test_an_error_of_our_own_making_is_one_line_too(study, tmp_path, monkeypatch):
    failing(monkeypatch, KeyError("x"))
    done = invoke("run", study, "--out", tmp_path / "out")
    assert done.exit_code == 1
    assert done.stderr == (
        "membrane: internal error (KeyError: 'x'); --traceback shows where it arose.\n"
    )


@pytest.mark.parametrize("first", [True, False])
def test_traceback_when_asked(study, tmp_path, monkeypatch, first):
    failing(monkeypatch, SolveError("No modes."))
    words = ["run", study, "--out", tmp_path / "out"]
    done = invoke(*(["--traceback", *words] if first else [*words, "--traceback"]))
    assert isinstance(done.exception, SolveError)


def test_ctrl_c_ends_quietly(study, tmp_path, monkeypatch):
    failing(monkeypatch, KeyboardInterrupt())
    done = invoke("run", study, "--out", tmp_path / "out")
    assert (done.exit_code, done.output) == (130, "Stopped; nothing was written.\n")


def test_check_says_what_would_be_solved(study):
    done = invoke("check", study)
    assert done.exit_code == 0
    assert done.stdout.splitlines() == [
        "title        Small drum",
        "outline      disc: diameter 0.356 m",
        "patch paste  disc: diameter 0.09 m, at (0, 0.02) m, turned by 1.5708 rad; "
        "added density 1.9 kg/m^2",
        "hole port    polygon: corners [[0.09, 0], [0.095, 0], [0.09, 0.005]] m",
        "head         areal density 0.262 kg/m^2, "
        "tension along 3000 N/m, across 2400 N/m, angle 0.523599 rad, bedding 10 N/m^3",
        "edge rim     fixed",
        "edge port    elastic, 20000 N/m^2, with 0.1 kg/m",
        "modes        all up to 800 Hz, to 0.01 cent, by shift_invert",
        "products     the summary only",
        "area         0.0995257 m^2",
        "mesh         about 2166 unknowns of degree 8 at the first try",
    ]


def test_check_names_lines_and_parts(tmp_path):
    file = tmp_path / "lines.toml"
    file.write_text(
        '[outline]\nshape = "disc"\ndiameter = 1\n[head]\nareal_density = 1\ntension = 1\n'
        '[[line_loads]]\nname = "wire"\nshape = "polyline"\npoints = [[0, 0], [0.1, 0]]\n'
        'line_density = "3 g/m"\nline_stiffness = 2\n'
        '[[slits]]\nname = "cut"\npoints = [[0, 0.1], [0.1, 0.1]]\nleft = {support = "free"}\n'
        '[[edge_parts]]\nname = "lugs"\nedge = "rim"\nfrom = "0 deg"\nto = "9 deg"\nrepeat = 6\n'
        '[[holes]]\nname = "port"\nshape = "disc"\ndiameter = 0.1\nat = [0.3, 0]\n'
        '[[edge_parts]]\nname = "whole"\nedge = "port"\ncurves = [1, 1]\n'
    )
    shown = invoke("check", file).stdout.splitlines()
    for line in (
        "line load wire   polyline: points [[0, 0], [0.1, 0]] m, closed False; "
        "line density 0.003 kg/m; line stiffness 2 N/m^2",
        "slit cut         polyline: points [[0, 0.1], [0.1, 0.1]] m, closed False",
        "edge part lugs   0 to 0.15708 rad of rim, 6 times",
        "edge part whole  curves 1 to 1 of port",
        "edge lugs        fixed",
        "edge cut.left    free",
        "edge cut.right   fixed",
    ):
        assert line in shown


def test_check_says_how_a_coefficient_varies(tmp_path):
    (tmp_path / "points.csv").write_text("-1,-1,1\n1,-1,2\n0,1,3\n")
    file = tmp_path / "study.toml"
    file.write_text(
        '[outline]\nshape = "disc"\ndiameter = 1\n'
        '[[patches]]\nname = "pad"\nshape = "disc"\ndiameter = 0.1\n'
        'bedding = {csv = "points.csv", outside = "nearest"}\n'
        '[head]\nareal_density = {formula = "1 + r", unit = "g/m^2"}\n'
        'tension = {along = {formula = "2 + x"}, across = 1}\n'
        '[edges.rim]\nsupport = "free"\nmass = {formula = "1 + x"}\n'
    )
    done = invoke("check", file)
    assert done.exit_code == 0
    assert done.stdout.splitlines()[1:4] == [
        f"patch pad  disc: diameter 0.1 m; bedding by the csv {tmp_path}/points.csv in N/m^3",
        "head       areal density by the formula 1 + r in g/m^2, "
        "tension along by the formula 2 + x in N/m, across 1 N/m, angle 0 rad",
        "edge rim   free, with a mass by the formula 1 + x in kg/m",
    ]


def test_check_says_how_a_drawing_was_taken(tmp_path):
    path = '<polyline points="0 0 9 0 9 9 0 9 0 .0005"/>'
    page = 'xmlns="http://www.w3.org/2000/svg" width="10mm" viewBox="0 0 10 10"'
    (tmp_path / "head.svg").write_text(f"<svg {page}>{path}</svg>")
    file = tmp_path / "study.toml"
    file.write_text(
        '[outline]\nshape = "file"\npath = "head.svg"\n'
        "[head]\nareal_density = 0.26\ntension = 3000\n"
    )
    done = CliRunner().invoke(app, ["check", str(file)])
    assert done.exit_code == 0
    assert "layers" not in done.stdout
    assert "note      head.svg: closed 1 gap in the contour, the widest 0.0005 mm" in done.stdout


def test_plugins_are_listed(monkeypatch):
    done = invoke("plugins")
    assert done.exit_code == 0
    head, *rows = done.stdout.splitlines()
    assert head.split() == ["kind", "name", "package", "what", "it", "is"]
    assert any(row.split()[:3] == ["outline", "disc", "membrane"] for row in rows)
    assert "A disc about the origin; its edge is the rim." in done.stdout


def test_version_and_help():
    assert invoke("--version").stdout == f"membrane {membrane.__version__}\n"
    shown = invoke("--help").stdout
    assert all(command in shown for command in ("run", "check", "plugins"))


def test_an_unknown_command():
    done = invoke("rum")
    assert done.exit_code == 2
    assert "No such command" in done.stderr
