"""The rigid mode and its shift, in any units."""

import numpy as np
import pytest

from membrane.modes.rigid import rigid_mode, rigid_shift
from membrane.pencil import assemble
from tests import zoo


@pytest.mark.parametrize("scale", [1e-4, 1.0, 100.0])
def test_unit_mass_no_energy_and_a_shift_of_the_right_size(scale):
    """The tilt's quotient on a free disc is 4 T / (rho a^2), elementary; j'_11^2 = 3.39."""
    outline = {"shape": "disc", "diameter": 2 * scale}
    keys = {**zoo.DISC, "outline": outline, "edges": {"rim": {"support": "free"}}}
    ready = zoo.prepared(keys)
    pencil = assemble(ready.membrane, ready.mesh, 6)
    rigid = rigid_mode(pencil)
    assert abs(rigid @ (pencil.M @ rigid) - 1) < 1e-12
    assert abs(rigid @ (pencil.K @ rigid)) * scale**2 < 1e-10
    assert abs(rigid_shift(pencil) * scale**2 + 4.0) < 1e-6
    assert np.ptp(rigid) == 0.0
