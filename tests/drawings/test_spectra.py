"""Heads drawn elsewhere against closed forms and published spectra, with defaults only."""

import json
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from scipy.special import jn_zeros

from membrane import run, study_from
from membrane.drawings.pieces import Bezier
from tests.drawings.conftest import FILES

HEAD = {"areal_density": 1.0, "tension": 1.0}
REFERENCE = json.loads((Path(__file__).parents[1] / "reference" / "spectra.json").read_text())
DISC = np.sort([v for m in range(20) for v in np.repeat(jn_zeros(m, 12) ** 2, 1 + (m > 0))])[:20]
"""j_{m,n}^2, twice for m > 0: the fixed disc of radius 1 (Rayleigh)."""

pytestmark = pytest.mark.slow


def reference(name):
    return np.array([float(value) for value in REFERENCE["cases"][name]["values"]])[:20]


def eigenvalues(path, edges=None, **keys):
    outline = {"shape": "file", "path": str(path), **keys}
    spectrum = run(study_from({"outline": outline, "head": HEAD, "edges": edges or {}}))
    assert spectrum.complete
    return spectrum.modes.eigenvalues[:20], spectrum


CIRCLES = {
    "a circle": lambda space: space.add_circle((0, 0), 1.0),
    "two arcs": lambda space: (
        space.add_arc((3, 4), 1.0, 30, 200),
        space.add_arc((3, 4), 1.0, 200, 30),
    ),
    "a bulged polyline": lambda space: space.add_lwpolyline(
        [(-1, 0, 1), (1, 0, 1)], format="xyb", close=True
    ),
    "an ellipse with equal axes": lambda space: space.add_ellipse((0, 0), (0, 1), 1.0),
}


@pytest.mark.parametrize("name", CIRCLES)
def test_a_circle_as_dxf_is_the_disc(tmp_path, name):
    document = ezdxf.new(units=6)
    CIRCLES[name](document.modelspace())
    document.saveas(tmp_path / "circle.dxf")
    values, _ = eigenvalues(tmp_path / "circle.dxf")
    assert np.abs(values / DISC - 1).max() < 1e-9


def test_a_circle_by_a_rational_spline_is_the_disc(tmp_path):
    """Nine points and weights (Piegl & Tiller, The NURBS Book, from memory)."""
    document = ezdxf.new(units=6)
    spline = document.modelspace().add_spline(degree=2)
    round_ = [(1, 0), (1, 1), (0, 1), (-1, 1), (-1, 0), (-1, -1), (0, -1), (1, -1), (1, 0)]
    spline.control_points = [(x, y, 0) for x, y in round_]
    spline.weights = [1.0, 0.5**0.5] * 4 + [1.0]
    spline.knots = [0, 0, 0, 1, 1, 2, 2, 3, 3, 4, 4, 4]
    document.saveas(tmp_path / "circle.dxf")
    values, _ = eigenvalues(tmp_path / "circle.dxf")
    assert np.abs(values / DISC - 1).max() < 1e-9


@pytest.mark.parametrize(
    "body",
    [
        '<circle cx="50" cy="40" r="30"/>',
        '<path d="M 20 40 a 30 30 0 0 0 60 0 a 30 30 0 0 0 -60 0 z" transform="rotate(20)"/>',
        '<ellipse rx="60" ry="15" transform="translate(50 40) scale(.5 2)"/>',
    ],
)
def test_a_circle_as_svg_is_the_disc(svg, body):
    values, _ = eigenvalues(svg(body))
    assert np.abs(values * 0.03**2 / DISC - 1).max() < 1e-9


def test_an_ellipse_as_dxf(tmp_path):
    document = ezdxf.new(units=6)
    document.modelspace().add_ellipse((5, -2), (0.9, 1.2), 2 / 3)
    document.saveas(tmp_path / "ellipse.dxf")
    values, _ = eigenvalues(tmp_path / "ellipse.dxf")
    assert np.abs(values / reference("ellipse_a1p5_b1") - 1).max() < 1e-9


def test_a_gap_that_is_closed_hardly_changes_the_disc(tmp_path):
    document = ezdxf.new(units=6)
    document.modelspace().add_arc((0, 0), 1.0, 0, 180.0002)
    document.modelspace().add_arc((0, 0), 1.0, 180, 360)
    document.saveas(tmp_path / "gap.dxf")
    values, spectrum = eigenvalues(tmp_path / "gap.dxf")
    assert np.abs(values / DISC - 1).max() < 1e-5
    assert "closed 1 gap" in spectrum.notes[0]


def test_an_l_shape_meshed_by_gmsh():
    values, _ = eigenvalues(FILES / "l_shape.msh", unit="m")
    assert np.abs(values / reference("lshape_fixed") - 1).max() < 1e-8


def test_a_rectangle_of_an_abaqus_mesh_with_two_free_edges():
    free = {"top": {"support": "free"}, "bottom": {"support": "free"}}
    values, _ = eigenvalues(FILES / "rectangle.inp", free, unit="mm")
    assert np.abs(values / reference("rect_0p618_xfixed_yfree") - 1).max() < 1e-9


def test_a_disc_of_twelve_parabolas_from_a_vtu_mesh():
    """A side of 30 degrees strays from the circle by up to 3e-4 of its radius."""
    values, spectrum = eigenvalues(FILES / "disc.vtu", unit="m")
    assert np.abs(values / DISC - 1).max() < 3e-4
    assert "as parabolas" in spectrum.notes[0]


def test_a_mesh_with_curved_patches_is_cut_as_drawn():
    """Patch 7 of the mesh is the disc of radius 0.4, nearly: composite_patch_0p4_9p77."""
    path = str(FILES / "disc.vtu")
    patch = {"name": "core", "shape": "file", "path": path, "unit": "m", "contour": "7"}
    study = {
        "outline": {"shape": "file", "path": path, "unit": "m"},
        "head": HEAD,
        "patches": [{**patch, "areal_density": 9.77}],
    }
    values = run(study_from(study)).modes.eigenvalues[:20]
    assert np.abs(values / reference("composite_patch_0p4_9p77") - 1).max() < 1e-3


def test_a_frame_drum_is_the_same_drawn_or_told():
    def solved(outline, paste, port):
        study = {
            "outline": outline,
            "head": {"areal_density": 0.262, "tension": 3000.0},
            "patches": [{"name": "paste", "added_density": 1.9, **paste}],
            "holes": [{"name": "port", "support": "free", **port}],
        }
        return run(study_from(study)).frequencies

    told = solved(
        {"shape": "disc", "diameter": 0.356},
        {"shape": "disc", "diameter": 0.09, "at": [0.0, 0.02]},
        {"shape": "disc", "diameter": 0.02, "at": [0.11, 0.0]},
    )
    for kind in ("dxf", "svg"):
        file = {"shape": "file", "path": str(FILES / f"frame_drum.{kind}")}
        drawn = solved(file, {**file, "contour": "paste"}, {**file, "contour": "port"})
        assert np.abs(drawn / told - 1).max() < 1e-9


def test_a_retracted_handle_neither_spoils_nor_costs(svg):
    """Against a polygon of 81 corners on the curve, which lacks about 1e-3 of its area."""
    handle = svg('<path d="M 20 20 C 20 20 60 10 80 40 S 60 70 20 70 z"/>')
    values, spectrum = eigenvalues(handle)
    closer, _ = eigenvalues(handle, tolerance=1e-8)
    assert np.abs(values / closer - 1).max() < 1e-9
    assert spectrum.mesh_facts["triangles"] < 400
    one = Bezier((20 + 20j, 20 + 20j, 60 + 10j, 80 + 40j))
    two = Bezier((80 + 40j, 100 + 70j, 60 + 70j, 20 + 70j))
    points = np.hstack([piece.at(np.linspace(0, 1, 41)[:-1]) for piece in (one, two)])
    corners = " ".join(f"{z.real:.12f},{z.imag:.12f}" for z in (*points, 20 + 70j))
    rough, _ = eigenvalues(svg(f'<polygon points="{corners}"/>', name="rough.svg"))
    assert np.all(rough > values)  # a smaller fixed head is never lower
    assert np.abs(rough / values - 1).max() < 4e-3
