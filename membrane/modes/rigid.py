"""The motion of a head that nothing holds: every point alike, at 0 Hz."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.pencil import Pencil


def rigid_mode(pencil: Pencil) -> Floats:
    """The constant shape of unit mass, (n_free,)."""
    ones = np.ones(pencil.M.shape[0])
    return np.asarray(ones / np.sqrt(ones @ (pencil.M @ ones)), dtype=float)


def rigid_shift(pencil: Pencil) -> float:
    """A negative shift of the size of the first eigenvalue above 0.

    It is minus the Rayleigh quotient of a balanced tilt, which bounds that eigenvalue from
    above and makes K - shift M well conditioned in any units.
    """
    rigid = rigid_mode(pencil)
    tilt = pencil.space.locations[0, pencil.space.free]
    tilt = tilt - (rigid @ (pencil.M @ tilt)) * rigid
    return -float(tilt @ (pencil.K @ tilt)) / float(tilt @ (pencil.M @ tilt))
