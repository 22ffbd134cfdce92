"""Only formulas that are surely smooth at the origin go without a kink there."""

import pytest

from membrane.varying.formula import Formula
from membrane.varying.smoothness import is_smooth_at_origin


@pytest.mark.parametrize(
    "text",
    [
        *("1", "x*y", "r**2", "1 + 0.3*r**4/2", "r*r", "exp(-r**2)", "x**3 + cos(y)", "sqrt(2)*x"),
        *("max(1, 2) + x", "(1 + x)**2", "pi*r**2", "sin(x)/3"),
    ],
)
def test_smooth(text):
    assert is_smooth_at_origin(Formula.parsed(text))


@pytest.mark.parametrize(
    "text",
    [
        *("r", "r**3", "1 + 0.3*r/0.178", "theta", "cos(2*theta)", "abs(x)", "sqrt(x**2 + y**2)"),
        *("hypot(x, y)", "max(x, 0)", "where(x > 0, 1, 2)", "1/r**2", "x**0.5", "2**r", "r**-2"),
        *("(x**2 + y**2)**0.5", "exp(-r)", "x < y", "x/y"),
    ],
)
def test_kinked(text):
    assert not is_smooth_at_origin(Formula.parsed(text))
