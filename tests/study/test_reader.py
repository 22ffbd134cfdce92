"""A study is read into SI numbers, and its resolved source reads as the same study."""

from __future__ import annotations

import json
import tomllib
from math import pi, radians
from pathlib import Path

import numpy as np
import pytest

from membrane.records.study import Along, Edge, ModesWanted, Study, Support
from membrane.study import read_study, study_from

WHOLE = """
title = "Loaded frame drum"

[outline]
shape = "disc"
diameter = "14 in"
rotate = "10 deg"

[[patches]]
name = "paste"
shape = "ellipse"
width = "90 mm"
height = "6 cm"
at = ["0 mm", "20 mm"]
rotate = "30 deg"
added_density = "1900 g/m^2"

[[patches]]
name = "tape"
shape = "rectangle"
width = 0.02
height = 0.03
areal_density = 0.5
tension = {along = "3 kN/m", across = "2.4 kN/m", angle = "30 deg"}
bedding = "0 N/m^3"

[[holes]]
name = "port"
shape = "disc"
diameter = "20 mm"
at = ["110 mm", "0 mm"]
support = "elastic"
stiffness = "2e4 N/m^2"
mass = "20 g/m"

[[holes]]
name = "slot"
shape = "stadium"
straight = "10 mm"
width = "2 mm"
at = [-0.1, 0.0]

[head]
areal_density = "0.262 kg/m^2"
tension = {xx = "3 kN/m", xy = "-100 N/m", yy = "2 N/mm"}
bedding = "1e5 N/m^3"

[edges.rim]
support = "free"
mass = "0.1 kg/m"

[edges.slot]
support = "free"

[modes]
up_to = "0.8 kHz"
accuracy = "0.001 cent"
bracket = false
degree = 6
eigensolver = "dense"
ratio_to = 2
reference_pitch = 442

[products]
write = []
"""

SHORTEST = {
    "outline": {"shape": "disc", "diameter": 1},
    "head": {"areal_density": 1, "tension": 1},
}


@pytest.fixture
def whole(tmp_path: Path) -> Study:
    file = tmp_path / "whole.toml"
    file.write_text(WHOLE)
    return read_study(file)


def same_tension(one, other) -> bool:
    if one is None or other is None:
        return one is other
    keys = [[(part.key, part.magnitude) for part in t.parts] for t in (one, other)]
    return keys[0] == keys[1] and np.array_equal(one.tensor(), other.tensor())


def assert_same(one: Study, other: Study) -> None:
    """Equal field by field; tensions hold arrays, which == does not compare."""
    for name in ("title", "outline", "holes", "edges", "modes", "products", "terms", "source"):
        assert getattr(one, name) == getattr(other, name), name
    assert one.head.areal_density == other.head.areal_density
    assert one.head.bedding == other.head.bedding
    assert same_tension(one.head.tension, other.head.tension)
    for mine, theirs in zip(one.patches, other.patches, strict=True):
        for name in ("name", "shape", "areal_density", "added_density", "bedding"):
            assert getattr(mine, name) == getattr(theirs, name), name
        assert same_tension(mine.tension, theirs.tension)


def test_the_shortest_study_has_the_defaults():
    study = study_from(SHORTEST)
    assert study.title == ""
    assert study.modes == ModesWanted()
    assert study.products.write == ("table", "vtu")
    assert study.edges == {"rim": Edge()}
    assert study.patches == study.holes == ()
    assert np.array_equal(study.head.tension.tensor(), np.eye(2))


def test_shapes(whole):
    assert whole.title == "Loaded frame drum"
    assert whole.outline.plugin == "disc"
    assert whole.outline.options.diameter == 0.3556
    assert whole.outline.rotate == pytest.approx(radians(10), rel=1e-15)
    paste, tape = whole.patches
    assert (paste.shape.options.width, paste.shape.options.height) == (0.09, 0.06)
    assert paste.shape.at == (0.0, 0.02)
    assert paste.shape.rotate == pytest.approx(pi / 6, rel=1e-15)
    assert (tape.shape.at, tape.shape.rotate) == ((0.0, 0.0), 0.0)


def test_properties_of_patches(whole):
    paste, tape = whole.patches
    assert (paste.added_density, paste.areal_density, paste.bedding) == (1.9, None, None)
    assert paste.tension is None
    assert (tape.added_density, tape.areal_density, tape.bedding) == (None, 0.5, 0.0)


def test_woven_tension(whole):
    """The tensor R diag(a, b) R^T written out."""
    c, s = np.cos(pi / 6), np.sin(pi / 6)
    turn = np.array([[c, -s], [s, c]])
    expected = turn @ np.diag([3000.0, 2400.0]) @ turn.T
    assert np.abs(whole.patches[1].tension.tensor() - expected).max() < 1e-9


def test_tensor_of_the_head(whole):
    expected = np.array([[3000.0, -100.0], [-100.0, 2000.0]])
    assert np.array_equal(whole.head.tension.tensor(), expected)
    assert (whole.head.areal_density, whole.head.bedding) == (0.262, 1e5)


def test_edges_stand_under_their_own_names_wherever_they_are_described(whole):
    assert whole.edges == {
        "rim": Edge(Support.FREE, 0.0, 0.1),
        "port": Edge(Support.ELASTIC, 2e4, 0.02),
        "slot": Edge(Support.FREE),
    }


def test_modes(whole):
    assert whole.modes == ModesWanted(
        up_to=800.0,
        accuracy=0.001,
        bracket=False,
        degree=6,
        eigensolver="dense",
        ratio_to=2,
        reference_pitch=442.0,
    )


def test_the_source_reads_as_the_same_study(whole):
    assert_same(study_from(whole.source), whole)


def test_the_source_is_plain_data_in_si(whole):
    assert json.loads(json.dumps(whole.source)) == whole.source
    assert whole.source["outline"]["diameter"] == 0.3556
    assert whole.source["head"]["tension"] == {"xx": 3000.0, "xy": -100.0, "yy": 2000.0}
    assert "count" not in whole.source["modes"]


def test_the_source_states_the_defaults():
    source = study_from(SHORTEST).source
    assert source["modes"]["count"] == 20
    assert source["edges"] == {"rim": {"support": "fixed"}}
    assert_same(study_from(source), study_from(SHORTEST))


def test_the_given_data_is_left_alone():
    keys = json.loads(json.dumps(SHORTEST))
    study_from(keys)
    assert keys == SHORTEST


@pytest.mark.parametrize(
    "file", sorted((Path(__file__).parents[2] / "scripts").glob("*.toml")), ids=lambda f: f.stem
)
def test_example_studies(file):
    study = read_study(file)
    assert study.title
    assert_same(study_from(study.source), study)


def test_numpy_numbers_are_numbers():
    keys = {**SHORTEST, "outline": {"shape": "disc", "diameter": np.float64(2.0)}}
    assert study_from(keys).outline.options.diameter == 2.0
    keys = {**SHORTEST, "outline": {"shape": "disc", "diameter": np.int64(2)}}
    assert study_from(keys).outline.options.diameter == 2.0
    keys = {**SHORTEST, "modes": {"count": np.int64(3)}}
    assert study_from(keys).modes.count == 3


def test_numpy_arrays_are_lists():
    corners = np.array([[0, 0], [1, 0], [0, 1]])
    study = study_from({**SHORTEST, "outline": {"shape": "polygon", "corners": corners}})
    assert study.outline.options.corners == ((0.0, 0.0), (1.0, 0.0), (0.0, 1.0))
    assert json.loads(json.dumps(study.source)) == study.source


def test_a_byte_order_mark_does_no_harm(tmp_path):
    file = tmp_path / "study.toml"
    file.write_text(WHOLE, encoding="utf-8-sig")
    assert read_study(file).title == "Loaded frame drum"


SCRIPT = '''
"""A square of side 2 a."""
from __future__ import annotations
from dataclasses import dataclass
from membrane.records.outline import Drawing
from membrane.units import PositiveLength

@dataclass(frozen=True)
class Options:
    a: PositiveLength

def edges(options):
    return ("south", "east", "north", "west")

def build(geometry, options):
    raise NotImplementedError
'''


def test_an_outline_script_beside_the_study(tmp_path):
    (tmp_path / "math.py").write_text(SCRIPT)
    file = tmp_path / "study.toml"
    file.write_text(
        '[outline]\nscript = "math.py"\na = "1 cm"\n[edges.east]\nsupport = "free"\n'
        "[head]\nareal_density = 1\ntension = 1\n"
    )
    study = read_study(file)
    assert study.outline.plugin == str(tmp_path / "math.py")
    assert study.outline.options.a == 0.01
    assert study.edges["east"].support is Support.FREE
    assert study.edges["north"].support is Support.FIXED
    assert_same(study_from(study.source, base="/nowhere"), study)


LINES = """
outline = {shape = "disc", diameter = "356 mm"}
head = {areal_density = 0.3, tension = "3 kN/m"}
[[line_loads]]
name = "hoop"
shape = "disc"
diameter = "250 mm"
line_density = "20 g/m"
[[line_loads]]
name = "seam"
shape = "arc"
radius = "50 mm"
start = "10 deg"
end = "200 deg"
line_stiffness = 3.0
[[slits]]
name = "cut"
points = [[0, 0], ["10 mm", 0]]
support = "free"
mass = 0.1
right = {support = "elastic", stiffness = 4.0}
[[edge_parts]]
name = "lugs"
edge = "rim"
from = "-5 deg"
to = "5 deg"
repeat = 6
[[edge_parts]]
name = "gap"
edge = "rim"
from = "40 mm"
to = "60 mm"
[edges.gap]
support = "free"
"""


def test_lines_slits_and_edge_parts():
    found = study_from(tomllib.loads(LINES))
    hoop, seam = found.line_loads
    assert (hoop.name, hoop.density, hoop.stiffness) == ("hoop", 0.02, 0.0)
    assert (seam.line.plugin, seam.density, seam.stiffness) == ("arc", 0.0, 3.0)
    (cut,) = found.slits
    assert cut.line.options.points == ((0.0, 0.0), (0.01, 0.0))
    assert found.edges == {
        "rim": Edge(),
        "lugs": Edge(),
        "gap": Edge(Support.FREE),
        "cut.left": Edge(Support.FREE, mass=0.1),
        "cut.right": Edge(Support.ELASTIC, 4.0),
    }
    lugs, gap = found.edge_parts
    assert (lugs.along, lugs.repeat, lugs.stop) == (Along.ANGLE, 6, pytest.approx(np.pi / 36))
    assert (gap.along, gap.start, gap.stop) == (Along.LENGTH, 0.04, 0.06)


def test_the_source_of_lines_reads_as_the_same_study():
    found = study_from(tomllib.loads(LINES))
    again = study_from(found.source)
    for name in ("line_loads", "slits", "edge_parts", "edges", "source"):
        assert getattr(again, name) == getattr(found, name)


FIELDS = """
def density(x, y):
    return 1 + x
"""


@pytest.fixture
def varying(tmp_path: Path) -> Study:
    """A study with a formula, a CSV and functions of the outline's script and another."""
    (tmp_path / "square.py").write_text(SCRIPT + FIELDS)
    (tmp_path / "more.py").write_text(FIELDS)
    (tmp_path / "points.csv").write_text("0,0,1\n1,0,2\n0,1,3\n")
    file = tmp_path / "study.toml"
    file.write_text(
        '[outline]\nscript = "square.py"\na = "1 cm"\n'
        '[head]\nareal_density = {function = "density", unit = "g/m^2"}\n'
        'tension = {along = {formula = "2 + r", unit = "kN/m"}, across = 1}\n'
        'bedding = {csv = "points.csv", outside = "nearest", kinks = [["1 cm", 0]]}\n'
        '[edges.east]\nsupport = "elastic"\n'
        'stiffness = {function = "density", script = "more.py"}\n'
    )
    return read_study(file)


def test_coefficients_that_vary(varying):
    x, y = np.array([0.0, 0.25]), np.array([0.0, 0.25])
    along, across = varying.head.tension.parts
    assert varying.head.areal_density(x, y).tolist() == [1e-3, 1.25e-3]
    assert np.allclose(along.magnitude(x, y), [2000.0, 1000.0 * (2 + 0.125**0.5)])
    assert across.magnitude == 1.0
    assert np.allclose(varying.head.bedding(x, y), [1.0, 1.75])
    assert varying.edges["east"].stiffness(x, y).tolist() == [1.0, 1.25]
    assert along.magnitude.kinks == ((0.0, 0.0),)
    assert varying.head.bedding.kinks == ((0.01, 0.0),)
    assert len(varying.functions) == 4


def test_their_source_reads_as_the_same_study(varying):
    source = json.loads(json.dumps(varying.source))
    assert source["head"]["areal_density"]["unit"] == "g/m^2"
    assert Path(source["head"]["bedding"]["csv"]).is_absolute()
    assert source["edges"]["east"]["stiffness"]["script"].endswith("more.py")
    again = study_from(source, base="/nowhere")
    assert_same(again, varying)
    assert again.source == varying.source
