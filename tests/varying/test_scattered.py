"""Scattered points: planes come out exactly, places outside are refused or brought in."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.varying.scattered import through_points

PLACES = np.vstack([np.random.default_rng(2).uniform(-1, 1, (80, 2)), np.eye(2) * 2 - 1, [[1, 1]]])


def plane(x, y):
    return 3.0 + 2.0 * x - 0.5 * y


@pytest.fixture
def file(tmp_path):
    rows = (f"{x!r},{y!r},{plane(x, y)!r}" for x, y in PLACES.tolist())
    path = tmp_path / "points.csv"
    path.write_text("\n".join(["x,y,value", *rows, ""]))
    return path


def test_a_plane_is_exact(file):
    x, y = np.random.default_rng(3).uniform(-0.5, 0.5, (2, 200))
    assert np.abs(through_points(file, False)(x, y) - plane(x, y)).max() < 1e-11


def test_the_points_themselves(file):
    x, y = PLACES[:80].T
    assert np.abs(through_points(file, False)(x, y) - plane(x, y)).max() < 1e-12


def test_outside_there_is_nothing(file):
    assert np.isnan(through_points(file, False)(np.array([3.0]), np.array([0.0]))).all()


def test_or_the_value_of_the_nearest_place_of_the_hull(tmp_path):
    square = tmp_path / "square.csv"
    square.write_text("0,0,0\n1,0,1\n1,1,1\n0,1,0\n")
    x, y = np.array([2.0, 0.4, -1.0, 0.5]), np.array([0.5, 3.0, -1.0, 0.5])
    found = through_points(square, True)(x, y)
    assert np.abs(found - [1.0, 0.4, 0.0, 0.5]).max() < 1e-8


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("x,y,value\n0,0,1\n1,0,1\n", "holds 2 points; give 3 or more"),
        ("0,0,1\n1,0,1\n2,0,1\n", "lie on one line"),
        ("0,0,1\n1,0,1\n0,1,1\n0,0,2\n", "two values at one place"),
        ("x,y\n0,0\n", 'line 1 of .* is "x,y"; expected three numbers x, y, value'),
        ("0,0,1\n1,0,one\n", 'line 2 of .* is "1,0,one"'),
        ("0,0,1\n1,0,nan\n", "line 2"),
        ("", "holds 0 points"),
        ("0;0;1\n", "line 1"),
    ],
)
def test_unsound_files(tmp_path, text, said):
    path = tmp_path / "points.csv"
    path.write_text(text)
    with pytest.raises(ValueError, match=said):
        through_points(path, False)


def test_files_that_are_none(tmp_path):
    with pytest.raises(ValueError, match="there is no file"):
        through_points(tmp_path / "none.csv", False)
    with pytest.raises(ValueError, match="cannot be read"):
        through_points(tmp_path, False)
    (tmp_path / "raw.csv").write_bytes(b"\xff\xfe\x00")
    with pytest.raises(ValueError, match="cannot be read"):
        through_points(tmp_path / "raw.csv", False)
