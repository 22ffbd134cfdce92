"""Whether a varying coefficient has sound numbers, and what is said where it has not."""

from __future__ import annotations

import numpy as np

from membrane.errors import Problem, StudyError
from membrane.records.arrays import Floats
from membrane.records.function import Function


def numbers_at(key: str, function: Function, x: Floats, y: Floats) -> Floats:
    """The function's numbers, SI, of shape ``x.shape``.

    key : the study key that gives the function
    Raises StudyError where a number is not finite or has the wrong sign, with the place
    of the worst one.
    """
    numbers = function.numbers(x, y)
    wrong = ~function.are_allowed(numbers)
    if wrong.any():
        worst = np.argmin(np.where(wrong, np.nan_to_num(numbers, nan=-np.inf), np.inf))
        place = np.ravel(x)[worst] - function.origin[0], np.ravel(y)[worst] - function.origin[1]
        raise StudyError([Problem(key, _sentence(function, float(numbers.flat[worst]), *place))])
    return numbers


def _sentence(function: Function, number: float, x: float, y: float) -> str:
    wanted = function.sign.worded(function.noun)
    got = f"{number:.6g} {function.unit}" if np.isfinite(number) else "no finite number"
    return f"expected {wanted} everywhere, got {got} at x = {x:.6g} m, y = {y:.6g} m."
