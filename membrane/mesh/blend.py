"""How the bend of a triangle's side spreads over the triangle."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats


def blending(low: Floats, high: Floats) -> tuple[Floats, Floats]:
    """Fraction s along a side and the weight of its departure there, for each node.

    low, high : barycentric coordinates of the nodes, towards the side's ends

    With d(s) the side's departure from its chord, a node is moved by
    l1 l2 d(s)/(s (1 - s)), s = (1 + l2 - l1)/2: smooth up to the opposite vertex (after
    W. J. Gordon & C. A. Hall, Numer. Math. 21 (1973) 109, from memory).
    """
    s = (1 + high - low) / 2
    inner = s * (1 - s) > 1e-12
    weight = np.zeros_like(s)
    weight[inner] = (low * high)[inner] / (s * (1 - s))[inner]
    return s, weight
