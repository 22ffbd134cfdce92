"""The pencil of a head that differs from another only in the numbers that scale its parts."""

from __future__ import annotations

from dataclasses import replace
from itertools import zip_longest
from typing import Any

import numpy as np

from membrane.records.function import Function
from membrane.records.membrane import Contribution, Membrane, OwnForm
from membrane.records.pencil import Pencil


def rescaled(pencil: Pencil, old: Membrane, new: Membrane) -> Pencil | None:
    """The pencil of ``new`` from that of ``old``, nothing assembled; None where more differs."""
    pairs = zip_longest(_terms(old), _terms(new))
    if old.fixed_edges != new.fixed_edges or not all(_alike(*pair) for pair in pairs):
        return None
    numbers = {term.key: term.scale for term in _terms(new)}
    if any(numbers[term.key] != term.scale for term in _terms(new)):
        return None  # one key, two numbers
    return pencil.at(numbers)


def _terms(membrane: Membrane) -> tuple[Contribution | OwnForm, ...]:
    return (*membrane.contributions, *membrane.own_forms)


def _alike(one: Contribution | OwnForm | None, other: Contribution | OwnForm | None) -> bool:
    """Whether two terms differ in their scale alone."""
    if isinstance(one, Contribution) and isinstance(other, Contribution):
        same = (one.key, one.field, one.where) == (other.key, other.field, other.where)
        return same and _equal(one.value, other.value)
    if isinstance(one, OwnForm) and isinstance(other, OwnForm):
        return replace(one, scale=other.scale) == other
    return False


def _equal(one: Any, other: Any) -> bool:
    """Whether two values are the same: numbers, tensors, or functions given in the same way."""
    if isinstance(one, Function) or isinstance(other, Function):
        tensors = (getattr(function, "tensor", None) for function in (one, other))
        return bool(one == other) and _equal(*tensors)
    return one is other or np.array_equal(one, other)
