"""Line loads, slits and parts of edges lie where they were drawn, or are refused."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.errors import OutlineError
from tests import zoo


def outline(**more):
    with zoo.drawn({**zoo.DISC, **more}) as (_, _, drawn, _):
        return drawn


def wire(name, *points):
    return {"name": name, "shape": "polyline", "points": list(points), "line_density": 1.0}


def hoop(diameter, *at):
    return {
        **{"name": "hoop", "shape": "disc", "diameter": diameter, "line_density": 1.0},
        **({"at": list(at)} if at else {}),
    }


PASTE = {"name": "paste", "shape": "disc", "diameter": 1.0, "added_density": 1.0}


@pytest.mark.parametrize(
    ("load", "length"),
    [
        (wire("w", [-0.5, 0.1], [0.3, 0.7]), 1.0),
        (wire("w", [-1.0, 0.0], [1.0, 0.0]), 2.0),
        (hoop(1.0), np.pi),
        (hoop(1.0, 0.2, 0.1), np.pi),
        (hoop(2.0), 2 * np.pi),
        ({**wire("w", [0, 0], [0.3, 0], [0.3, 0.4]), "closed": True}, 1.2),
        (
            {"name": "a", "shape": "arc", "radius": 0.5, "start": 1, "end": 6, "line_density": 1},
            2.5,
        ),
    ],
    ids=["within", "across", "on a border", "over a border", "on the rim", "closed", "arc"],
)
def test_a_line_load_keeps_its_length(load, length):
    free = {"rim": {"support": "free"}}
    drawn = outline(patches=[PASTE], line_loads=[load], edges=free)
    assert drawn.line_length(load["name"]) == pytest.approx(length, rel=1e-12)
    assert drawn.area == pytest.approx(np.pi, rel=1e-12)
    assert {region.name for region in drawn.regions} == {"head", "paste"}


def test_two_loads_share_a_curve():
    drawn = outline(line_loads=[hoop(1.0), {**hoop(1.0), "name": "seam"}])
    assert {curve.lines for curve in drawn.curves} == {(), ("hoop", "seam")}


@pytest.mark.parametrize(
    ("more", "sentence"),
    [
        ({"line_loads": [wire("w", [-1.2, 0], [1, 0])]}, "w lies outside the head by 200 mm"),
        ({"line_loads": [wire("w", [-1, 2], [1, 2])]}, "w lies wholly outside the head"),
        ({"line_loads": [hoop(2.0)]}, "hoop runs along the edge rim, which is fixed"),
        ({"line_loads": [hoop(1.0, 0.7, 0.0)]}, "hoop lies outside the head by 1.19e"),
        (
            {
                "line_loads": [wire("w", [-0.5, 0], [0.5, 0])],
                "holes": [{"name": "port", "shape": "disc", "diameter": 0.2}],
            },
            "w lies outside the head by 200 mm",
        ),
        ({"slits": [{"name": "c", "points": [[-1, 2], [1, 2]]}]}, "slit c lies wholly outside"),
        ({"slits": [{"name": "c", "points": [[-2, 0], [2, 0]]}]}, "cut the head into 2 pieces"),
        (
            {"slits": [{"name": "c", "shape": "arc", "radius": 1.0, "start": 0, "end": 1}]},
            "lip c.left runs along the edge rim",
        ),
        (
            {"slits": [{"name": n, "points": [[0, 0], [0.5, 0]]} for n in "cd"]},
            "Two slits run along each other, with the lips c.left and d.left",
        ),
        (
            {
                "slits": [{"name": "c", "points": [[0, 0], [0.5, 0]]}],
                "line_loads": [wire("w", [0.1, 0], [0.6, 0])],
            },
            "load w runs along the slit with the lip c.left",
        ),
    ],
)
def test_what_does_not_fit(more, sentence):
    with pytest.raises(OutlineError, match=sentence):
        outline(**more)


def test_a_slit_may_start_beyond_the_edge():
    drawn = outline(slits=[{"name": "cut", "points": [[-3, 0], [0.2, 0]]}])
    assert drawn.edges == ("rim", "cut.left", "cut.right")
    assert drawn.edge_length("cut.left") == pytest.approx(1.2)
    assert drawn.edge_length("rim") == pytest.approx(2 * np.pi)


def part(name="part", edge="rim", **keys):
    return {"name": name, "edge": edge, **keys}


@pytest.mark.parametrize(
    ("parts", "lengths"),
    [
        ([part(**{"from": "-10 deg", "to": "20 deg"})], {"part": np.pi / 6}),
        ([part(**{"from": "350 deg", "to": "20 deg"})], {"part": np.pi / 6}),
        ([part(**{"from": "0 deg", "to": "10 deg", "repeat": 6})], {"part": np.pi / 3}),
        ([part(**{"from": "0.5 m", "to": "2 m"})], {"part": 1.5}),
        ([part(**{"from": "0 m", "to": "0.1 m", "repeat": 4})], {"part": 0.4}),
        (
            [
                part("a", **{"from": "0 deg", "to": "180 deg"}),
                part("b", **{"from": "180 deg", "to": "360 deg"}),
            ],
            {"a": np.pi, "b": np.pi},
        ),
    ],
)
def test_parts_of_a_rim(parts, lengths):
    drawn = outline(edge_parts=parts)
    rest = 2 * np.pi - sum(lengths.values())
    found = {name: drawn.edge_length(name) for name in drawn.edges}
    assert found == pytest.approx({"rim": rest, **lengths} if rest > 1e-9 else lengths)


def test_angles_turn_with_the_shape():
    turned = {"shape": "disc", "diameter": 2.0, "at": [3.0, 1.0], "rotate": "90 deg"}
    keys = {
        **zoo.DISC,
        "outline": turned,
        "edge_parts": [part(**{"from": "0 deg", "to": "60 deg"})],
    }
    with zoo.drawn(keys) as (kernel, _, drawn, _):
        (curve,) = (c for c in drawn.curves if c.edge == "part")
        middle = kernel.evaluate(curve.tag, np.array([np.mean(kernel.bounds(curve.tag))]))[:, 0]
    angle = np.radians(120.0)
    assert middle == pytest.approx([3.0 + np.cos(angle), 1.0 + np.sin(angle)])


def test_parts_of_sides_holes_and_curves():
    box = {"shape": "rectangle", "width": 2.0, "height": 1.0}
    port = {"name": "port", "shape": "disc", "diameter": 0.2, "at": [1.0, 0.5]}
    parts = [
        part("low", "left", **{"from": "0.7 m", "to": "1 m"}),
        part("arc", "port", **{"from": "0 deg", "to": "90 deg"}),
    ]
    drawn = outline(outline=box, holes=[port], edge_parts=parts)
    assert drawn.edge_length("low") == pytest.approx(0.3)
    assert drawn.edge_length("left") == pytest.approx(0.7)
    assert drawn.edge_length("arc") == pytest.approx(0.05 * np.pi)
    assert drawn.edges == ("left", "low", "right", "bottom", "top", "port", "arc")
    stadium = {"shape": "stadium", "straight": 1.0, "width": 1.0}
    drawn = outline(outline=stadium, edge_parts=[part("bend", curves=[1, 2])])
    assert drawn.edge_length("bend") == pytest.approx(0.5 * np.pi)


@pytest.mark.parametrize(
    ("parts", "sentence"),
    [
        (
            [
                part("a", **{"from": "0 deg", "to": "30 deg"}),
                part("b", **{"from": "20 deg", "to": "40 deg"}),
            ],
            "parts a and b of the edge rim overlap",
        ),
        ([part(**{"from": "1 m", "to": "7 m"})], "ends 7000 mm along .* 6283.19 mm long"),
    ],
)
def test_parts_that_do_not_fit(parts, sentence):
    with pytest.raises(OutlineError, match=sentence):
        outline(edge_parts=parts)


def test_a_ray_that_misses_the_edge_is_an_error():
    away = {"shape": "polygon", "corners": [[1, 1], [2, 1], [2, 2]]}
    ends = {"from": "0 deg", "to": "40 deg"}
    with pytest.raises(OutlineError, match=r"ends at 0 deg, where the ray .* side1 nowhere"):
        outline(outline=away, edge_parts=[part(edge="side1", **ends)])
