"""The sweep of a study: values in SI units from ends, lists and tables."""

from __future__ import annotations

import math

import pytest

from membrane import study_from
from membrane.errors import StudyError
from membrane.records.sweep import Pick

KEYS = {
    "outline": {"shape": "regular_polygon", "sides": 5, "radius": "10 cm"},
    "head": {"areal_density": 0.262, "tension": {"along": 1, "across": 1, "angle": "30 deg"}},
}


def sweep_of(axes=None, **keys):
    table = keys if axes is None else keys | {"axes": axes}
    return study_from(KEYS | {"sweep": table}).sweep


def test_ends_and_steps_in_any_unit():
    sweep = sweep_of(
        [
            {"key": "head.tension.across", "from": "1 kN/m", "to": 4000, "steps": 4},
            {"key": "outline.radius", "from": "1 cm", "to": "1 m", "steps": 3}
            | {"spacing": "logarithmic"},
            {"key": "outline.sides", "values": [5, 7]},
            {"key": "head.tension.angle", "values": ["0 deg", "90 deg"]},
        ]
    )
    first, second, third, fourth = sweep.axes
    assert first.values == (1000.0, 2000.0, 3000.0, 4000.0)
    assert second.values == pytest.approx((0.01, 0.1, 1.0))
    assert (third.values, third.whole) == ((5, 7), True)
    assert fourth.values == (0.0, math.pi / 2)
    assert sweep.size == 4 * 3 * 2 * 2


def test_random_points():
    axis = {"key": "head.areal_density", "from": "0.2 kg/m^2", "to": "0.4 kg/m^2"}
    sweep = sweep_of([axis], pick="random", count=7, seed=3)
    assert (sweep.pick, sweep.size, sweep.seed) == (Pick.RANDOM, 7, 3)
    assert (sweep.axes[0].values, sweep.axes[0].between) == ((0.2, 0.4), True)


def test_a_table_with_units_in_headings_and_cells(tmp_path):
    file = tmp_path / "points.csv"
    file.write_text(
        "head.tension.across [kN/m],outline.radius,outline.sides\n"
        "1.1,356 mm,4\n\n.5e1,0.2,5\n1e0,14 in,6\n"
    )
    sweep = sweep_of(pick="table", file=str(file))
    tension, radius, sides = sweep.axes
    assert tension.values == (1100.0, 5000.0, 1000.0)
    assert radius.values == (0.356, 0.2, 0.3556)
    assert (sides.values, sides.whole) == ((4, 5, 6), True)
    assert sweep.size == 3


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        ("head.areal_density\n", "there are no points"),
        ("head.areal_density,outline.radius\n1\n", "point 1 has 1 values, the heading 2."),
        ("head.density\n1\n", 'no number "head.density"; did you mean "head.areal_density"?'),
        ("head.areal_density\n1\n-1\n", "head.areal_density of point 2: expected a positive"),
        ("head.areal_density\n1\n3 mm\n", "head.areal_density of point 2: expected an areal"),
        ("head.areal_density [mm]\n1\n", "expected an areal density"),
        ("head.areal_density,\n1,1\n", "a column has no heading"),
        ("outline.sides\n5.5\n", "outline.sides of point 1: expected a whole number"),
        ('head.areal_density\n"1\n', "the file cannot be read"),
    ],
)
def test_a_wrong_table_is_one_sentence(tmp_path, text, sentence):
    file = tmp_path / "points.csv"
    file.write_text(text)
    with pytest.raises(StudyError) as failure:
        sweep_of(pick="table", file=str(file))
    (problem,) = failure.value.problems
    assert problem.path == "sweep.file"
    assert problem.sentence.startswith("points.csv: ")
    assert sentence in problem.sentence


def test_what_is_understood_reads_back_as_the_same_sweep():
    axis = {"key": "outline.radius", "from": "1 cm", "to": "20 cm", "steps": 5}
    study = study_from(KEYS | {"sweep": {"axes": [axis]}})
    assert study_from(study.source).sweep == study.sweep
