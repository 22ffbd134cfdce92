"""A singular vertex of a mesh, and what spoils the smoothness of modes there."""

from __future__ import annotations

from dataclasses import dataclass

from membrane.records.arrays import Floats


@dataclass(frozen=True)
class Term:
    """A term r^exponent of the modes near a vertex.

    exact : whether all other terms are its whole powers, as between two straight sides;
        if not there is a logarithm, or the exponent is only a bound from below
    """

    exponent: float
    exact: bool = False


@dataclass(frozen=True)
class Corner:
    """A vertex near which modes are not smooth.

    terms : one for each part of the head that meets there
    """

    vertex: int
    terms: tuple[Term, ...]

    @property
    def exponent(self) -> float:
        """The smallest of the exponents."""
        return min(term.exponent for term in self.terms)


@dataclass(frozen=True)
class Fan:
    """The triangles at a corner, drawn in by a power: z = w^power, w in straight triangles.

    place : (2,) of the corner, metres
    """

    place: Floats
    power: int
