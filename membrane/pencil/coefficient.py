"""A contribution's value as a function of the quadrature points."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np

from membrane.records.function import Function
from membrane.records.membrane import Contribution
from membrane.varying import numbers_at

Coefficient = Callable[[Any], Any]


def coefficient(contribution: Contribution) -> Coefficient:
    """c(x) at points x (2, n_triangles, n): a number, (2, 2), or an array with a value each.

    Raises StudyError, when called, where a varying one is not sound.
    """
    value = contribution.value
    if isinstance(value, Function):
        return _Varying(contribution.key, value)
    return lambda x: value


class _Varying:
    """A function that is worked out once for one array of points.

    scikit-fem calls a form for every pair of shapes, always with the same points.
    """

    def __init__(self, key: str, function: Function) -> None:
        self.key = key
        self.function = function
        self._last: tuple[Any, Any] | None = None

    def __call__(self, points: Any) -> Any:
        if self._last is None or self._last[0] is not points:
            x, y = np.asarray(points)
            numbers_at(self.key, self.function, x, y)
            self._last = (points, self.function(x, y))
        return self._last[1]
