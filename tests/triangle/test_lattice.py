"""The lattice cuts the triangle into equal parts."""

import numpy as np
import pytest

from membrane.triangle import lattice


@pytest.mark.parametrize("parts", [1, 2, 5, 9])
def test_equal_counter_clockwise_parts(parts):
    cut = lattice(parts)
    assert cut.points.shape[1] == (parts + 1) * (parts + 2) // 2
    assert cut.triangles.shape[1] == parts**2
    (x0, x1, x2), (y0, y1, y2) = cut.points[:, cut.triangles]
    areas = ((x1 - x0) * (y2 - y0) - (x2 - x0) * (y1 - y0)) / 2
    np.testing.assert_allclose(areas, 0.5 / parts**2)
