"""Fans: straight in the root of the plane, conforming with what surrounds them."""

import numpy as np
import pytest

from membrane import run, study_from
from membrane.triangle import EDGES, shapes
from tests import zoo

ALONG = np.linspace(0.0, 1.0, 7)
SLIT_DISC = {"outline": {"shape": "sector", "radius": 1.0, "angle": "360 deg"}, "head": zoo.HEAD}
LUGS = {
    **zoo.DISC,
    "edges": {"rim": {"support": "free"}},
    "edge_parts": [
        {"name": "lug", "edge": "rim", "from": "-20 deg", "to": "20 deg", "repeat": 3},
    ],
}


def sides(mesh):
    """Vertex pair -> places (2, 7) along the side, as each triangle beside it has them."""
    found = {}
    for low, high in EDGES:
        corners = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
        points = corners[:, [low]] * (1 - ALONG) + corners[:, [high]] * ALONG
        values, _ = shapes(points, mesh.order)
        places = np.einsum("dnt,ni->tdi", mesh.nodes, values)
        for number, pair in enumerate(zip(mesh.triangles[low], mesh.triangles[high], strict=True)):
            found.setdefault(tuple(map(int, pair)), []).append(places[number])
    return found


@pytest.mark.parametrize("keys", [zoo.L_SHAPE, SLIT_DISC, LUGS], ids=["L", "slit", "lugs"])
def test_triangles_agree_on_the_sides_they_share(keys):
    mesh = zoo.prepared(keys, degree=8).mesh
    for places in sides(mesh).values():
        assert len(places) <= 2
        assert np.abs(places[0] - places[-1]).max() < 1e-13


def test_a_fan_is_straight_in_the_root_of_the_plane():
    """z^(1/3) at the corner of 270 degrees at the origin, in each triangle affine."""
    mesh = zoo.prepared(zoo.L_SHAPE, degree=8).mesh
    corner = int(np.argmin(np.hypot(*mesh.vertices)))
    fan = np.nonzero((mesh.triangles == corner).any(axis=0))[0]
    assert mesh.order == 3
    points = np.array([[0.2, 0.6, 0.2, 1 / 3], [0.2, 0.2, 0.6, 1 / 3]])
    values, _ = shapes(points, mesh.order)
    for triangle in fan:
        z = np.array([1, 1j]) @ mesh.nodes[:, :, triangle] @ values
        root = (z / z[3]) ** (1 / 3)
        assert abs(root[:3].mean() - 1.0) < 1e-12


@pytest.mark.slow
@pytest.mark.parametrize(
    "tension", [{"xx": 1.0, "xy": 0.3, "yy": 2.0}, {"xx": 3.0, "xy": 0.0, "yy": 1.0}]
)
def test_a_woven_head_with_a_corner_is_the_stretched_one(tension):
    """L^-1 x with T = L L^T takes a head of tension T to one of tension 1."""
    corners = np.array(zoo.L_SHAPE["outline"]["corners"], dtype=float)
    root = np.linalg.cholesky([[tension["xx"], tension["xy"]], [tension["xy"], tension["yy"]]])
    there = np.linalg.solve(root, corners.T).T.tolist()
    outline, modes = {"shape": "polygon", "corners": there}, {"bracket": False}
    head = {**zoo.HEAD, "tension": tension}
    woven = run(study_from({**zoo.L_SHAPE, "head": head, "modes": modes}))
    plain = run(study_from({"outline": outline, "head": zoo.HEAD, "modes": modes}))
    error = np.abs(woven.modes.eigenvalues / plain.modes.eigenvalues - 1)
    assert error.max() < 1e-8
    assert max(one.mesh_facts["unknowns"] for one in (woven, plain)) < 6000
