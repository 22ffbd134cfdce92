"""Coefficients that vary over the head: by formula, by scattered points, by a script."""

from membrane.varying.check import numbers_at
from membrane.varying.read import KINDS, KeyProblem, is_varying, read_function

__all__ = ["KINDS", "KeyProblem", "is_varying", "numbers_at", "read_function"]
