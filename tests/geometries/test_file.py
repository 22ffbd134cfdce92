"""Contours of files as kernel outlines: exact curves, named edges, placed as other shapes are."""

import ezdxf
import numpy as np
import pytest

from membrane import study_from
from membrane.errors import StudyError
from membrane.kernel import Kernel
from membrane.outline import draw
from membrane.study import read_study
from tests import zoo

PI = np.pi
HEAD = {"areal_density": 1.0, "tension": 1.0}
T = np.linspace(0.0, 1.0, 40)


def file(path, **keys):
    return {"shape": "file", "path": str(path), **keys}


@pytest.fixture
def dxf(tmp_path):
    def write(fill, name="drawing.dxf", units=6):
        document = ezdxf.new(units=units)
        fill(document.modelspace())
        document.saveas(tmp_path / name)
        return tmp_path / name

    return write


def drawn(outline, **more):
    """Outline, and points along each of its edges."""
    with zoo.drawn({"outline": outline, "head": HEAD, **more}) as (kernel, _, found, _):
        points = {
            edge: np.hstack(
                [
                    kernel.evaluate(c.tag, b[0] + T * (b[1] - b[0]))
                    for c in found.curves
                    if c.edge == edge
                    for b in [kernel.bounds(c.tag)]
                ]
            )
            for edge in found.edges
        }
    return found, points


def ellipse(space):
    space.add_ellipse((0, 0), (0.6, 0.8), 0.5, 0.0, PI)
    space.add_line((-0.6, -0.8), (0.6, 0.8), dxfattribs={"layer": "chord"})


def test_an_elliptic_arc_is_exact_and_edges_are_layers(dxf):
    found, points = drawn(file(dxf(ellipse)))
    assert set(found.edges) == {"rim", "chord"}
    x, y = points["rim"]
    u, v = 0.6 * x + 0.8 * y, -0.8 * x + 0.6 * y
    np.testing.assert_allclose(u**2 + (v / 0.5) ** 2, 1.0, rtol=1e-12)
    assert found.area == pytest.approx(PI * 0.25, rel=1e-10)


@pytest.mark.parametrize("ratio", [0.9, 0.1, 0.9999999])
@pytest.mark.parametrize("first", [0.0, 0.3, PI / 2, -PI / 3, PI / 6])
def test_a_whole_ellipse_is_exact_wherever_it_starts(dxf, ratio, first):
    """Also where its parts lie evenly about an axis."""
    major = (np.cos(0.3), np.sin(0.3))
    path = dxf(lambda space: space.add_ellipse((0.2, 0.1), major, ratio, first, first + 2 * PI))
    found, points = drawn(file(path))
    x, y = points["rim"]
    z = (x - 0.2 + 1j * (y - 0.1)) * np.exp(-0.3j)
    np.testing.assert_allclose(z.real**2 + (z.imag / ratio) ** 2, 1.0, rtol=1e-12)
    assert found.area == pytest.approx(PI * ratio, rel=1e-10)


def test_a_rational_spline_is_exact(dxf):
    """Weights 1, 1/sqrt 2, 1 make a quarter circle (Piegl & Tiller, The NURBS Book)."""

    def quarter(space):
        spline = space.add_spline(degree=2)
        spline.control_points = [(1, 0, 0), (1, 1, 0), (0, 1, 0)]
        spline.weights = [1.0, 0.5**0.5, 1.0]
        spline.knots = [0, 0, 0, 1, 1, 1]
        space.add_lwpolyline([(0, 1), (0, 0), (1, 0)], dxfattribs={"layer": "straight"})

    found, points = drawn(file(dxf(quarter)))
    np.testing.assert_allclose(np.hypot(*points["rim"]), 1.0, rtol=1e-12)
    assert found.area == pytest.approx(PI / 4, rel=1e-11)


def test_a_spline_is_cut_at_its_knots(dxf):
    def closed(space):
        space.add_open_spline([(0, 0), (1, 2), (3, 1), (4, -1), (6, 0)])
        space.add_line((0, 0), (6, 0))

    found, _ = drawn(file(dxf(lambda space: closed_loop(space))))
    assert len(found.curves) == 3


def closed_loop(space):
    space.add_open_spline([(0, 0), (1, 2), (3, 3), (4, 2), (6, 0)])
    space.add_line((0, 0), (6, 0))


@pytest.mark.parametrize("kind", ["dxf", "svg"])
def test_head_patch_and_port_of_one_drawing(files, kind):
    path = files / f"frame_drum.{kind}"
    found, points = drawn(
        file(path),
        patches=[{"name": "glue", **file(path, contour="paste"), "added_density": 1.0}],
        holes=[{"name": "hole", **file(path, contour="port"), "support": "free"}],
    )
    areas = {region.name: region.area for region in found.regions}
    expected = {"head": 0.178**2 - 0.045**2 - 0.01**2, "glue": 0.045**2}
    assert areas == pytest.approx({name: PI * r for name, r in expected.items()}, rel=1e-10)
    assert found.edges == ("rim", "hole")
    np.testing.assert_allclose(np.hypot(points["rim"][0] - 0.2, points["rim"][1] - 0.18), 0.178)


@pytest.fixture
def files():
    from tests.drawings.conftest import FILES

    return FILES


def test_a_drawing_is_placed_as_any_shape(files):
    path = files / "by_hand.dxf"
    found, _ = drawn(
        {"shape": "disc", "diameter": 2.0},
        holes=[{"name": "hole", **file(path), "at": [0.3, 0.4], "rotate": "30 deg"}],
    )
    assert found.area == pytest.approx(PI * (1 - (7 * 0.0254) ** 2), rel=1e-11)


def test_notes_reach_the_outline(dxf):
    def gap(space):
        space.add_lwpolyline([(0, 0), (1, 0), (1, 1), (0, 1), (0, 5e-6)])

    study = study_from({"outline": file(dxf(gap)), "head": HEAD})
    with Kernel.session() as kernel:
        (note,) = draw(kernel, study).notes
    assert note.startswith("drawing.dxf: closed 1 gap in the contour, the widest 0.005 mm")


def test_the_path_starts_from_the_study(dxf, tmp_path):
    dxf(closed_loop)
    study = tmp_path / "study.toml"
    study.write_text(
        '[outline]\nshape = "file"\npath = "drawing.dxf"\nunit = "mm"\n'
        "[head]\nareal_density = 1\ntension = 1\n"
    )
    read = read_study(study)
    assert read.outline.options.path == tmp_path / "drawing.dxf"
    assert read.source["outline"]["unit"] == 1e-3
    again = study_from(read.source)
    assert again.outline == read.outline
    with pytest.raises(StudyError, match=r"outline.path: there is no file"):
        study_from({"outline": file("drawing.dxf"), "head": HEAD})


@pytest.mark.parametrize(
    ("keys", "sentence"),
    [
        ({"contour": "zebra"}, 'outline: the drawing has no contour "zebra"; known are rim'),
        ({"unit": "kg"}, r'outline.unit: expected a unit of length such as "mm", got "kg"'),
        ({"unit": "0 mm"}, "outline.unit: expected a positive unit of length"),
        ({"layers": "rim"}, "outline.layers: expected a list"),
        ({"tolerance": -1.0}, "outline.tolerance: expected a positive length"),
        ({"toleranse": 1.0}, 'outline.toleranse: unknown key; did you mean "tolerance"'),
        ({"path": 3}, "outline.path: expected the path of a file, got 3"),
    ],
)
def test_wrong_keys(dxf, keys, sentence):
    with pytest.raises(StudyError) as caught:
        study_from({"outline": {**file(dxf(closed_loop)), **keys}, "head": HEAD})
    assert sentence in str(caught.value)
