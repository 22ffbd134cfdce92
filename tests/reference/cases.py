"""The studies whose spectra are known, in the study file's own keys and units of 1."""

from __future__ import annotations

from math import sqrt
from typing import Any

HEAD = {"areal_density": 1.0, "tension": 1.0}
DISC = {"shape": "disc", "diameter": 2.0}
RECTANGLE = {"shape": "rectangle", "width": 1.0, "height": 0.618}
SQUARE = {"shape": "rectangle", "width": 1.0, "height": 1.0}
FREE = {"support": "free"}


def case(outline: dict[str, Any], head: dict[str, Any] = HEAD, **more: Any) -> dict[str, Any]:
    return {"outline": outline, "head": head, **more}


def all_edges(names: str, edge: dict[str, Any]) -> dict[str, Any]:
    return {name: edge for name in names.split()}


def annulus(inner: float, inner_support: str, outer_support: str) -> dict[str, Any]:
    hole = {"name": "hole", "shape": "disc", "diameter": 2 * inner, "support": inner_support}
    return case(DISC, holes=[hole], edges={"rim": {"support": outer_support}})


def polygon(*corners: tuple[float, float]) -> dict[str, Any]:
    return {"shape": "polygon", "corners": [list(corner) for corner in corners]}


def regular(sides: int) -> dict[str, Any]:
    return case({"shape": "regular_polygon", "sides": sides, "radius": 1.0})


def heavy_centre(*zones: tuple[float, float]) -> dict[str, Any]:
    """Concentric patches from the outermost in: (radius, areal density)."""
    patches = [
        {"name": f"zone{i}", "shape": "disc", "diameter": 2 * radius, "areal_density": density}
        for i, (radius, density) in enumerate(zones, 1)
    ]
    return case(DISC, patches=patches)


def elastic(stiffness: float) -> dict[str, Any]:
    return {"rim": {"support": "elastic", "stiffness": stiffness}}


def square_hole(support: str) -> dict[str, Any]:
    hole = {"name": "hole", "shape": "disc", "diameter": 0.4, "at": [0.5, 0.5]}
    return case(SQUARE, holes=[{**hole, "support": support}])


EQUILATERAL = polygon((0, 0), (1, 0), (0.5, sqrt(3) / 2))
RIGHT_ISOSCELES = polygon((0, 0), (1, 0), (0, 1))
SIDES = "side1 side2 side3"
ALL_FREE_RECTANGLE = all_edges("left right bottom top", FREE)

CASES: dict[str, dict[str, Any]] = {
    "disc_fixed": case(DISC),
    "disc_free": case(DISC, edges={"rim": FREE}),
    "disc_robin_k1": case(DISC, edges=elastic(1.0)),
    "disc_robin_k100": case(DISC, edges=elastic(100.0)),
    "annulus_0p2_inD_outD": annulus(0.2, "fixed", "fixed"),
    "annulus_0p2_inD_outN": annulus(0.2, "fixed", "free"),
    "annulus_0p2_inN_outD": annulus(0.2, "free", "fixed"),
    "annulus_0p2_inN_outN": annulus(0.2, "free", "free"),
    "annulus_0p5_inD_outD": annulus(0.5, "fixed", "fixed"),
    "annulus_0p5_inD_outN": annulus(0.5, "fixed", "free"),
    "annulus_0p5_inN_outD": annulus(0.5, "free", "fixed"),
    "annulus_0p5_inN_outN": annulus(0.5, "free", "free"),
    "rect_0p618_fixed": case(RECTANGLE),
    "rect_0p618_xfixed_yfree": case(RECTANGLE, edges=all_edges("bottom top", FREE)),
    "rect_0p618_free": case(RECTANGLE, edges=ALL_FREE_RECTANGLE),
    "rect_orthotropic_T1_T2p25": case(
        RECTANGLE, {"areal_density": 1.0, "tension": {"along": 1.0, "across": 2.25, "angle": 0.0}}
    ),
    "equilateral_fixed": case(EQUILATERAL),
    "equilateral_free": case(EQUILATERAL, edges=all_edges(SIDES, FREE)),
    "right_isosceles_fixed": case(RIGHT_ISOSCELES),
    "right_isosceles_free": case(RIGHT_ISOSCELES, edges=all_edges(SIDES, FREE)),
    "sector60_fixed": case({"shape": "sector", "radius": 1.0, "angle": "60 deg"}),
    "sector270_fixed": case({"shape": "sector", "radius": 1.0, "angle": "270 deg"}),
    "ellipse_a1p5_b1": case({"shape": "ellipse", "width": 3.0, "height": 2.0}),
    "ellipse_a2_b1": case({"shape": "ellipse", "width": 4.0, "height": 2.0}),
    "disc_tensor_T1_2p25": case(
        DISC, {"areal_density": 1.0, "tension": {"xx": 1.0, "xy": 0.0, "yy": 2.25}}
    ),
    "composite_patch_0p4_9p765625": heavy_centre((0.4, 9.765625)),
    "composite_patch_0p4_9p77": heavy_centre((0.4, 9.77)),
    "composite_3zone_8_3_1": heavy_centre((0.6, 3.0), (0.3, 8.0)),
    "lshape_fixed": case(polygon((0, 0), (1, 0), (1, 1), (-1, 1), (-1, -1), (0, -1))),
    "gww1_fixed": case(polygon((0, 0), (2, 0), (2, 2), (4, 2), (6, 4), (4, 4), (4, 6), (0, 2))),
    "gww2_fixed": case(polygon((2, 2), (4, 2), (6, 4), (4, 6), (4, 4), (0, 4), (0, 2), (2, 0))),
    "regular_5gon_fixed": regular(5),
    "regular_6gon_fixed": regular(6),
    "regular_8gon_fixed": regular(8),
    "square_hole_fixed_c_r0p2": square_hole("fixed"),
    "square_hole_free_c_r0p2": square_hole("free"),
    "disc_rho_r2": case(DISC, {"areal_density": {"formula": "r**2"}, "tension": 1.0}),
    "rect_linear_density_a1": case(
        RECTANGLE, {"areal_density": {"formula": "1 + x"}, "tension": 1.0}
    ),
    "stadium_a1_r1_fixed": case({"shape": "stadium", "straight": 2.0, "width": 2.0}),
}
