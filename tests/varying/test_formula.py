"""Formulas give numpy's numbers, and nothing but what is on the lists is worked out."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from membrane.varying.formula import FUNCTIONS, Formula

X, Y = np.random.default_rng(0).uniform(-1, 1, (2, 50))
R, THETA = np.hypot(X, Y), np.arctan2(Y, X)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("0.26*(1 + 0.3*r/0.178)", 0.26 * (1 + 0.3 * R / 0.178)),
        ("x**2 - y**2/3", X**2 - Y**2 / 3),
        ("-x + +y", -X + Y),
        ("2**-r", 2.0**-R),
        ("cos(3*theta) + sin(pi*x)", np.cos(3 * THETA) + np.sin(np.pi * X)),
        ("sqrt(x**2 + y**2) - hypot(x, y)", np.zeros(50)),
        ("atan2(y, x) - theta", np.zeros(50)),
        ("min(x, y, 0.1) + max(x, y)", np.minimum(np.minimum(X, Y), 0.1) + np.maximum(X, Y)),
        ("where(x > 0, 1, 2)", np.where(X > 0, 1.0, 2.0)),
        ("where(-0.5 < x <= 0.5, r, 0)", np.where((X > -0.5) & (X <= 0.5), R, 0.0)),
        ("abs(x) + sign(y)", np.abs(X) + np.sign(Y)),
        ("exp(log(r))", R),
        ("asin(sin(x)) + acos(cos(r)) + atan(tan(y))", X + R + Y),
        ("tanh(x) - sinh(x)/cosh(x)", np.zeros(50)),
        ("  1e-3\n", np.full(50, 1e-3)),
    ],
)
def test_values(text, expected):
    assert np.allclose(Formula.parsed(text)(X, Y), expected, rtol=1e-13, atol=1e-13)


def test_every_function_works_on_arrays():
    for name, (_, count) in FUNCTIONS.items():
        values = ", ".join(["r"] * (count or 3))
        assert Formula.parsed(f"{name}({values})")(X, Y).shape == X.shape


def test_what_has_no_value_is_not_finite_and_says_nothing(recwarn):
    for text in ("1/(x - x)", "log(-r)", "(-1)**0.5", "10**10**10", "sqrt(-1)"):
        assert not np.isfinite(Formula.parsed(text)(X, Y)).any()
    assert not recwarn.list


@pytest.mark.parametrize(
    "text",
    [
        *("__import__('os').getcwd()", "x.__class__", "x[0]", "[x]", "(x, y)", "{1: 2}", "f'{x}'"),
        *("lambda: 1", "x if y else r", "x and y", "not x", "~x", "x @ y", "x % 2", "x << 2"),
        *("x == y", "x is y", "x in y", "1j", "None", "...", "'x'", "b'x'", "(x := 1)"),
        *("sqrt(*x)", "sqrt(x=1)", "max(**x)", "await x", "x; y", "import os", "x = 1", "\0"),
        *("eval('1')", "open('x')", "numpy", "np.sqrt(x)", "sqrt", "1 1", "(", "0x", "x" * 3000),
        *("(" * 500 + "x" + ")" * 500, "-" * 1500 + "x", "+".join(["x"] * 900)),
    ],
)
def test_what_is_not_on_the_lists_is_refused(text):
    with pytest.raises(ValueError, match="formula"):
        Formula.parsed(text)


@given(st.text("xyr0123456789.+-*/^%(),<>=[]{}'\"\\ abceimnostuwh_", max_size=20))
def test_any_text_is_a_formula_or_is_refused_in_one_sentence(text):
    said = "."
    try:
        assert Formula.parsed(text)(X, Y).shape == X.shape
    except ValueError as refusal:
        said = str(refusal)
    assert "\n" not in said
    assert said.endswith((".", "?"))


def test_a_function_without_its_values():
    with pytest.raises(ValueError, match=r'"sqrt" is a function; write sqrt\(…\)'):
        Formula.parsed("1 + sqrt")
