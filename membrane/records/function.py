"""A coefficient that varies over the head, as a function of place."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from typing import Any, TypeAlias

import numpy as np

from membrane.records.arrays import Bools, Floats
from membrane.records.breaks import Break, Place
from membrane.records.sign import Sign

Rule = Callable[[Floats, Floats], Floats]


@dataclass(frozen=True)
class Function:
    """A number at every place (x, y), times a constant tensor where it has one.

    source : how it is given, in the study file's own keys
    rule : numbers (n,) at x (n,) and y (n,), metres from ``origin``
    kinks : points (x, y), metres from ``origin``, where the rule is not smooth
    breaks : lines, about ``origin``, along which the rule has a jump or a kink
    notes : sentences for the user on what is not known of the rule
    factor : SI units in one of the rule's
    unit, noun : the SI unit, and what the number is, such as "an areal density"
    sign : of its numbers
    origin : (x, y), metres, where the rule's own x and y are zero
    tensor : (2, 2), dimensionless, None for a plain number
    """

    source: Mapping[str, Any]
    rule: Rule = field(compare=False, repr=False)
    kinks: tuple[tuple[float, float], ...] = ()
    breaks: tuple[Break, ...] = ()
    notes: tuple[str, ...] = ()
    factor: float = 1.0
    unit: str = ""
    noun: str = "a number"
    sign: Sign = Sign.ANY
    origin: tuple[float, float] = (0.0, 0.0)
    tensor: Floats | None = field(default=None, compare=False)

    def __call__(self, x: Floats, y: Floats) -> Floats:
        """Values, SI, of shape ``x.shape``, or (2, 2, *x.shape) of a tensor."""
        numbers = self.numbers(x, y)
        return numbers if self.tensor is None else np.multiply.outer(self.tensor, numbers)

    def numbers(self, x: Floats, y: Floats) -> Floats:
        """The numbers alone, SI, of shape ``x.shape``."""
        own_x, own_y = np.ravel(x) - self.origin[0], np.ravel(y) - self.origin[1]
        return self.factor * self.rule(own_x, own_y).reshape(np.shape(x))

    def are_allowed(self, numbers: Floats) -> Bools:
        """Which numbers are finite and have the right sign."""
        allowed: Bools = np.isfinite(numbers) & np.asarray(self.sign.allows(numbers))
        return allowed

    def moved(self, origin: tuple[float, float]) -> Function:
        """The same function about another origin (x, y), metres."""
        return replace(self, origin=origin)

    def times(self, tensor: Floats) -> Function:
        """The same function, its numbers scaling a constant tensor (2, 2)."""
        return replace(self, tensor=tensor)

    def breaks_at(self, place: Place, slack: float) -> bool:
        """Whether a line of breaks passes a place (x, y), give or take ``slack`` metres."""
        own = place[0] - self.origin[0], place[1] - self.origin[1]
        return any(line.distance(own) <= slack for line in self.breaks)

    @property
    def places_of_kinks(self) -> Floats:
        """(2, n), metres, about the drawing's origin."""
        own = np.reshape(np.asarray(self.kinks, dtype=float), (-1, 2)).T
        return np.asarray(own + np.reshape(self.origin, (2, 1)))


Amount: TypeAlias = float | Function
"""A coefficient of a study: one SI number, or a function of place."""
