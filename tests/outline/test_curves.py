"""Curves find their names by where they lie, after any cut."""

import numpy as np
import pytest

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline import draw
from membrane.outline.copies import copies
from membrane.outline.curves import curves
from membrane.outline.cut import cut
from membrane.outline.names import Names
from tests.outline.studies import box, disc, study


def test_every_piece_of_a_cut_side_keeps_its_name():
    stripes = {f"stripe{k}": box(0.1, 1.0, 0.2 * k + 0.05) for k in range(5)}
    with Kernel.session() as kernel:
        outline = draw(kernel, study(box(1.1, 1.0), stripes))
        for curve in outline.curves:
            x, y = kernel.evaluate(curve.tag, np.array(kernel.bounds(curve.tag)))
            on = {
                "left": np.allclose(x, 0),
                "right": np.allclose(x, 1.1),
                "bottom": np.allclose(y, 0),
                "top": np.allclose(y, 1.0),
                None: np.allclose(y, [0, 1]) or np.allclose(y, [1, 0]),
            }
            assert on[curve.edge]
    pieces = [curve.edge for curve in outline.curves]
    assert {edge: pieces.count(edge) for edge in outline.edges} == {
        "left": 1,
        "right": 1,
        "bottom": 11,
        "top": 11,
    }
    assert pieces.count(None) == 10


def test_a_side_that_is_cut_away_is_an_error():
    with Kernel.session() as kernel, pytest.raises(OutlineError, match="left of the edge left"):
        draw(kernel, study(box(2.0, 1.0), {}, {"bite": box(0.3, 1.0)}))


def test_a_boundary_without_a_name_is_an_error():
    with Kernel.session() as kernel:
        face = kernel.geometry.add_polygon([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]])
        (side,) = kernel.copies([face.lines[0]._id])
        pieces = cut(kernel, face._id, {}, {})
        with pytest.raises(OutlineError, match="has no name"):
            curves(kernel, pieces, Names(copies(kernel, "side1", [side]), {}, {}, [], {}))


def test_edges_come_first_in_the_order_drawn():
    with Kernel.session() as kernel:
        holes = {"z": disc(0.1, 0.5, 0.5), "a": disc(0.1, 1.5, 0.5)}
        outline = draw(kernel, study(box(2.0, 1.0), {"p": disc(0.3, 1.0, 0.5)}, holes))
    expected = ["left", "right", "bottom", "top", "z", "a", None]
    assert [curve.edge for curve in outline.curves] == expected
