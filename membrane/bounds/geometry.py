"""From the mesh to the true outline: what their difference can do to an eigenvalue.

Let a map of the mesh onto the head have singular values between 1 - e and 1 + e, measured by
T^-1, and so a jacobian between (1 - e)^2 and (1 + e)^2. Carried over by it, a function's energy
grows at most by (1 + e)/(1 - e), by its tension, since in the plane the jacobian cancels one of
the two singular values, and shrinks at most to (1 - e)^2 of it, by its bedding; its mass stays
within (1 - e)^2 and (1 + e)^2. By min-max every eigenvalue of the head lies between
((1 - e)/(1 + e))^2 and (1 + e)/(1 - e)^3 of the mesh's own: about 4 e either way.
"""

from __future__ import annotations

import numpy as np

from membrane.bounds.head import Head
from membrane.errors import BracketError

LARGEST = 0.01
"""Largest e that is still worth a bracket."""


def stretches(head: Head) -> tuple[float, float]:
    """What lower and upper bounds on the mesh are to be multiplied by.

    Raises BracketError where the mesh is too far from the outline.
    """
    principal = np.linalg.eigvalsh(head.tension)
    e = head.mesh.departure * float(np.sqrt(principal[:, 1] / principal[:, 0]).max())
    if not e < LARGEST:
        raise BracketError("the mesh departs too far from the outline's curves")
    return ((1 - e) / (1 + e)) ** 2, (1 + e) / (1 - e) ** 3
