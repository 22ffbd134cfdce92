"""The coarser space's values for the modes of the finer one."""

import numpy as np
import pytest

from membrane.eigensolvers import shift_invert
from membrane.modes import coarser_modes, extract
from membrane.modes.coarser import transferred
from membrane.pencil import assemble, build_space
from tests import zoo

FREE = {**zoo.DISC, "edges": {"rim": {"support": "free"}}}


@pytest.mark.parametrize("keys", [zoo.SQUARE, zoo.L_SHAPE, zoo.PATCHED, FREE])
def test_as_good_as_solving_anew(keys):
    ready = zoo.prepared(keys, 6, phase=2.0)
    fine, coarse = (assemble(ready.membrane, ready.mesh, p) for p in (6, 4))
    modes = extract(fine, 12, shift_invert.solve, 0.01)
    anew = extract(coarse, len(modes.eigenvalues), shift_invert.solve, 0.01)
    found, exact = coarser_modes(coarse, modes), anew.eigenvalues[: len(modes.eigenvalues)]
    errors = exact - modes.eigenvalues
    assert (found.eigenvalues >= exact * (1 - 1e-11)).all()
    assert (found.eigenvalues - exact <= 0.01 * errors + 1e-10 * exact).all()


def test_a_polynomial_is_transferred_exactly():
    mesh = zoo.straight_square()
    fine, coarse = (build_space(mesh, p, ()).space for p in (5, 3))
    x, y = fine.locations
    u, v = coarse.locations
    moved = transferred(fine, (x**3 - 2 * x * y**2)[:, None], coarse)[:, 0]
    np.testing.assert_allclose(moved, u**3 - 2 * u * v**2, atol=1e-14)
